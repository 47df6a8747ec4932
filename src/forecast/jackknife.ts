/**
 * Replicates of log errors: for each realisation of a suite, the values without it, [K, Q] row-major.
 * `weight` is (n - 1)/n with n the number of realisations that the value rests on, 0 for a realisation not used.
 */
export interface Replicates {
  readonly values: Float64Array;
  readonly weights: Float64Array;
  readonly quantities: number;
}

/**
 * Delete-one jackknife variance of one quantity, or of the difference of two.
 * var = sum_s w_s (theta_s - mean)^2, w_s = (n - 1)/n; with equal n it is Quenouille's (n - 1)/n sum (theta_s - mean)^2.
 * A realisation is left out of every probe and parameter at once, so a difference keeps its correlation. Where
 * two sides rest on different numbers of realisations the larger weight is taken.
 * @param less subtracted; a realisation that it does not use leaves it at its full value
 * Source: Quenouille 1956, Biometrika 43, 353; Efron & Stein 1981, Ann. Stat. 9, 586 (both from memory).
 */
export function jackknifeVariance(
  of: Replicates,
  quantity: number,
  less: { readonly replicates: Replicates; readonly quantity: number } | null,
): number {
  const count = of.weights.length;
  const weight = (s: number): number => Math.max(of.weights[s]!, less === null ? 0 : less.replicates.weights[s]!);
  const value = (s: number): number =>
    of.values[s * of.quantities + quantity]! -
    (less === null ? 0 : less.replicates.values[s * less.replicates.quantities + less.quantity]!);
  let members = 0;
  let mean = 0;
  for (let s = 0; s < count; s += 1) {
    if (weight(s) > 0) {
      members += 1;
      mean += (value(s) - mean) / members;
    }
  }
  let variance = 0;
  for (let s = 0; s < count; s += 1) variance += weight(s) * (value(s) - mean) ** 2;
  return variance;
}
