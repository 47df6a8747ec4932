import { inverse as otherInverse, Matrix as Dense } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import type { Small } from '../../src/linalg/small.js';
import { add, eigen, geometricMean, invert, product, unitDiagonal } from '../../src/linalg/small.js';
import { normals } from '../fixtures/random-normal.js';

function small(rows: readonly (readonly number[])[]): Small {
  return { data: Float64Array.from(rows.flat()), size: rows.length };
}

function positive(size: number, seed: number): Small {
  const next = normals(seed);
  const x = new Dense(Array.from({ length: size + 4 }, () => Array.from({ length: size }, next)));
  return small(x.transpose().mmul(x).to2DArray());
}

function rescaled({ data, size }: Small, units: readonly number[]): Small {
  return { size, data: data.map((value, k) => value * units[Math.floor(k / size)]! * units[k % size]!) };
}

function expectClose(a: Small, b: Small, decimals: number): void {
  a.data.forEach((value, k) => {
    expect(value).toBeCloseTo(b.data[k]!, decimals);
  });
}

describe('invert', () => {
  it('agrees with another library', () => {
    const given = positive(6, 1);
    const found = invert(given);
    if (found.kind !== 'inverse') throw new Error(found.kind);
    expectClose(found.inverse, small(otherInverse(new Dense(Array.from({ length: 6 }, (_, i) => Array.from(given.data.subarray(i * 6, i * 6 + 6))))).to2DArray()), 12);
  });

  it('does not care for units: parameters over 40 powers of ten', () => {
    const given = positive(5, 2);
    const units = [1e-20, 1e-7, 1, 1e9, 1e20];
    const [plain, scaled] = [invert(given), invert(rescaled(given, units))];
    if (plain.kind !== 'inverse' || scaled.kind !== 'inverse') throw new Error('no inverse');
    expect(scaled.condition).toBeCloseTo(plain.condition, 8);
    expectClose(rescaled(scaled.inverse, units), plain.inverse, 12);
  });

  it('says why there is no inverse', () => {
    expect(invert(small([[1, 2], [2, 1]]))).toMatchObject({ kind: 'not positive definite', smallest: expect.closeTo(-1, 12) as number });
    expect(invert(small([[1, 0], [0, 0]])).kind).toBe('not positive definite');
    expect(invert(small([[1, 0], [0, -3]]))).toEqual({ kind: 'not positive definite', smallest: -3 });
    expect(invert(small([[1, 1], [1, 1 + 1e-15]])).kind).toBe('ill conditioned');
  });
});

describe('eigen', () => {
  it('has ascending values and vectors that rebuild the matrix', () => {
    const given = positive(5, 3);
    const { values, vectors } = eigen(given);
    expect([...values]).toEqual([...values].sort((a, b) => a - b));
    const rebuilt = new Float64Array(25);
    values.forEach((value, k) => {
      for (let i = 0; i < 5; i += 1) for (let j = 0; j < 5; j += 1) rebuilt[i * 5 + j] = rebuilt[i * 5 + j]! + value * vectors.data[i * 5 + k]! * vectors.data[j * 5 + k]!;
    });
    expectClose({ data: rebuilt, size: 5 }, given, 11);
  });
});

describe('geometric mean of matrices', () => {
  const [a, b] = [positive(4, 4), positive(4, 5)];

  it('of a matrix with itself is that matrix', () => {
    expectClose(geometricMean(a, a)!, a, 11);
  });

  it('is symmetric in its two', () => {
    expectClose(geometricMean(a, b)!, geometricMean(b, a)!, 10);
  });

  it('solves X A^-1 X = B', () => {
    const mean = geometricMean(a, b)!;
    const found = invert(a);
    if (found.kind !== 'inverse') throw new Error(found.kind);
    expectClose(product(product(mean, found.inverse), mean), b, 10);
  });

  it('of diagonal matrices is the root of the products', () => {
    expectClose(geometricMean(small([[4, 0], [0, 9]]), small([[9, 0], [0, 1]]))!, small([[6, 0], [0, 3]]), 12);
  });

  it('does not exist where one is not positive definite', () => {
    expect(geometricMean(a, small([[1, 0, 0, 0], [0, 1, 0, 0], [0, 0, 1, 0], [0, 0, 0, -1]]))).toBeNull();
    expect(geometricMean(small([[0]]), small([[1]]))).toBeNull();
  });
});

it('sums are weighted, and a unit diagonal needs positive numbers', () => {
  expect([...add([2, small([[1]])], [-1, small([[5]])]).data]).toEqual([-3]);
  expect(unitDiagonal(small([[4, 2], [2, 9]]))?.scaled.data[1]).toBeCloseTo(1 / 3, 15);
  expect(unitDiagonal(small([[-1]]))).toBeNull();
  expect(unitDiagonal(small([[Infinity]]))).toBeNull();
});
