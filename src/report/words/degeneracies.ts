import type { PhrasingContent } from 'mdast';
import { significant } from '../../results/rounding.js';
import type { CombinationResult, Results } from '../../results/schema.js';
import { list, paragraph, say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';

export const degeneracyLead: SentenceMaker = (results) => [
  paragraph(...say`A parameter that is strongly correlated with another is known only as far as the other is. The strongest correlation of two parameters, with`),
  list(
    Object.entries(results.combinations).map(([name, found]): PhrasingContent[] => {
      const pair = strongest(found);
      if (pair === null) return say`${combinationLabel(results, name)}: cannot tell, the corrected matrix has no inverse.`;
      return say`${combinationLabel(results, name)}: ${parameterLabel(results, pair.first)} and ${parameterLabel(results, pair.second)}, ${significant(pair.value, 2)}.`;
    }),
  ),
];

interface Pair {
  readonly first: string;
  readonly second: string;
  readonly value: number;
}

function strongest({ correlation, parameters }: CombinationResult): Pair | null {
  let found: Pair | null = null;
  parameters.forEach((first, i) => {
    parameters.slice(0, i).forEach((second, j) => {
      const value = correlation.corrected?.[i]?.[j];
      if (value !== undefined && (found === null || Math.abs(value) > Math.abs(found.value))) found = { first: second, second: first, value };
    });
  });
  return found;
}

/** The strongest of all, for the contents. */
export function degeneracyState(results: Results): string {
  const values = Object.values(results.combinations).flatMap((found) => strongest(found)?.value ?? []);
  if (values.length === 0) return 'cannot tell';
  return `correlations up to ${significant(Math.max(...values.map(Math.abs)), 2)}`;
}
