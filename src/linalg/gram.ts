import type { Matrix, RowSource } from '../arrays/rows.js';

/** Count, mean [D] and covariance [D, D] of realisations. */
export interface Moments {
  readonly count: number;
  readonly mean: Float64Array;
  readonly covariance: Matrix;
}

/** Rows in a chunk: a block of 256 rows of 1200 entries is 2.4 MB, what one cache level holds. */
const chunkRows = 256;

/**
 * Mean and covariance of rows in one pass and bounded memory.
 * S = sum_i (x_i - xbar)(x_i - xbar)^T / (N - 1): each chunk is centred on its own mean, and chunks are merged by
 * M_ab = M_a + M_b + n_a n_b/(n_a + n_b) delta delta^T, delta = mean_b - mean_a.
 * @param source [N, D] with N >= 2, finite
 * Accuracy: NIST StRD univariate sets to the digits that double precision holds (test/outside/nist-univariate.test.ts).
 * Source: Chan, Golub & LeVeque 1983, The American Statistician 37, 242 (from memory).
 */
export function momentsOf(source: RowSource): Moments {
  const { rows, columns } = source;
  const mean = new Float64Array(columns);
  const scatter = new Float64Array(columns * columns);
  for (let start = 0; start < rows; start += chunkRows) {
    const count = Math.min(chunkRows, rows - start);
    mergeChunk(mean, scatter, start, source.read(start, count), count);
  }
  const covariance = new Float64Array(columns * columns);
  for (let i = 0; i < columns; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      const value = scatter[i * columns + j]! / (rows - 1);
      covariance[i * columns + j] = value;
      covariance[j * columns + i] = value;
    }
  }
  return { count: rows, mean, covariance: { data: covariance, rows: columns, columns } };
}

function mergeChunk(mean: Float64Array, scatter: Float64Array, before: number, rows: Float64Array, count: number): void {
  const columns = mean.length;
  const chunkMean = meanOf(rows, count, columns);
  const centred = centredTranspose(rows, count, chunkMean);
  const weight = (before * count) / (before + count);
  for (let i = 0; i < columns; i += 1) {
    const deltaI = chunkMean[i]! - mean[i]!;
    for (let j = 0; j <= i; j += 1) {
      let sum = before === 0 ? 0 : weight * deltaI * (chunkMean[j]! - mean[j]!);
      const a = i * count;
      const b = j * count;
      for (let k = 0; k < count; k += 1) sum += centred[a + k]! * centred[b + k]!;
      scatter[i * columns + j] = scatter[i * columns + j]! + sum;
    }
  }
  for (let i = 0; i < columns; i += 1) mean[i] = mean[i]! + ((chunkMean[i]! - mean[i]!) * count) / (before + count);
}

/** Mean over rows, shifted by the first row so that a large common offset costs no digits. */
function meanOf(rows: Float64Array, count: number, columns: number): Float64Array {
  const mean = new Float64Array(columns);
  for (let k = 1; k < count; k += 1) {
    for (let i = 0; i < columns; i += 1) mean[i] = mean[i]! + (rows[k * columns + i]! - rows[i]!);
  }
  for (let i = 0; i < columns; i += 1) mean[i] = rows[i]! + mean[i]! / count;
  return mean;
}

/** [D, n]: one entry's values are contiguous, so that a product of two entries is a run through memory. */
function centredTranspose(rows: Float64Array, count: number, mean: Float64Array): Float64Array {
  const columns = mean.length;
  const transposed = new Float64Array(columns * count);
  for (let k = 0; k < count; k += 1) {
    for (let i = 0; i < columns; i += 1) transposed[i * count + k] = rows[k * columns + i]! - mean[i]!;
  }
  return transposed;
}
