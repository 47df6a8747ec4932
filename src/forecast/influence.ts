import type { Matrix } from '../arrays/rows.js';
import { unwhiten } from '../linalg/cholesky.js';
import type { Part } from './part.js';
import { wishartDegrees } from './precision.js';

/**
 * How the finite number of fiducial realisations moves log errors: for each quantity q, the realisation x_i moves it by
 * c_q ((z_q . (x_i - xbar))^2 - mean) to first order.
 */
export type CovarianceNoise =
  | { readonly kind: 'known' }
  /** Influences over N_s, [K, Q], by the suite's fiducial numbers. */
  | { readonly kind: 'measured'; readonly values: Float64Array; readonly quantities: number }
  /** Gaussian data of which only the covariance is there: z_q over the suite's entries, and c_q. */
  | {
      readonly kind: 'gaussian';
      readonly directions: Matrix;
      readonly coefficients: Float64Array;
      readonly covariance: Matrix;
      readonly realisations: number;
    };

/** The linear map from u_i = M^T S^-1 (x_i - xbar) to each log error: q moves by c_q ((g_q . u_i)^2 - mean). */
export interface Gradients {
  /** [Q, p] */
  readonly rows: Matrix;
  /** [Q]; 0 where the quantity does not exist */
  readonly coefficients: Float64Array;
  /** Parameters that are marginalised over together. */
  readonly free: number;
}

/** S^-1 M over the leading entries, expanded to the columns of the covariance: [p, D_all]. */
export function precisionTimesDerivatives(part: Part, whitened: Float64Array, entries: number): Matrix {
  const parameters = part.exact.rows;
  const size = part.exact.columns;
  const columns = part.covariance.covariance.columns;
  const data = new Float64Array(parameters * columns);
  for (let a = 0; a < parameters; a += 1) {
    const solution = unwhiten(part.factor, whitened.subarray(a * size, (a + 1) * size), entries);
    solution.forEach((value, i) => {
      data[a * columns + part.picks[i]!] = value;
    });
  }
  return { data, rows: parameters, columns };
}

/**
 * u_i = M^T S^-1 (x_i - xbar) for every realisation and cut, in one pass over the rows.
 * @param projections for each cut, S^-1 M over the columns of the covariance, [p, D_all]
 * @returns for each cut [N_s, p]
 */
export function project(part: Part, projections: readonly Matrix[]): readonly Float64Array[] {
  const { rows, mean } = part.covariance;
  if (rows === null || mean === null) return [];
  const { source } = rows;
  const parameters = part.exact.rows;
  const all = projections.map(() => new Float64Array(source.rows * parameters));
  const chunk = 256;
  const centred = new Float64Array(mean.length);
  for (let start = 0; start < source.rows; start += chunk) {
    const count = Math.min(chunk, source.rows - start);
    const block = source.read(start, count);
    for (let k = 0; k < count; k += 1) {
      for (let j = 0; j < mean.length; j += 1) centred[j] = block[k * mean.length + j]! - mean[j]!;
      projections.forEach((projection, cut) => {
        projectRow(projection, centred, all[cut]!, (start + k) * parameters);
      });
    }
  }
  return all;
}

function projectRow(projection: Matrix, centred: Float64Array, target: Float64Array, place: number): void {
  for (let a = 0; a < projection.rows; a += 1) {
    let sum = 0;
    const row = a * projection.columns;
    for (let j = 0; j < projection.columns; j += 1) sum += projection.data[row + j]! * centred[j]!;
    target[place + a] = sum;
  }
}

/**
 * Influence of each fiducial realisation on each log error, over N_s: the standard error is the root of the sum of squares.
 * dF = -h (u_i u_i^T - mean), carried to log sigma by -(F^-1 dF F^-1)_aa/(2 (F^-1)_aa): with g = F^-1 e_a it is
 * h ((g . u_i)^2 - mean)/(2 (F^-1)_aa).
 *
 * Departure from the source: the first-order influence does not know that S^-1 spreads more than S, and gives a
 * relative error 1/sqrt(2 N_s) for Gaussian data whatever D. It is therefore scaled by sqrt(N_s/nu), which
 * makes it the Wishart law's 1/sqrt(2 nu) for Gaussian data, and keeps the data's own kurtosis where they are not.
 * Measured in test/calibration.
 * Source: Efron 1982, The Jackknife, the Bootstrap and Other Resampling Plans, chapter 6 (from memory).
 */
