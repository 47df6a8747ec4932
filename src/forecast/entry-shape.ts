import type { Part } from './part.js';

/** Skewness and excess kurtosis of each entry over the fiducial realisations, in the order of the part. */
export interface EntryShape {
  readonly skewness: Float64Array;
  readonly kurtosis: Float64Array;
  readonly realisations: number;
}

/**
 * g1 = m3/m2^(3/2) and g2 = m4/m2^2 - 3 of each entry; for Gaussian data their standard errors are sqrt(6/N) and sqrt(24/N).
 * One pass over the rows: the mean is known. null where only moments are given.
 * Source: Fisher 1930, Proc. R. Soc. A 130, 16 (from memory).
 */
export function entryShape(part: Part): EntryShape | null {
  const { rows, mean } = part.covariance;
  if (rows === null || mean === null) return null;
  const { source } = rows;
  const size = part.picks.length;
  // In units of the standard deviation: the fourth power of data around 1e-100 would be lost.
  const { data, columns } = part.covariance.covariance;
  const deviation = Float64Array.from(part.picks, (column) => Math.sqrt(data[column * (columns + 1)]!));
  const sums = [new Float64Array(size), new Float64Array(size), new Float64Array(size)] as const;
  for (let start = 0; start < source.rows; start += 256) {
    const count = Math.min(256, source.rows - start);
    addMoments(source.read(start, count), count, source.columns, part.picks, mean, deviation, sums);
  }
  const count = source.rows;
  const [second, third, fourth] = sums;
  return {
    skewness: third.map((sum, i) => sum / count / (second[i]! / count) ** 1.5),
    kurtosis: fourth.map((sum, i) => sum / count / (second[i]! / count) ** 2 - 3),
    realisations: count,
  };
}

function addMoments(
  block: Float64Array,
  count: number,
  columns: number,
  picks: Int32Array,
  mean: Float64Array,
  deviation: Float64Array,
  [second, third, fourth]: readonly [Float64Array, Float64Array, Float64Array],
): void {
  for (let k = 0; k < count; k += 1) {
    for (let i = 0; i < picks.length; i += 1) {
      const column = picks[i]!;
      const delta = (block[k * columns + column]! - mean[column]!) / deviation[i]!;
      const square = delta * delta;
      second[i] = second[i]! + square;
      third[i] = third[i]! + square * delta;
      fourth[i] = fourth[i]! + square * square;
    }
  }
}
