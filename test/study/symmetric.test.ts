import { describe, expect, it } from 'vitest';
import { asymmetry, isPositiveSemidefinite, symmetrised, wrongDiagonal } from '../../src/study/symmetric.js';
import { gaussians } from '../fixtures/study-folder.js';

const matrix = (rows: number, ...values: number[]) => ({ data: Float64Array.from(values), rows, columns: rows });

describe('positive semidefinite matrices', () => {
  it('are those with no negative eigenvalue', () => {
    // Eigenvalues of [[1, c], [c, 1]] are 1 + c and 1 - c.
    expect(isPositiveSemidefinite(matrix(2, 1, 0.999, 0.999, 1))).toBe(true);
    expect(isPositiveSemidefinite(matrix(2, 1, 1, 1, 1))).toBe(true);
    expect(isPositiveSemidefinite(matrix(2, 1, 1.001, 1.001, 1))).toBe(false);
    expect(isPositiveSemidefinite(matrix(2, -1, 0, 0, 1))).toBe(false);
  });

  it('may be singular: products of rank 3 in 6 dimensions, in any unit', () => {
    for (let seed = 1; seed <= 20; seed += 1) {
      const factor = gaussians(seed, 18);
      const units = [1e-12, 1, 1e9, 3, 1e-3, 40];
      const product = matrix(6, ...Array.from({ length: 36 }, (_, i) => {
        const [row, column] = [Math.floor(i / 6), i % 6];
        return units[row]! * units[column]! * [0, 1, 2].reduce((sum, k) => sum + factor[row * 3 + k]! * factor[column * 3 + k]!, 0);
      }));
      expect(isPositiveSemidefinite(product)).toBe(true);
      // Taken below zero in one direction: 1 % of one diagonal element is far above rounding.
      const data = product.data.slice();
      data[14]! *= 0.99;
      data[0]! *= 0.5;
      expect(isPositiveSemidefinite({ ...product, data })).toBe(false);
    }
  });

  it('have rows of zeros where the diagonal is zero', () => {
    expect(isPositiveSemidefinite(matrix(3, 1, 0, 0.5, 0, 0, 0, 0.5, 0, 1))).toBe(true);
    expect(isPositiveSemidefinite(matrix(2, 0, 1, 1, 1))).toBe(false);
    expect(isPositiveSemidefinite(matrix(2, 0, 0, 0, 0))).toBe(true);
  });
});

describe('symmetry', () => {
  it('is judged in units of the diagonal', () => {
    expect(asymmetry(matrix(2, 1e-20, 1e-10, 1e-10 * (1 + 1e-7), 1))).toBeNull();
    expect(asymmetry(matrix(2, 1e-20, 1e-10, 1e-10 * (1 + 1e-5), 1))).toEqual({ row: 1, column: 0 });
  });

  it('is made by the mean of the two halves', () => {
    expect(Array.from(symmetrised(matrix(2, 1, 2, 4, 5)).data)).toEqual([1, 3, 3, 5]);
  });

  it('finds the first variance that cannot be', () => {
    expect(wrongDiagonal(matrix(2, 1, 0, 0, 0), false)).toBe(1);
    expect(wrongDiagonal(matrix(2, 1, 0, 0, 0), true)).toBeNull();
    expect(wrongDiagonal(matrix(2, -1, 0, 0, 0), true)).toBe(0);
  });
});
