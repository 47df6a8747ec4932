import type { Place } from './problems.js';
import type { Reading } from './reading.js';

/** Reports each name that stands in a list for the second time. `kind` with its article: `a probe`. */
export function reportDuplicates(kind: string, names: readonly string[], place: (index: number) => Place, { report }: Pick<Reading, 'report'>): void {
  const seen = new Map<string, number>();
  names.forEach((name, i) => {
    const first = seen.get(name);
    if (first === undefined) {
      seen.set(name, i);
      return;
    }
    report({
      what: `the name of ${kind} stands twice`,
      where: place(i),
      found: `${name}, as number ${String(first + 1)} and again as number ${String(i + 1)}`,
      expected: 'each name once',
      remedy: 'rename or remove one of the two',
    });
  });
}
