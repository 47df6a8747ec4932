import type { PhrasingContent } from 'mdast';
import { roundTo, significant, thinSpace, withInterval } from '../../results/rounding.js';
import type { Estimate, Status, Verdict } from '../../results/schema.js';
import { marked } from '../markdown/nodes.js';

/** What stands where there is no number. */
export function noNumber(status: Status): string {
  return status === 'not assessable' ? 'not assessable' : 'cannot tell';
}

/** "1.30 (1.13 to 1.50)", or why there is none. */
export function corrected(estimate: Estimate): string {
  if (estimate.corrected === null) return noNumber(estimate.status);
  return withInterval(estimate.corrected, estimate.standardError, estimate.interval);
}

/** The same in a sentence: "1.30 (1.13 to 1.50 at 68 %)". */
export function correctedInWords(estimate: Estimate): string {
  return atOneSigma(corrected(estimate));
}

export function atOneSigma(words: string): string {
  return words.replace(/\)$/, ` at 68${thinSpace}%)`);
}

/** The raw value has the digits of the corrected one: it has no uncertainty of its own. */
export function raw(estimate: Estimate): string {
  if (estimate.raw === null) return 'does not exist';
  return estimate.corrected === null ? significant(estimate.raw, 2) : roundTo(estimate.raw, estimate.standardError);
}

/** Another view of the same number, with the same digits. */
export function view(value: number | null, estimate: Estimate): string {
  if (value === null) return 'none';
  return estimate.corrected === null ? significant(value, 2) : roundTo(value, estimate.standardError);
}

/** A status or a verdict: a word in Markdown, a word with a sign of its own in HTML. */
export function sign(word: Status | Verdict): PhrasingContent {
  return marked(word, 'sign', word.replaceAll(' ', '-'));
}

/** "1 claim", "3 claims", "no claims". */
export function counted(n: number, one: string, many = `${one}s`): string {
  if (n === 0) return `no ${many}`;
  return n === 1 ? `1 ${one}` : `${String(n)} ${many}`;
}

export function capital(words: string): string {
  return words.slice(0, 1).toUpperCase() + words.slice(1);
}
