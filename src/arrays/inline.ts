import { ArrayFault } from './fault.js';
import type { NumericArray } from './stored-array.js';

/** A list of numbers as a vector, a list of such lists as a matrix. */
export function inlineArray(list: readonly unknown[], name: string): NumericArray {
  if (list.every((item) => typeof item === 'number')) return fromValues(Float64Array.from(list), [list.length], name);
  if (list.every((item) => typeof item === 'string')) {
    throw new ArrayFault('a list of files is not read by this version', {
      found: `${name} is a list of ${String(list.length)} names`,
      expected: 'one .npy file, or a list of numbers',
      remedy: 'join the files into one with numpy.concatenate and numpy.save',
    });
  }
  return matrixOf(list, name);
}

function matrixOf(list: readonly unknown[], name: string): NumericArray {
  const isRow = (item: unknown): item is readonly number[] => Array.isArray(item) && item.every((value) => typeof value === 'number');
  const rows = list.filter(isRow);
  const columns = rows[0]?.length ?? 0;
  const wrong = list.findIndex((item) => !isRow(item) || item.length !== columns);
  if (wrong !== -1) {
    throw new ArrayFault('a list is neither a vector nor a matrix', {
      found: `item ${String(wrong)} (counted from 0) of ${name} is not like the first`,
      expected: 'numbers only, or rows of numbers of one length',
      remedy: 'write every row with the same number of values',
    });
  }
  return fromValues(Float64Array.from(rows.flat()), [rows.length, columns], name);
}

function fromValues(values: Float64Array, shape: readonly number[], name: string): NumericArray {
  const [rows = 1, columns = 1] = shape;
  const read = (start: number, count: number): Float64Array => values.slice(start * columns, (start + count) * columns);
  return { name, shape, rows: () => ({ rows, columns, read }), values: () => values.slice() };
}
