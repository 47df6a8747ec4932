import { describe, expect, it } from 'vitest';
import { momentsOf } from '../../src/linalg/gram.js';
import { memoryRows } from '../fixtures/memory-study.js';
import { normals } from '../fixtures/random-normal.js';

function rows(count: number, columns: number, seed: number, offset = 0): Float64Array {
  const next = normals(seed);
  return Float64Array.from({ length: count * columns }, () => offset + next());
}

/** Two passes, the textbook's way. */
function twoPass(data: Float64Array, columns: number): number[] {
  const count = data.length / columns;
  const column = (j: number): number[] => Array.from({ length: count }, (_, k) => data[k * columns + j]!);
  const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value / count, 0);
  return Array.from({ length: columns * columns }, (_, k) => {
    const [a, b] = [column(Math.floor(k / columns)), column(k % columns)];
    const [meanA, meanB] = [mean(a), mean(b)];
    return a.reduce((sum, value, i) => sum + (value - meanA) * (b[i]! - meanB), 0) / (count - 1);
  });
}

describe('moments', () => {
  it('of a case done by hand: the covariance divides by N - 1', () => {
    const { count, mean, covariance } = momentsOf(memoryRows(Float64Array.of(1, 10, 3, 14, 5, 12), 2));
    expect(count).toBe(3);
    expect([...mean]).toEqual([3, 12]);
    expect([...covariance.data]).toEqual([4, 2, 2, 4]);
  });

  it.each([2, 255, 256, 257, 511, 513])('of %i rows are those of two passes, wherever chunks end', (count) => {
    const data = rows(count, 3, count);
    const { covariance } = momentsOf(memoryRows(data, 3));
    twoPass(data, 3).forEach((exact, k) => {
      expect(covariance.data[k]).toBeCloseTo(exact, 12);
    });
  });

  it('keep their digits under an offset of 1e8', () => {
    const data = rows(600, 2, 9);
    const shifted = data.map((value) => value + 1e8);
    // A double near 1e8 holds 1.5e-8: that much of each value is lost before anyone computes.
    momentsOf(memoryRows(shifted, 2)).covariance.data.forEach((value, k) => {
      expect(value).toBeCloseTo(momentsOf(memoryRows(data, 2)).covariance.data[k]!, 7);
    });
  });

  it('do not depend on the order of the rows but for rounding', () => {
    const data = rows(300, 2, 10);
    const reversed = Float64Array.from({ length: data.length }, (_, k) => data[(299 - Math.floor(k / 2)) * 2 + (k % 2)]!);
    const [a, b] = [momentsOf(memoryRows(data, 2)), momentsOf(memoryRows(reversed, 2))];
    a.covariance.data.forEach((value, k) => {
      expect(value).toBeCloseTo(b.covariance.data[k]!, 13);
    });
  });

  it('of equal rows have no scatter at all', () => {
    const data = Float64Array.from({ length: 900 }, (_, k) => (k % 3) + 0.1);
    expect([...momentsOf(memoryRows(data, 3)).covariance.data].every((value) => value === 0)).toBe(true);
  });
});
