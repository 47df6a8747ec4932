import type { Matrix } from '../arrays/rows.js';

/**
 * How far the halves of a symmetric matrix may differ, in units of sqrt(a_ii a_jj). Single precision rounds each of a covariance's terms at
 * 6e-8, so a matrix that was computed in it may be off by some 1e-7; no forecast notices 1e-6.
 */
const mostAsymmetry = 1e-6;

export interface Asymmetry {
  readonly row: number;
  readonly column: number;
}

/** The first pair of elements that differ by more than rounding. */
export function asymmetry({ data, rows }: Matrix): Asymmetry | null {
  for (let row = 0; row < rows; row += 1) {
    for (let column = 0; column < row; column += 1) {
      const scale = Math.sqrt(Math.abs(data[row * rows + row]! * data[column * rows + column]!));
      if (Math.abs(data[row * rows + column]! - data[column * rows + row]!) > mostAsymmetry * scale) return { row, column };
    }
  }
  return null;
}

/** The mean of a matrix and its transpose. */
export function symmetrised({ data, rows }: Matrix): Matrix {
  const mean = Float64Array.from(data, (value, i) => value / 2 + data[(i % rows) * rows + Math.floor(i / rows)]! / 2);
  return { data: mean, rows, columns: rows };
}

/** The first diagonal element that is not above 0 (or below 0, where 0 is allowed). */
export function wrongDiagonal({ data, rows }: Matrix, zeroAllowed: boolean): number | null {
  for (let row = 0; row < rows; row += 1) {
    const value = data[row * rows + row]!;
    if (zeroAllowed ? value < 0 : value <= 0) return row;
  }
  return null;
}

/**
 * Whether a symmetric matrix is positive semidefinite, by Cholesky with full pivoting on the matrix scaled to unit diagonal:
 * it is when no pivot is below 0 and nothing is left once the pivots are used up, both to within `mostAsymmetry` for rounding.
 * Source: Higham 2002, Accuracy and Stability of Numerical Algorithms, section 10.3.
 */
export function isPositiveSemidefinite(matrix: Matrix): boolean {
  const size = matrix.rows;
  const left = scaled(matrix);
  if (left === null) return false;
  const waiting = new Set(Array.from({ length: size }, (_, i) => i));
  while (waiting.size > 0) {
    const diagonal = [...waiting].map((i) => left[i * size + i]!);
    if (diagonal.some((value) => value < -mostAsymmetry)) return false;
    const largest = Math.max(...diagonal);
    if (largest <= mostAsymmetry) return [...waiting].every((i) => [...waiting].every((j) => Math.abs(left[i * size + j]!) <= mostAsymmetry));
    const pivot = [...waiting].find((i) => left[i * size + i] === largest)!;
    waiting.delete(pivot);
    for (const i of waiting) {
      for (const j of waiting) left[i * size + j]! -= (left[i * size + pivot]! * left[pivot * size + j]!) / largest;
    }
  }
  return true;
}

/** Scaled to unit diagonal. Where the diagonal is 0 the whole row must be, else the matrix is indefinite: null. */
function scaled({ data, rows }: Matrix): Float64Array | null {
  const out = new Float64Array(data.length);
  for (let i = 0; i < rows; i += 1) {
    for (let j = 0; j < rows; j += 1) {
      const value = data[i * rows + j]!;
      const scale = Math.sqrt(Math.abs(data[i * rows + i]!)) * Math.sqrt(Math.abs(data[j * rows + j]!));
      if (scale === 0 && value !== 0) return null;
      out[i * rows + j] = scale === 0 ? 0 : value / scale;
    }
  }
  return out;
}
