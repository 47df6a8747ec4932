import { CholeskyDecomposition, Matrix as Dense } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import type { Matrix } from '../../src/arrays/rows.js';
import type { CholeskyFactor } from '../../src/linalg/cholesky.js';
import { cholesky, unwhiten, whiten } from '../../src/linalg/cholesky.js';
import { normals } from '../fixtures/random-normal.js';

function matrix(rows: readonly (readonly number[])[]): Matrix {
  return { data: Float64Array.from(rows.flat()), rows: rows.length, columns: rows[0]?.length ?? 0 };
}

/** A random positive-definite matrix: X^T X of three times as many rows. */
function positive(size: number, seed: number): Matrix {
  const next = normals(seed);
  const x = Dense.zeros(3 * size, size);
  for (let i = 0; i < 3 * size; i += 1) for (let j = 0; j < size; j += 1) x.set(i, j, next());
  return matrix(x.transpose().mmul(x).to2DArray());
}

function factorOf(given: Matrix): CholeskyFactor {
  const found = cholesky(given);
  if (found.kind !== 'factor') throw new Error('not positive definite');
  return found.factor;
}

describe('cholesky', () => {
  it('factors a case done by hand', () => {
    expect([...factorOf(matrix([[4, 2], [2, 10]])).data]).toEqual([2, 0, 1, 3]);
  });

  it('has L L^T = C to rounding, and agrees with another library', () => {
    const given = positive(40, 1);
    const { data } = factorOf(given);
    const other = new CholeskyDecomposition(new Dense(Array.from({ length: 40 }, (_, i) => Array.from(given.data.subarray(i * 40, i * 40 + 40))))).lowerTriangularMatrix;
    for (let i = 0; i < 40; i += 1) {
      for (let j = 0; j <= i; j += 1) {
        let sum = 0;
        for (let k = 0; k <= j; k += 1) sum += data[i * 40 + k]! * data[j * 40 + k]!;
        // Backward error of a Cholesky factor: (n + 1) units in the last place of the diagonal (Higham 2002, theorem 10.3, from memory).
        expect(Math.abs(sum - given.data[i * 40 + j]!)).toBeLessThan(41 * 2.2e-16 * 200);
        expect(data[i * 40 + j]!).toBeCloseTo(other.get(i, j), 12);
      }
    }
  });

  it('of a leading block is the leading block of the factor', () => {
    const given = positive(12, 2);
    const block = matrix(Array.from({ length: 5 }, (_, i) => Array.from(given.data.subarray(i * 12, i * 12 + 5))));
    const [whole, part] = [factorOf(given), factorOf(block)];
    for (let i = 0; i < 5; i += 1) expect([...part.data.subarray(i * 5, i * 5 + 5)]).toEqual([...whole.data.subarray(i * 12, i * 12 + 5)]);
  });

  it('names the entry that those before it explain', () => {
    expect(cholesky(matrix([[1, 0, 1], [0, 1, 1], [1, 1, 2]]))).toEqual({ kind: 'not positive definite', pivot: 2 });
    expect(cholesky(matrix([[1, 2], [2, 1]]))).toEqual({ kind: 'not positive definite', pivot: 1 });
    expect(cholesky(matrix([[0]]))).toEqual({ kind: 'not positive definite', pivot: 0 });
  });

  it('judges a pivot by its own entry, so that units do not matter', () => {
    const given = positive(6, 3);
    const units = [1e-120, 1e-8, 1, 1e5, 1e60, 1e140];
    const scaled = { ...given, data: given.data.map((value, k) => value * units[Math.floor(k / 6)]! * units[k % 6]!) };
    expect(cholesky(scaled).kind).toBe('factor');
  });

  it('of nothing is nothing', () => {
    expect(cholesky({ data: new Float64Array(0), rows: 0, columns: 0 }).kind).toBe('factor');
  });
});

describe('whiten', () => {
  it('makes products of vectors those in the inverse covariance, and unwhiten finishes the solution', () => {
    const given = positive(8, 4);
    const factor = factorOf(given);
    const next = normals(5);
    const vectors = { data: Float64Array.from({ length: 16 }, next), rows: 2, columns: 8 };
    const whitened = { ...vectors, data: Float64Array.from(vectors.data) };
    whiten(factor, whitened);
    const solution = unwhiten(factor, whitened.data.subarray(8), 8);
    const product = whitened.data.subarray(0, 8).reduce((sum, value, i) => sum + value * whitened.data[8 + i]!, 0);
    const direct = vectors.data.subarray(0, 8).reduce((sum, value, i) => sum + value * solution[i]!, 0);
    expect(product).toBeCloseTo(direct, 12);
    for (let i = 0; i < 8; i += 1) {
      let back = 0;
      for (let j = 0; j < 8; j += 1) back += given.data[i * 8 + j]! * solution[j]!;
      expect(back).toBeCloseTo(vectors.data[8 + i]!, 11);
    }
  });
});
