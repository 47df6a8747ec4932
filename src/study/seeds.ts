import type { ArrayReference } from '../arrays/reference.js';
import { readVector } from './array-shapes.js';
import type { Place } from './problems.js';
import type { Reading } from './reading.js';

/** Seeds of `rows` realisations: whole numbers, each once. Null where they cannot be used, which has been reported. */
export function readSeeds(reading: Reading, folder: string, reference: ArrayReference, rows: number, source: string, where: Place): Float64Array | null {
  const seeds = readVector(reading, folder, reference, null, where);
  if (seeds === null) return null;
  const name = typeof reference === 'string' ? reference : 'the list';
  if (seeds.length !== rows) {
    reading.report({
      what: 'seeds do not match their rows',
      where,
      found: `${String(seeds.length)} seeds in ${name}, ${String(rows)} rows in ${source}`,
      expected: 'one seed for each row',
      remedy: 'check that both files come from the same set of simulations',
    });
    return null;
  }
  return checked(seeds, name, reading, where);
}

function checked(seeds: Float64Array, name: string, reading: Reading, where: Place): Float64Array | null {
  const fraction = seeds.findIndex((seed) => !Number.isSafeInteger(seed));
  if (fraction !== -1) {
    reading.report({
      what: 'a seed is not a whole number',
      where,
      found: `${name}: ${String(seeds[fraction])} at index ${String(fraction)} (counted from 0)`,
      expected: 'integers up to 2^53 in size',
      remedy: 'save the seeds as integers',
    });
    return null;
  }
  const rows = new Map<number, number>();
  for (const [row, seed] of seeds.entries()) {
    const first = rows.get(seed);
    if (first !== undefined) {
      reading.report({
        what: 'a seed stands twice',
        where,
        found: `${name}: seed ${String(seed)} at index ${String(first)} and at index ${String(row)} (counted from 0)`,
        expected: 'each seed once: a realisation that counts twice looks like more simulations than there are',
        remedy: 'remove the repeated rows and their seeds, or correct the seeds',
      });
      return null;
    }
    rows.set(seed, row);
  }
  return seeds;
}
