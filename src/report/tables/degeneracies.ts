import { significant } from '../../results/rounding.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** How far each parameter is tied to all others together. */
export const globalCorrelations: TableMaker = (results) => {
  const combinations = Object.entries(results.combinations);
  return {
    id: 'global-correlations',
    caption: say`Global correlation of each parameter with all others together, from the corrected matrices: 0 is free, 1 is a perfect degeneracy.`,
    columns: [words('Parameter'), ...combinations.map(([name]) => numbers(combinationLabel(results, name)))],
    rows: results.parameters.map(({ name }) => [
      parameterLabel(results, name),
      ...combinations.map(([, { globalCorrelation }]) => {
        const value = globalCorrelation[name];
        if (value === undefined) return 'not constrained';
        return value === null ? 'cannot tell' : significant(value);
      }),
    ]),
  };
};
