import type { RowSource } from './rows.js';

/** An array of numbers of any source: a file, or a list written where it is used. */
export interface NumericArray {
  /** As the user wrote it, for messages. */
  readonly name: string;
  /** No, one or two dimensions. */
  readonly shape: readonly number[];
  /** [N] serves as [N, 1], no dimension as [1, 1]. */
  readonly rows: () => RowSource;
  /** Every value, row-major, in a block of its own. For small arrays: refused above 2^27 values. */
  readonly values: () => Float64Array;
}

/** An array in a file. */
export interface StoredArray extends NumericArray {
  /** Reads the whole file once: its digest, and whether every value can be computed with. */
  readonly inspect: () => Inspection;
}

export interface Inspection {
  readonly sha256: string;
  readonly bytes: number;
  readonly unusable: Unusable | null;
}

/** Values that are no finite float64 number. Row and column count from 0. */
export interface Unusable {
  readonly count: number;
  readonly row: number;
  readonly column: number;
  readonly value: 'NaN' | 'infinity' | '-infinity' | 'an integer that float64 cannot hold exactly';
}

/** `[3, 4]`, as NumPy would print it. */
export function shapeText(shape: readonly (number | bigint)[]): string {
  return `[${shape.map(String).join(', ')}]`;
}
