import { roundTo } from '../results/rounding.js';
import type { Results } from '../results/schema.js';
import type { FigureWords } from './figure.js';
import type { GainRow, Kind } from './gain-rows.js';
import { parameterName } from './labels.js';

/** Title, finding and caption of a figure of gains. */
export function gainWords(results: Results, kind: Kind, rows: readonly GainRow[], leftOut: readonly string[]): FigureWords {
  const baseline = results.combinations[results.study.baseline]?.label ?? results.study.baseline;
  const others = kind === 'marginalised' ? 'with the other parameters free' : 'with the other parameters known';
  const omitted = leftOut.length === 0 ? '' : ` The ${String(leftOut.length)} nuisance parameters are in the table.`;
  return {
    name: `gains-${kind}`,
    title: `Gain over ${baseline}, ${kind}`,
    alternative: `Gain over ${baseline}, ${others}. ${finding(rows)} ${rows.map((row) => sentence(results, row)).join(' ')}`,
    caption:
      `Gain over ${baseline}, ${others}. The corrected gain (filled) is the one to quote, with its 68 % (thick) and 95 % (thin) interval. ` +
      `A raw gain (hollow) no larger than the sham gain (cross) is what the noise of the derivatives alone would have shown.${omitted}`,
  };
}

/** How many gains stand, in one sentence. */
function finding(rows: readonly GainRow[]): string {
  const above = rows.filter(({ gain }) => gain.interval95 !== null && gain.interval95[0] > 1).length;
  const unknown = rows.filter(({ gain }) => gain.corrected === null).length;
  const alike = rows.filter(({ gain }) => gain.raw !== null && gain.sham !== null && gain.raw <= gain.sham).length;
  const all = String(rows.length);
  return `Of ${all} corrected gains, ${String(above)} are above 1 at 95 %, and ${String(unknown)} cannot be told; ${String(alike)} raw gains are no larger than their sham gain.`;
}

function sentence(results: Results, { parameter, label, gain }: GainRow): string {
  const raw = gain.raw === null ? 'none' : roundTo(gain.raw, gain.standardError);
  const sham = gain.sham === null ? 'none' : roundTo(gain.sham, null);
  const corrected = gain.corrected === null ? 'cannot tell' : roundTo(gain.corrected, gain.standardError);
  return `${parameterName(results, parameter)}, ${label}: raw ${raw}, sham ${sham}, corrected ${corrected} (${gain.status}).`;
}
