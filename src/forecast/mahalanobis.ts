import { dot } from '../linalg/dot.js';
import { whiten } from '../linalg/cholesky.js';
import { betaUpperTail } from './beta-law.js';
import type { Part } from './part.js';

/** How far each fiducial realisation lies from the mean, and what Gaussian data would do. */
export interface Distances {
  /** Number in the suite of each row. */
  readonly seeds: Int32Array;
  /** d^2 = (x - xbar)^T S^-1 (x - xbar). */
  readonly squares: Float64Array;
  /** Probability of a larger distance, for Gaussian data. */
  readonly tails: Float64Array;
}

/**
 * Mahalanobis distances of the fiducial rows; N/(N - 1)^2 d^2 ~ Beta(D/2, (N - D - 1)/2) for Gaussian data.
 * null where only moments are given.
 * Source: Gnanadesikan & Kettenring 1972, Biometrics 28, 81 (from memory); tested against a table and by simulation.
 */
export function distancesOf(part: Part): Distances | null {
  const { rows, mean } = part.covariance;
  if (rows === null || mean === null) return null;
  const { source, seeds } = rows;
  const size = part.entries.length;
  const count = source.rows;
  const squares = new Float64Array(count);
  for (let start = 0; start < count; start += 256) {
    const taken = Math.min(256, count - start);
    const block = source.read(start, taken);
    const picked = new Float64Array(taken * size);
    for (let k = 0; k < taken; k += 1) {
      part.picks.forEach((column, i) => {
        picked[k * size + i] = block[k * source.columns + column]! - mean[column]!;
      });
    }
    whiten(part.factor, { data: picked, rows: taken, columns: size });
    for (let k = 0; k < taken; k += 1) squares[start + k] = dot(picked, k * size, picked, k * size, 0, size);
  }
  const scale = count / (count - 1) ** 2;
  const tails = squares.map((square) => betaUpperTail(Math.min(1, scale * square), size / 2, (count - size - 1) / 2));
  return { seeds, squares, tails };
}

/**
 * Mardia's multivariate kurtosis as a standard score: (mean d^4 - D (D + 2) (N - 1)/(N + 1)) / sqrt(8 D (D + 2)/N), with the
 * covariance of divisor N. Large and positive: heavier tails than a Gaussian law.
 * Source: Mardia 1970, Biometrika 57, 519 (from memory); the law is approximate for N >> D.
 */
export function kurtosisScore({ squares }: Distances, entries: number): number {
  const count = squares.length;
  const unbiased = count / (count - 1);
  const mean = squares.reduce((sum, square) => sum + (unbiased * square) ** 2, 0) / count;
  const expected = (entries * (entries + 2) * (count - 1)) / (count + 1);
  return (mean - expected) / Math.sqrt((8 * entries * (entries + 2)) / count);
}
