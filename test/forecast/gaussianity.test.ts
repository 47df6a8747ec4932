import { describe, expect, it } from 'vitest';
import { inverse, Matrix as Dense } from 'ml-matrix';
import { entryShape } from '../../src/forecast/entry-shape.js';
import { scoreLimit } from '../../src/forecast/gaussianity-result.js';
import { distancesOf, kurtosisScore } from '../../src/forecast/mahalanobis.js';
import type { Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { deviationOf, forecastOf, meanOf, normalRows, partsOf, range } from './seeded-study.js';

function studyOf(rows: Float64Array, size: number): Study {
  return memoryStudy({
    parameters: [parameter('p0')],
    combinations: [combination('base', ['base'])],
    runs: [ensembleRun('run', columnsOf('base', size), realisations(rows, size, range(rows.length / size, 500)), { p0: { kind: 'exact', values: new Float64Array(size).fill(1) } })],
  });
}

const partOf = (rows: Float64Array, size: number) => partsOf(studyOf(rows, size), 'base')[0]!;

describe('distances of the fiducial realisations', () => {
  const rows = normalRows(600, 4, 1);
  const distances = distancesOf(partOf(rows, 4))!;

  it('are d^T S^-1 d with a dense inverse', () => {
    const dense = new Dense(range(600).map((k) => Array.from(rows.subarray(4 * k, 4 * k + 4)))).center('column');
    const precision = inverse(dense.transpose().mmul(dense).div(599));
    for (const k of [0, 300, 599]) {
      const row = dense.getRowVector(k);
      expect(distances.squares[k]).toBeCloseTo(row.mmul(precision).mmul(row.transpose()).get(0, 0), 10);
    }
  });

  it('add up to D (N - 1)', () => {
    expect(distances.squares.reduce((sum, square) => sum + square, 0)).toBeCloseTo(4 * 599, 8);
  });

  it('have tails that are uniform for Gaussian data', () => {
    const sorted = Float64Array.from(distances.tails).sort();
    // Kolmogorov & Smirnov: the largest departure from uniform exceeds 1.95/sqrt(N) once in a thousand.
    const most = sorted.reduce((worst, tail, k) => Math.max(worst, Math.abs(tail - (k + 0.5) / 600)), 0);
    expect(most).toBeLessThan(1.95 / Math.sqrt(600));
  });

  it('have uniform tails for as few as 12 realisations of 4 entries, where the law is far from chi-square', () => {
    const studies = 600;
    const sorted = Float64Array.from(range(studies), (k) => distancesOf(partOf(normalRows(12, 4, 8000 + k), 4))!.tails[k % 12]!).sort();
    const most = sorted.reduce((worst, tail, k) => Math.max(worst, Math.abs(tail - (k + 0.5) / studies)), 0);
    expect(most).toBeLessThan(1.95 / Math.sqrt(studies));
  });

  it('name an outlier by its seed, and few of Gaussian data', () => {
    const plain = forecastOf(studyOf(rows, 4)).gaussianity![0]!;
    expect(plain.outliers.length).toBeLessThanOrEqual(1);
    expect(plain.beyond.expected).toBeCloseTo(6, 12);
    const spoilt = Float64Array.from(rows);
    spoilt[4 * 77] = 12;
    const found = forecastOf(studyOf(spoilt, 4)).gaussianity![0]!;
    expect(found.outliers[0]).toMatchObject({ realisation: '577' });
    expect(found.outliers[0]!.tail).toBeLessThan(1e-10);
    expect(found.kurtosisScore).toBeGreaterThan(4);
    expect(found.entryShape.kurtosis.entry).toBe('base, only at x = 1');
  });
});

describe('scores of shape', () => {
  it('are normal for Gaussian data: mean 0, deviation 1', () => {
    const scores = range(200).map((k) => kurtosisScore(distancesOf(partOf(normalRows(300, 3, 60 + k), 3))!, 3));
    // Mean within four standard errors; the law is skewed at N = 300, and its deviation is below 1 by a few percent.
    expect(Math.abs(meanOf(scores))).toBeLessThan(4 / Math.sqrt(200));
    expect(deviationOf(scores)).toBeGreaterThan(0.75);
    expect(deviationOf(scores)).toBeLessThan(1.2);
  });

  it('of an entry are those by hand: 0, 0, 0, 4 has skewness 2/sqrt(3) and kurtosis -2/3', () => {
    // m2 = 3, m3 = 6, m4 = 21: g1 = 6/3^1.5, g2 = 21/9 - 3.
    const shape = entryShape(partOf(Float64Array.from([0, 0, 0, 4]), 1))!;
    expect(shape.skewness[0]).toBeCloseTo(2 / Math.sqrt(3), 14);
    expect(shape.kurtosis[0]).toBeCloseTo(-2 / 3, 14);
    expect(shape.realisations).toBe(4);
  });

  it('of an entry do not change with its unit', () => {
    const rows = normalRows(100, 2, 9);
    const scaled = entryShape(partOf(rows.map((value, k) => (k % 2 === 0 ? 1e20 : 1e-20) * value), 2))!;
    const plain = entryShape(partOf(rows, 2))!;
    for (const i of [0, 1]) {
      expect(scaled.skewness[i]).toBeCloseTo(plain.skewness[i]!, 12);
      expect(scaled.kurtosis[i]).toBeCloseTo(plain.kurtosis[i]!, 12);
    }
  });

  it('are held against the normal quantile of 0.05/tests', () => {
    // Two-sided normal quantiles of 0.05/10 and 0.05/1000: 2.807 and 4.056 (Abramowitz & Stegun 1964, table 26.5, from memory), to 1 %.
    expect(scoreLimit(1)).toBeCloseTo(1.96, 3);
    expect(Math.abs(scoreLimit(10) / 2.807 - 1)).toBeLessThan(0.01);
    expect(Math.abs(scoreLimit(1000) / 4.0556 - 1)).toBeLessThan(0.01);
  });
});
