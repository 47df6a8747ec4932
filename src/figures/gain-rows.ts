import type { Improvement, Results } from '../results/schema.js';
import { parameterNames } from './labels.js';

export type Kind = 'marginalised' | 'fixed';

/** One row: a parameter in a combination. */
export interface GainRow {
  readonly parameter: string;
  readonly combination: string;
  readonly label: string;
  /** Distance of the row's middle from the top of the rows. */
  readonly place: number;
  readonly look: number;
  readonly gain: Improvement;
}

/** The name of a parameter, or of the nuisance parameters together, over the rows. */
export interface GainHead {
  readonly kind: 'parameter' | 'nuisance';
  readonly parameter: string;
  readonly place: number;
}

interface Arranged {
  readonly rows: readonly GainRow[];
  readonly heads: readonly GainHead[];
  readonly height: number;
  /** Nuisance parameters that are left to the table. */
  readonly leftOut: readonly string[];
}

const rowHeight = 22;
const gap = 14;
/** Beyond this many rows nuisance parameters are left to the table: the first screen is for the targets. */
const mostRows = 48;

/** Rows from top to bottom: targets, then nuisance parameters under a head of their own; `headHeight` is the room that a parameter's name takes. */
export function arrangeGains(results: Results, kind: Kind, headHeight: number): Arranged {
  const combinations = Object.keys(results.combinations);
  const improvements = Object.entries(results.improvements);
  const [targets, nuisance] = [parameterNames(results, 'target'), parameterNames(results, 'nuisance')];
  const fits = targets.length === 0 || (targets.length + nuisance.length) * improvements.length <= mostRows;
  const rows: GainRow[] = [];
  const heads: GainHead[] = [];
  let place = 0;
  const add = (parameter: string): void => {
    if (rows.length > 0) place += gap;
    heads.push({ kind: 'parameter', parameter, place: place + (headHeight > 0 ? headHeight / 2 : rowHeight / 2) });
    place += headHeight;
    for (const [combination, gainsOf] of improvements) {
      const label = results.combinations[combination]?.label ?? combination;
      rows.push({ parameter, combination, label, place: place + rowHeight / 2, look: combinations.indexOf(combination), gain: gainsOf[parameter]![kind] });
      place += rowHeight;
    }
  };
  targets.forEach(add);
  if (fits && nuisance.length > 0) {
    if (targets.length > 0) {
      heads.push({ kind: 'nuisance', parameter: '', place: place + 24 });
      place += 26;
    }
    nuisance.forEach(add);
  }
  return { rows, heads, height: place, leftOut: fits ? [] : nuisance };
}
