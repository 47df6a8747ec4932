import type { Improvement, Results } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel, nuisances, parameterLabel, targets } from '../words/labels.js';
import { corrected, raw, sign, view } from '../words/values.js';
import type { ReportTable, TableMaker } from './table.js';
import { numbers, words } from './table.js';

type Kind = 'marginalised' | 'fixed';

const columns = [
  words('Parameter'),
  words('Combination'),
  numbers('Raw'),
  numbers('Sham (16 % to 84 %)'),
  numbers('Corrected (68 % interval)'),
  words('Status'),
];

export const improvements: TableMaker = (results) =>
  of(results, targets(results), 'marginalised', {
    id: 'improvements',
    caption: say`Improvement of the marginalised errors: error of ${combinationLabel(results, results.study.baseline)} over error of the combination; above 1 is better. Sham is what the noise of the added derivatives alone would show, with the range of two thirds of ${String(results.rules.shamDraws)} draws.`,
  });

export const fixedImprovements: TableMaker = (results) =>
  of(results, targets(results), 'fixed', {
    id: 'improvements-fixed',
    caption: say`The same with all other parameters fixed: what the responses gain, without broken degeneracies.`,
  });

export const nuisanceImprovements: TableMaker = (results) =>
  of(results, nuisances(results), 'marginalised', {
    id: 'improvements-nuisance',
    caption: say`Improvement of the marginalised errors of the nuisance parameters.`,
  });

function of(results: Results, parameters: readonly string[], kind: Kind, head: Pick<ReportTable, 'id' | 'caption'>): ReportTable {
  const rows = parameters.flatMap((name) =>
    Object.entries(results.improvements).flatMap(([combination, found]) => {
      const gain = found[name]?.[kind];
      if (gain === undefined) return [];
      return [[parameterLabel(results, name), combinationLabel(results, combination), raw(gain), shamWithRange(gain), corrected(gain), sign(gain.status)]];
    }),
  );
  return { ...head, columns, rows };
}

/** With the digits of the gain that it stands beside. */
export function sham(gain: Improvement): string {
  return gain.sham === null ? 'none' : view(gain.sham, gain);
}

function shamWithRange(gain: Improvement): string {
  const range = gain.shamInterval;
  return range === null ? sham(gain) : `${sham(gain)} (${view(range[0], gain)} to ${view(range[1], gain)})`;
}
