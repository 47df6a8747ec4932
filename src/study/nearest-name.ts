import type { Place, Problem } from './problems.js';

/**
 * Number of typing slips between two names: letters left out, added, changed, or two neighbours exchanged.
 * Source: Damerau 1964, Communications of the ACM 7, 171 (optimal string alignment).
 */
export function typingSlips(a: string, b: string): number {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const change = a[i - 1] === b[j - 1] ? 0 : 1;
      let least = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + change);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) least = Math.min(least, beforeLast[j - 2]! + 1);
      row.push(least);
    }
    beforeLast = last;
    last = row;
  }
  return last[b.length]!;
}

const longestCompared = 100;

/** The valid name that was probably meant: at most one slip in three letters (but one is always allowed), the first of equals; else null. */
export function nearestName(name: string, valid: Iterable<string>): string | null {
  if (name.length > longestCompared) return null;
  let nearest: string | null = null;
  let least = Math.max(1, Math.floor(name.length / 3)) + 1;
  for (const candidate of valid) {
    const slips = candidate.toLowerCase() === name.toLowerCase() ? 0 : typingSlips(name, candidate);
    if (slips < least) {
      nearest = candidate;
      least = slips;
    }
  }
  return nearest;
}

/** A name that stands for nothing. `kind` with its article: `a probe`. */
export function unknownName(kind: string, name: string, valid: readonly string[], where: Place): Problem {
  const nearest = nearestName(name, valid);
  const distinct = [...new Set(valid)];
  return {
    what: `a name is not that of ${kind}`,
    where,
    found: name,
    expected: distinct.length > 1 ? `one of ${distinct.join(', ')}` : (distinct[0] ?? 'none is defined'),
    remedy: nearest === null ? (distinct.length === 0 ? 'remove it' : distinct.length === 1 ? 'use this name' : 'use one of these names') : `write ${nearest}, if that is what was meant`,
  };
}
