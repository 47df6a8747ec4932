/**
 * Factors on a parameter variance that answer other questions than "what would the error be if the covariance were
 * known". They are printed beside a result, never multiplied into it and never stacked.
 */
export interface InflationFactors {
  /** (N_s - 1)/(N_s - 1 - D + p): makes (M^T S^-1 M)^-1 an unbiased parameter variance. Taylor & Joachimi 2014, MNRAS 442, 2728. */
  readonly taylorJoachimi: number;
  /** 1 + B (D - p): scatter of estimates from an analysis with this covariance. Dodelson & Schneider 2013, PRD 88, 063537. */
  readonly dodelsonSchneider: number;
  /** (1 + B (D - p))/(1 + A + B (p + 1)). Percival et al. 2014, MNRAS 439, 2531. */
  readonly percival2014: number;
  /**
   * Variance of a posterior with the frequentist-matching prior over that of a Gaussian with the same S: the likelihood
   * is [1 + chi^2/(N_s - 1)]^(-m/2), m = p + 2 + (N_s - 1 + B (D - p))/(1 + B (D - p)), a t law in p dimensions with
   * m - p degrees of freedom, whose variance is (N_s - 1)/(m - p - 2) times the Gaussian's. Percival et al. 2022, MNRAS 510, 3207;
   * the variance derived here.
   */
  readonly percival2022: number | null;
}

/**
 * All sources from memory; arithmetic checked against exact rationals (test/outside/covariance-factors.test.ts).
 * @param realisations N_s
 * @param entries D
 * @param parameters p
 * @returns null where N_s <= D + 4, for which A and B do not exist, or D < p, for which there is no such analysis
 */
export function inflationFactors(realisations: number, entries: number, parameters: number): InflationFactors | null {
  const gap = realisations - entries;
  if (gap <= 4 || entries < parameters) return null;
  const a = 2 / ((gap - 1) * (gap - 4));
  const b = (gap - 2) / ((gap - 1) * (gap - 4));
  const scatter = 1 + b * (entries - parameters);
  const power = parameters + 2 + (realisations - 1 + b * (entries - parameters)) / scatter;
  const free = power - parameters - 2;
  return {
    taylorJoachimi: (realisations - 1) / (realisations - 1 - entries + parameters),
    dodelsonSchneider: scatter,
    percival2014: scatter / (1 + a + b * (parameters + 1)),
    percival2022: free > 0 ? (realisations - 1) / free : null,
  };
}

/** The exponent m of the frequentist-matching likelihood, for the methods appendix and its test. */
export function matchingPower(realisations: number, entries: number, parameters: number): number {
  const gap = realisations - entries;
  const b = (gap - 2) / ((gap - 1) * (gap - 4));
  const scatter = b * (entries - parameters);
  return parameters + 2 + (realisations - 1 + scatter) / (1 + scatter);
}
