import { describe, expect, it } from 'vitest';
import type { Replicates } from '../../src/forecast/jackknife.js';
import { jackknifeVariance } from '../../src/forecast/jackknife.js';
import { normalRows, range } from './seeded-study.js';

const rounding = 1e-12;

/** Replicates of the means of some columns: the mean of the others, for each row. */
function meansOf(rows: Float64Array, columns: number): Replicates {
  const count = rows.length / columns;
  const total = range(columns).map((q) => range(count).reduce((sum, k) => sum + rows[k * columns + q]!, 0));
  return {
    values: rows.map((value, k) => (total[k % columns]! - value) / (count - 1)),
    weights: new Float64Array(count).fill((count - 1) / count),
    quantities: columns,
  };
}

function varianceOf(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
}

describe('the jackknife variance', () => {
  it('of the mean of 1, 2, 3, 6 is 14/12: the sum of squares over N (N - 1)', () => {
    expect(jackknifeVariance(meansOf(Float64Array.from([1, 2, 3, 6]), 1), 0, null)).toBeCloseTo(14 / 12, 14);
  });

  it('of a mean is s^2/N, for any data', () => {
    const rows = normalRows(50, 2, 1);
    const column = (q: number): number[] => range(50).map((k) => rows[2 * k + q]!);
    const replicates = meansOf(rows, 2);
    expect(jackknifeVariance(replicates, 0, null)).toBeCloseTo(varianceOf(column(0)) / 50, 14);
    expect(jackknifeVariance(replicates, 1, null)).toBeCloseTo(varianceOf(column(1)) / 50, 14);
  });

  it('of a difference of means is that of the mean of the differences: realisations are paired', () => {
    const rows = normalRows(50, 2, 2);
    const replicates = meansOf(rows, 2);
    const paired = varianceOf(range(50).map((k) => rows[2 * k]! - rows[2 * k + 1]!)) / 50;
    expect(jackknifeVariance(replicates, 0, { replicates, quantity: 1 })).toBeCloseTo(paired, 14);
    expect(jackknifeVariance(replicates, 1, { replicates, quantity: 0 })).toBeCloseTo(paired, 14);
  });

  it('is exactly 0 of a difference with itself and of constants', () => {
    const replicates = meansOf(normalRows(30, 1, 3), 1);
    expect(jackknifeVariance(replicates, 0, { replicates, quantity: 0 })).toBe(0);
    expect(jackknifeVariance({ ...replicates, values: new Float64Array(30).fill(1e8 / 3) }, 0, null)).toBe(0);
  });

  it('does not change when a constant is added, up to rounding of the constant', () => {
    const replicates = meansOf(normalRows(30, 1, 4), 1);
    const lifted = { ...replicates, values: replicates.values.map((value) => value + 1000) };
    const plain = jackknifeVariance(replicates, 0, null);
    // Means differ by 0.03 and stand on 1000, known to 1e-13: 12 digits of the differences.
    expect(Math.abs(jackknifeVariance(lifted, 0, null) / plain - 1)).toBeLessThan(1e-10);
  });

  it('leaves out realisations that neither side uses', () => {
    const replicates = meansOf(normalRows(20, 1, 5), 1);
    const padded: Replicates = {
      values: Float64Array.from([...replicates.values, 77, -99]),
      weights: Float64Array.from([...replicates.weights, 0, 0]),
      quantities: 1,
    };
    expect(Math.abs(jackknifeVariance(padded, 0, null) / jackknifeVariance(replicates, 0, null) - 1)).toBeLessThan(rounding);
  });

  it('is 0 without realisations', () => {
    expect(jackknifeVariance({ values: new Float64Array(0), weights: new Float64Array(0), quantities: 2 }, 1, null)).toBe(0);
  });

  it('adds up for two sides that rest on different realisations, up to 1/N', () => {
    const count = 400;
    const both = meansOf(normalRows(count, 1, 6), 1);
    const full = both.values.reduce((sum, value) => sum + value, 0) / count;
    // Each side at its full value where the other's realisations are left out.
    const half = (used: (k: number) => boolean): Replicates => ({
      values: both.values.map((value, k) => (used(k) ? value : full)),
      weights: both.weights.map((weight, k) => (used(k) ? weight : 0)),
      quantities: 1,
    });
    const first = half((k) => k < count / 2);
    const second = half((k) => k >= count / 2);
    const apart = jackknifeVariance(first, 0, null) + jackknifeVariance(second, 0, null);
    const joint = jackknifeVariance(first, 0, { replicates: second, quantity: 0 });
    // The common mean differs from the mean of each half by a standard error of it: a relative 2/N of the sum of squares, three times over.
    expect(Math.abs(joint / apart - 1)).toBeLessThan((3 * 4) / count);
  });
});
