import type { Inversion, Small } from '../linalg/small.js';
import { product } from '../linalg/small.js';

/** One suite's share of a Fisher matrix, and the freedom of its covariance. */
export interface BiasTerm {
  /** F_k, [p, p] over the active parameters. */
  readonly fisher: Small;
  /** N_s - D - 2 of the suite. */
  readonly freedom: number;
}

/**
 * What the precision factor leaves: h makes a Fisher matrix unbiased, and the inverse of an unbiased matrix is not
 * unbiased. To second order in the noise of the covariance, for Gaussian data, the logarithm of a squared marginalised
 * error comes out too large by
 *
 * sum_k [(C F_k C F_k C)_aa + tr(C F_k) (C F_k C)_aa] / (nu_k C_aa), nu_k = N_s - D - 2, C = (sum_k F_k + prior)^-1,
 *
 * less the variance of that logarithm; for one suite without priors (p + 1)/nu. Half of the first term is returned (log sigma): the caller
 * subtracts the variance of log sigma. A fixed error is a forecast with one parameter: (F_k/F)^2/nu_k.
 * The result is an uncertainty of the value and not a correction of it: the headline stays sqrt((F^-1)_aa) (methods, section 1).
 * @returns [2p], by quantity; null where the error does not exist
 * Source: Sellentin & Heavens 2017, arXiv:1609.00504 (that debiasing F does not debias an error; abstract read); the formula is derived
 * here from the second moments of a Wishart matrix, and tested by simulation (test/forecast/covariance-bias.test.ts).
 */
export function inversionBias(total: Small, inversion: Inversion, terms: readonly BiasTerm[]): readonly (number | null)[] {
  const { size } = total;
  const bias: (number | null)[] = Array.from({ length: 2 * size }, () => null);
  const inverse = inversion.kind === 'inverse' ? inversion.inverse : null;
  for (let a = 0; a < size; a += 1) {
    const diagonal = a * (size + 1);
    if (inverse !== null) bias[2 * a] = 0;
    if (total.data[diagonal]! > 0) bias[2 * a + 1] = 0;
  }
  for (const { fisher, freedom } of terms) {
    addFixed(bias, total, fisher, freedom);
    if (inverse !== null) addMarginalised(bias, inverse, fisher, freedom);
  }
  return bias;
}

function addFixed(bias: (number | null)[], total: Small, fisher: Small, freedom: number): void {
  for (let a = 0; a < total.size; a += 1) {
    const diagonal = a * (total.size + 1);
    const known = bias[2 * a + 1] ?? null;
    if (known !== null) bias[2 * a + 1] = known + (fisher.data[diagonal]! / total.data[diagonal]!) ** 2 / freedom;
  }
}

function addMarginalised(bias: (number | null)[], inverse: Small, fisher: Small, freedom: number): void {
  const share = product(inverse, fisher);
  const once = product(share, inverse);
  const twice = product(share, once);
  let trace = 0;
  for (let a = 0; a < inverse.size; a += 1) trace += share.data[a * (inverse.size + 1)]!;
  for (let a = 0; a < inverse.size; a += 1) {
    const diagonal = a * (inverse.size + 1);
    const term = (twice.data[diagonal]! + trace * once.data[diagonal]!) / (2 * freedom * inverse.data[diagonal]!);
    bias[2 * a] = (bias[2 * a] ?? 0) + term;
  }
}
