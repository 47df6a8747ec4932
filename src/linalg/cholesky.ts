import type { Matrix } from '../arrays/rows.js';

/** Lower triangle L of C = L L^T, [D, D] row-major with zeros above the diagonal. Only `cholesky` makes one. */
export interface CholeskyFactor extends Matrix {
  readonly role: 'Cholesky factor';
}

export type Factorisation =
  | { readonly kind: 'factor'; readonly factor: CholeskyFactor }
  | { readonly kind: 'not positive definite'; readonly pivot: number };

/**
 * A pivot this small beside its own diagonal element is rounding noise: the variance that is left of an entry once the
 * entries before it are known. Double precision carries 2.2e-16 and a factorisation of a few thousand entries loses two
 * or three digits of it.
 */
const smallestPivot = 1e-13;

/**
 * Cholesky factor of a symmetric positive-definite matrix.
 * C = L L^T, by rows (Cholesky-Banachiewicz), so that the leading block of L is the factor of the leading block of C.
 * @param matrix [D, D], only the lower triangle is read
 * @returns the factor, or the first entry whose variance is explained by those before it (relative pivot below 1e-13).
 * Accuracy: L L^T reproduces C to a few units in the last place times sqrt(D) (test/linalg/cholesky.test.ts).
 * Source: Golub & Van Loan, Matrix Computations, section 4.2 (from memory).
 */
export function cholesky(matrix: Matrix): Factorisation {
  const size = matrix.rows;
  const lower = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    const rowI = i * size;
    for (let j = 0; j <= i; j += 1) {
      const rowJ = j * size;
      let sum = matrix.data[rowI + j]!;
      for (let k = 0; k < j; k += 1) sum -= lower[rowI + k]! * lower[rowJ + k]!;
      if (j < i) {
        lower[rowI + j] = sum / lower[rowJ + j]!;
      } else if (sum > smallestPivot * matrix.data[rowI + i]!) {
        lower[rowI + i] = Math.sqrt(sum);
      } else {
        return { kind: 'not positive definite', pivot: i };
      }
    }
  }
  return { kind: 'factor', factor: { data: lower, rows: size, columns: size, role: 'Cholesky factor' } };
}

/**
 * Whitens vectors in place: each row y becomes w with L w = y, so that w_a . w_b = y_a^T C^-1 y_b. The leading n
 * entries of w belong to the leading n entries of y alone.
 * @param factor [D, D]
 * @param vectors [n, D], overwritten
 */
export function whiten(factor: CholeskyFactor, vectors: Matrix): void {
  const size = factor.rows;
  const { data } = vectors;
  for (let i = 0; i < size; i += 1) {
    const row = i * size;
    const pivot = factor.data[row + i]!;
    // Rows of L in the outer loop: each stays in the first-level cache while every vector uses it.
    for (let start = 0; start < data.length; start += size) {
      let sum = data[start + i]!;
      for (let k = 0; k < i; k += 1) sum -= factor.data[row + k]! * data[start + k]!;
      data[start + i] = sum / pivot;
    }
  }
}

/**
 * Finishes C_n z = y for the leading block of size n, given the whitened w: solves L_n^T z = w.
 * @returns z, [n]
 */
export function unwhiten(factor: CholeskyFactor, whitened: Float64Array, entries: number): Float64Array {
  const size = factor.columns;
  const solution = Float64Array.from(whitened.subarray(0, entries));
  for (let i = entries - 1; i >= 0; i -= 1) {
    const value = solution[i]! / factor.data[i * size + i]!;
    solution[i] = value;
    for (let k = 0; k < i; k += 1) solution[k] = solution[k]! - factor.data[i * size + k]! * value;
  }
  return solution;
}
