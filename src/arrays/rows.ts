/** A vector that is only read. `Readonly<Float64Array>` would still let `.fill()` through. */
export interface Vector {
  readonly length: number;
  readonly [index: number]: number;
}

/** A row-major matrix in one contiguous block: element (i, j) is `data[i * columns + j]`. */
export interface Matrix {
  readonly data: Float64Array;
  readonly rows: number;
  readonly columns: number;
}

/**
 * Rows of an array that need not fit in memory: [rows, columns], read in chunks.
 * `read(start, count)` gives `count` rows from `start`, row-major, as finite float64 numbers. The block it returns is
 * reused by the next call: copy what must last.
 */
export interface RowSource {
  readonly rows: number;
  readonly columns: number;
  readonly read: (start: number, count: number) => Float64Array;
}
