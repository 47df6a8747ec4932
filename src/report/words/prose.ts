import { thinSpace } from '../../results/rounding.js';

/** A sentence of the results as it is set: no break before a per cent sign, real minus signs. */
export function prose(sentence: string): string {
  return sentence.replace(/(\d) %/g, `$1${thinSpace}%`).replace(/(^|[\s(])-(?=\d)/g, '$1\u2212');
}
