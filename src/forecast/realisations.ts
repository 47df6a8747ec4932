import type { RowSource, Vector } from '../arrays/rows.js';
import type { Realisations } from '../study/study.js';

/** What names a realisation within a suite: its seed, or `#` and its row where no seeds are given. */
export type Key = number | string;

/** The keys of the rows, in their order: seeds, or row indices where there are none. */
export function keysOf({ seeds, rows }: Realisations): readonly Key[] {
  return seeds === null ? Array.from({ length: rows.rows }, (_, row) => `#${String(row)}`) : Array.from(seeds);
}

/** Where each key stands. */
export function positions(keys: readonly Key[]): ReadonlyMap<Key, number> {
  return new Map(keys.map((key, row) => [key, row]));
}

/** Keys that every list has, in the order of the first. */
export function commonKeys(lists: readonly (readonly Key[])[]): readonly Key[] {
  const [first, ...others] = lists;
  if (first === undefined) return [];
  const sets = others.map((list) => new Set(list));
  return first.filter((key) => sets.every((set) => set.has(key)));
}

/** Whether two lists hold the same keys, in any order. */
export function sameKeys(a: readonly Key[], b: readonly Key[]): boolean {
  if (a.length !== b.length) return false;
  const set = new Set(a);
  return b.every((key) => set.has(key));
}

/** Chosen rows, [indices.length, columns], copied. Runs of consecutive indices are read at once. */
export function gather(source: RowSource, indices: Vector): Float64Array {
  const { columns } = source;
  const block = new Float64Array(indices.length * columns);
  for (let start = 0; start < indices.length; ) {
    const count = consecutive(indices, start);
    block.set(source.read(indices[start]!, count), start * columns);
    start += count;
  }
  return block;
}

const longestRead = 256;

function consecutive(indices: Vector, start: number): number {
  let count = 1;
  while (
    start + count < indices.length &&
    count < longestRead &&
    indices[start + count] === indices[start]! + count
  ) {
    count += 1;
  }
  return count;
}

/** Most numbers that are kept in memory rather than read again: 32 MB. */
const mostKept = 4_000_000;

/** Rows that are read once where they are few: several passes over a small file would open it as many times. */
export function kept(source: RowSource): RowSource {
  const { rows, columns, read } = source;
  if (rows * columns > mostKept) return source;
  let data: Float64Array | null = null;
  return {
    rows,
    columns,
    read: (start, count) => {
      data ??= Float64Array.from(read(0, rows));
      return data.slice(start * columns, (start + count) * columns);
    },
  };
}

/**
 * The rows of several sources side by side, aligned by key: [keys.length, sum of columns].
 * @param keys every source has all of them
 */
export function joined(sources: readonly Realisations[], keys: readonly Key[]): RowSource {
  const picks = sources.map((source) => {
    const places = positions(keysOf(source));
    return Int32Array.from(keys, (key) => places.get(key)!);
  });
  const columns = sources.reduce((sum, source) => sum + source.rows.columns, 0);
  const read = (start: number, count: number): Float64Array => {
    const block = new Float64Array(count * columns);
    let offset = 0;
    sources.forEach((source, k) => {
      const width = source.rows.columns;
      const part = gather(source.rows, picks[k]!.subarray(start, start + count));
      for (let row = 0; row < count; row += 1) {
        block.set(part.subarray(row * width, (row + 1) * width), row * columns + offset);
      }
      offset += width;
    });
    return block;
  };
  return { rows: keys.length, columns, read };
}
