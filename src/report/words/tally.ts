import type { Estimate, Improvement, Results, Status, Verdict } from '../../results/schema.js';
import { targets } from './labels.js';

/** One estimate with its names. */
export interface Named<T extends Estimate> {
  readonly parameter: string;
  readonly combination: string;
  readonly estimate: T;
}

/** Marginalised errors of the target parameters. */
export function targetErrors(results: Results): readonly Named<Estimate>[] {
  return targets(results).flatMap((parameter) =>
    Object.entries(results.combinations).flatMap(([combination, { errors }]) => {
      const estimate = errors[parameter]?.marginalised;
      return estimate === undefined ? [] : [{ parameter, combination, estimate }];
    }),
  );
}

/** Improvements of the marginalised errors of the target parameters. */
export function targetGains(results: Results): readonly Named<Improvement>[] {
  return targets(results).flatMap((parameter) =>
    Object.entries(results.improvements).flatMap(([combination, gains]) => {
      const estimate = gains[parameter]?.marginalised;
      return estimate === undefined ? [] : [{ parameter, combination, estimate }];
    }),
  );
}

const statusOrder: readonly Status[] = ['settled', 'correctable', 'unsettled', 'undetermined', 'not assessable'];
const verdictOrder: readonly Verdict[] = ['supported', 'contradicted', 'too close to call', 'not settled', 'not assessable'];

/** "2 are settled, 1 is correctable", in the order of the rules, what does not occur left out. */
export function tallyStatuses(statuses: readonly Status[]): readonly string[] {
  return tally(statuses, statusOrder);
}

export function tallyVerdicts(verdicts: readonly Verdict[]): readonly string[] {
  return tally(verdicts, verdictOrder);
}

/** "Of 5 claims, 2 are supported and 3 are contradicted"; "The one claim is supported". */
export function ofAll(things: string, one: string, tallied: readonly string[], n: number): string {
  if (n === 1) return `The one ${one} ${tallied[0]?.replace(/^1 /, '') ?? ''}`;
  const last = tallied.at(-1) ?? '';
  return `Of ${String(n)} ${things}, ${tallied.length === 1 ? last : `${tallied.slice(0, -1).join(', ')} and ${last}`}`;
}

function tally<T extends string>(words: readonly T[], order: readonly T[]): readonly string[] {
  return order.flatMap((word) => {
    const n = words.filter((one) => one === word).length;
    if (n === 0) return [];
    if (n === words.length && n > 1) return [`all are ${word}`];
    return [`${String(n)} ${n === 1 ? 'is' : 'are'} ${word}`];
  });
}

/** A value that may be quoted, in its corrected form. */
export function quotable({ status }: Estimate): boolean {
  return status === 'settled' || status === 'correctable';
}