export function measuredNoise(
  part: Part,
  u: Float64Array,
  gradients: Gradients,
  entries: number,
  scale: number,
): CovarianceNoise {
  const { rows, realisations } = part.covariance;
  if (rows === null || realisations === null) return { kind: 'known' };
  const quantities = gradients.rows.rows;
  const values = new Float64Array(part.suite.fiducialSeeds.size * quantities);
  for (let q = 0; q < quantities; q += 1) {
    const free = q % 2 === 0 ? gradients.free : 1;
    const spread = Math.sqrt(realisations / wishartDegrees(realisations, entries, free));
    const factor = (scale * spread * gradients.coefficients[q]!) / realisations;
    const squares = squaredProjections(u, gradients.rows, q, realisations);
    const mean = squares.reduce((sum, value) => sum + value, 0) / realisations;
    rows.seeds.forEach((seed, i) => {
      values[seed * quantities + q] = factor * (squares[i]! - mean);
    });
  }
  return { kind: 'measured', values, quantities };
}

function squaredProjections(u: Float64Array, gradients: Matrix, q: number, count: number): Float64Array {
  const { columns } = gradients;
  const squares = new Float64Array(count);
  for (let i = 0; i < count; i += 1) {
    let sum = 0;
    for (let a = 0; a < columns; a += 1) sum += gradients.data[q * columns + a]! * u[i * columns + a]!;
    squares[i] = sum * sum;
  }
  return squares;
}

/** The same for Gaussian data, from the covariance alone: var of (z . x)^2 is 2 (z^T S z)^2. */
export function gaussianNoise(
  part: Part,
  projection: Matrix,
  gradients: Gradients,
  entries: number,
  scale: number,
): CovarianceNoise {
  const { realisations, covariance } = part.covariance;
  if (realisations === null) return { kind: 'known' };
  const { rows: quantities, columns: parameters } = gradients.rows;
  const directions = new Float64Array(quantities * projection.columns);
  const coefficients = new Float64Array(quantities);
  for (let q = 0; q < quantities; q += 1) {
    const free = q % 2 === 0 ? gradients.free : 1;
    coefficients[q] =
      scale * gradients.coefficients[q]! * Math.sqrt(realisations / wishartDegrees(realisations, entries, free));
    for (let a = 0; a < parameters; a += 1) {
      const weight = gradients.rows.data[q * parameters + a]!;
      for (let j = 0; j < projection.columns; j += 1) {
        const place = q * projection.columns + j;
        directions[place] = directions[place]! + weight * projection.data[a * projection.columns + j]!;
      }
    }
  }
  const matrix = { data: directions, rows: quantities, columns: projection.columns };
  return { kind: 'gaussian', directions: matrix, coefficients, covariance, realisations };
}

/** Variance of one quantity, or of the difference of two of the same suite, from the covariance's own noise. */
export function covarianceVariance(
  of: CovarianceNoise,
  quantity: number,
  less: { readonly noise: CovarianceNoise; readonly quantity: number } | null,
): number {
  if (of.kind === 'measured') return measuredVariance(of, quantity, less);
  if (of.kind === 'gaussian') {
    const own = gaussianProduct(of, quantity, of, quantity);
    if (less?.noise.kind !== 'gaussian') return own;
    const cross = gaussianProduct(of, quantity, less.noise, less.quantity);
    return Math.max(0, own - 2 * cross + gaussianProduct(less.noise, less.quantity, less.noise, less.quantity));
  }
  return less === null || less.noise.kind === 'known' ? 0 : covarianceVariance(less.noise, less.quantity, null);
}

function measuredVariance(
  of: CovarianceNoise & { readonly kind: 'measured' },
  quantity: number,
  less: { readonly noise: CovarianceNoise; readonly quantity: number } | null,
): number {
  const other = less?.noise.kind === 'measured' ? less.noise : null;
  let variance = 0;
  for (let i = 0; i * of.quantities < of.values.length; i += 1) {
    const subtracted = other === null || less === null ? 0 : other.values[i * other.quantities + less.quantity]!;
    variance += (of.values[i * of.quantities + quantity]! - subtracted) ** 2;
  }
  return variance;
}

type Gaussian = CovarianceNoise & { readonly kind: 'gaussian' };

function gaussianProduct(a: Gaussian, quantityA: number, b: Gaussian, quantityB: number): number {
  const { data, columns } = a.covariance;
  const startA = quantityA * columns;
  const startB = quantityB * columns;
  let sum = 0;
  for (let i = 0; i < columns; i += 1) {
    const left = a.directions.data[startA + i]!;
    if (left !== 0) {
      for (let j = 0; j < columns; j += 1) sum += left * data[i * columns + j]! * b.directions.data[startB + j]!;
    }
  }
  return (2 * a.coefficients[quantityA]! * b.coefficients[quantityB]! * sum * sum) / a.realisations;
}
