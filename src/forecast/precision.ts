/**
 * Factor that makes the inverse of an estimated covariance unbiased for Gaussian data.
 * h = (N_s - D - 2)/(N_s - 1)
 * @param realisations N_s, or null where the covariance is not an estimate: then 1
 * @param entries D; N_s > D + 2 has been checked
 * Source: Kaufman 1967, Rep. 6710, CORE (from memory); Hartlap, Simon & Schneider 2007, A&A 464, 399.
 */
export function precisionFactor(realisations: number | null, entries: number): number {
  return realisations === null ? 1 : (realisations - entries - 2) / (realisations - 1);
}

/**
 * Degrees of freedom of (M^T S^-1 M)^-1, which follows a Wishart law for Gaussian data.
 * nu = N_s - 1 - D + p; the relative standard error of a marginalised sigma is 1/sqrt(2 nu).
 * A fixed error is that of a forecast with one parameter: nu with p = 1.
 */
export function wishartDegrees(realisations: number, entries: number, parameters: number): number {
  return realisations - 1 - entries + parameters;
}
