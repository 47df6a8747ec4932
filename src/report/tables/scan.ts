import { asGiven, roundTo } from '../../results/rounding.js';
import type { Results, ScanResult } from '../../results/schema.js';
import type { Said } from '../markdown/nodes.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel, parameterOf, targets, unitAfter, withUnit } from '../words/labels.js';
import type { ReportTable, TableMaker } from './table.js';
import { numbers, words } from './table.js';

type Kind = 'marginalised' | 'fixed';
type Values = ScanResult['errors'][string]['marginalised'];

export const scan: TableMaker = (results) =>
  of(results, 'marginalised', { id: 'scan', caption: say`Corrected marginalised errors against the cut.` });

export const fixedScan: TableMaker = (results) =>
  of(results, 'fixed', { id: 'scan-fixed', caption: say`Corrected errors against the cut, all other parameters fixed.` });

function of(results: Results, kind: Kind, head: Pick<ReportTable, 'id' | 'caption'>): ReportTable | null {
  const scans = Object.entries(results.scan);
  const first = scans[0]?.[1];
  if (first === undefined) return null;
  const cuts = [...new Set(scans.flatMap(([, { at }]) => at))].sort((a, b) => (first.keep === 'below' ? a - b : b - a));
  const rows = targets(results).flatMap((name) =>
    scans.flatMap(([combination, found]): Said[][] => {
      const values = found.errors[name]?.[kind];
      if (values === undefined) return [];
      const label = withUnit(parameterLabel(results, name), parameterOf(results, name).unit);
      return [[label, combinationLabel(results, combination), ...cuts.map((cut) => atCut(values, found.at.indexOf(cut)))]];
    }),
  );
  const columns = [words('Parameter'), words('Combination'), ...cuts.map((cut) => numbers(cutLabel(first, cut)))];
  return { ...head, columns, rows };
}

export function atCut(values: Values, i: number): string {
  const value = values.corrected[i];
  if (value === undefined) return 'no such cut';
  const relative = values.relativeStandardError[i] ?? null;
  if (value === null) return values.status[i] === 'not assessable' ? 'not assessable' : 'cannot tell';
  return roundTo(value, relative === null ? null : value * relative);
}

/** "ell ≤ 900 h/Mpc" */
export function cutLabel({ coordinate, keep, unit }: Pick<ScanResult, 'coordinate' | 'keep' | 'unit'>, cut: number) {
  return say`${coordinate} ${keep === 'below' ? '≤' : '≥'} ${asGiven(cut)}${unitAfter(unit)}`;
}
