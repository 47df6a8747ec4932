import { createHash } from 'node:crypto';
import { ArrayFault } from './fault.js';
import type { NpyHeader } from './npy-header.js';
import { readNpyHeader } from './npy-header.js';
import type { OpenFile } from './regular-file.js';
import { changedFile, readExactly, withRegularFile } from './regular-file.js';
import type { RowSource } from './rows.js';
import type { Inspection, StoredArray } from './stored-array.js';
import { shapeText } from './stored-array.js';
import { unusableValues } from './unusable.js';

const itemsInspectedAtOnce = 2 ** 18;
const mostValues = 2 ** 27;

/**
 * Opens an array that NumPy saved. The header is read and checked now, the items when they are asked for, by positioned
 * reads into a buffer that is used again. No descriptor stays open between reads; a file that changed since is refused.
 * @param name the file as the user knows it, for messages
 */
export function openNpy(path: string, name: string): StoredArray {
  return withRegularFile(path, name, (first) => {
    const header = readNpyHeader(name, first.bytes, (position, length) => {
      const bytes = new Uint8Array(Math.max(0, Math.min(length, first.bytes - position)));
      readExactly(first, bytes, position, name);
      return bytes;
    });
    const use = <T>(action: (file: OpenFile) => T): T =>
      withRegularFile(path, name, (file) => {
        if (file.stamp !== first.stamp) throw changedFile(name);
        return action(file);
      });
    const rows = (): RowSource => rowSource(header, name, use);
    return { name, shape: header.shape, rows, values: () => allValues(rows(), header.shape, name), inspect: () => use((file) => inspect(file, header, name)) };
  });
}

type Use = <T>(action: (file: OpenFile) => T) => T;
type ItemReader = (file: OpenFile, position: number, count: number, seen?: (bytes: Uint8Array) => void) => Float64Array;

/** Reads consecutive items as numbers. The block is used again by the next call. */
function itemReader({ type }: NpyHeader, name: string): ItemReader {
  let bytes = new ArrayBuffer(0);
  let numbers = new Float64Array(0);
  return (file, position, count, seen) => {
    const length = count * type.size;
    if (bytes.byteLength < length) {
      bytes = new ArrayBuffer(Math.ceil(length / 8) * 8);
      numbers = new Float64Array(count);
    } else if (numbers.length < count) numbers = new Float64Array(count);
    const view = new Uint8Array(bytes, 0, length);
    readExactly(file, view, position, name);
    seen?.(view);
    if (type.swapped) swapBytes(bytes, length, type.size);
    return type.decode(bytes, count, numbers);
  };
}

function swapBytes(bytes: ArrayBuffer, length: number, size: number): void {
  const buffer = Buffer.from(bytes, 0, length);
  if (size === 2) buffer.swap16();
  else if (size === 4) buffer.swap32();
  else buffer.swap64();
}

function rowSource(header: NpyHeader, name: string, use: Use): RowSource {
  const [rows = 1, columns = 1] = header.shape;
  const readItems = itemReader(header, name);
  const readBlock = header.fortran && columns > 1 ? stridedBlock(header, rows, columns, readItems) : plainBlock(header, columns, readItems);
  const read = (start: number, count: number): Float64Array => {
    if (start < 0 || count < 0 || start + count > rows) {
      throw new RangeError(`rows ${String(start)} to ${String(start + count)} of ${String(rows)} were asked for`);
    }
    return use((file) => readBlock(file, start, count));
  };
  return { rows, columns, read };
}

type BlockReader = (file: OpenFile, start: number, count: number) => Float64Array;

function plainBlock(header: NpyHeader, columns: number, readItems: ItemReader): BlockReader {
  return (file, start, count) => readItems(file, header.start + start * columns * header.type.size, count * columns);
}

/** In Fortran order each column of a block stands elsewhere: one read a column, so that blocks of many rows are cheap and single rows are not. */
function stridedBlock(header: NpyHeader, rows: number, columns: number, readItems: ItemReader): BlockReader {
  let block = new Float64Array(0);
  return (file, start, count) => {
    if (block.length < count * columns) block = new Float64Array(count * columns);
    for (let column = 0; column < columns; column += 1) {
      const items = readItems(file, header.start + (column * rows + start) * header.type.size, count);
      for (let row = 0; row < count; row += 1) block[row * columns + column] = items[row]!;
    }
    return block.subarray(0, count * columns);
  };
}

function allValues(source: RowSource, shape: readonly number[], name: string): Float64Array {
  const count = source.rows * source.columns;
  if (count > mostValues) {
    throw new ArrayFault('an array is too large to be held at once', {
      found: `${name} has the shape ${shapeText(shape)}`,
      expected: `at most ${String(mostValues)} values`,
      remedy: 'check that this is the file you meant',
    });
  }
  return source.read(0, source.rows).slice();
}

/** In one pass through the file, in its own order. */
function inspect(file: OpenFile, header: NpyHeader, name: string): Inspection {
  const hash = createHash('sha256');
  const preamble = new Uint8Array(header.start);
  readExactly(file, preamble, 0, name);
  hash.update(preamble);
  const [rows = 1, columns = 1] = header.shape;
  const readItems = itemReader(header, name);
  const scan = unusableValues(header.type.wide, (item) =>
    header.fortran ? { row: item % rows, column: Math.floor(item / rows) } : { row: Math.floor(item / columns), column: item % columns },
  );
  const total = rows * columns;
  for (let item = 0; item < total; item += itemsInspectedAtOnce) {
    const count = Math.min(itemsInspectedAtOnce, total - item);
    scan.add(readItems(file, header.start + item * header.type.size, count, (bytes) => hash.update(bytes)), item);
  }
  return { sha256: hash.digest('hex'), bytes: file.bytes, unusable: scan.found() };
}
