import { count } from '../../results/rounding.js';
import { listed, say } from '../markdown/nodes.js';
import { combinationLabel, probeLabel } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** What is compared with what. */
export const combinations: TableMaker = (results) => ({
  id: 'combinations',
  caption: say`The combinations. The smallest number of realisations over suites, runs and parameters counts.`,
  columns: [
    words('Combination'),
    words('Probes'),
    numbers('Entries D'),
    numbers('Fiducial realisations'),
    numbers('Derivative realisations'),
    words('Role'),
  ],
  rows: Object.entries(results.combinations).map(([name, found]) => [
    combinationLabel(results, name),
    listed(found.probes.map((probe) => probeLabel(results, probe))),
    count(found.entries),
    found.fiducialRealisations === null ? 'not an estimate' : count(found.fiducialRealisations),
    leastDerivatives(found.derivativeRealisations),
    name === results.study.baseline ? 'baseline' : 'compared with it',
  ]),
});

export function leastDerivatives(realisations: Readonly<Record<string, number | null>>): string {
  const known = Object.values(realisations).filter((one) => one !== null);
  return known.length === 0 ? 'exact or not known' : count(Math.min(...known));
}
