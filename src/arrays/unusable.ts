import type { Unusable } from './stored-array.js';
import type { Vector } from './rows.js';

export interface Scan {
  /** Looks at a block whose first value is item `from` of the array. */
  readonly add: (block: Vector, from: number) => void;
  readonly found: () => Unusable | null;
}

/**
 * Counts NaN and infinity in blocks of an array, and keeps the first.
 * @param wide whether NaN stands for an integer beyond float64, since integers have no NaN
 * @param place row and column of an item
 */
export function unusableValues(wide: boolean, place: (item: number) => { readonly row: number; readonly column: number }): Scan {
  let count = 0;
  let first: { readonly item: number; readonly value: number } | null = null;
  const add = (block: Vector, from: number): void => {
    for (let i = 0; i < block.length; i += 1) {
      const value = block[i]!;
      // Only NaN and infinity do not vanish when taken from themselves.
      if (value - value === 0) continue;
      count += 1;
      first ??= { item: from + i, value };
    }
  };
  const found = (): Unusable | null => (first === null ? null : { count, ...place(first.item), value: nameOf(first.value, wide) });
  return { add, found };
}

function nameOf(value: number, wide: boolean): Unusable['value'] {
  if (wide) return 'an integer that float64 cannot hold exactly';
  if (Number.isNaN(value)) return 'NaN';
  return value > 0 ? 'infinity' : '-infinity';
}
