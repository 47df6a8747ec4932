/** Every threshold of a judgement, with its source. */

/** Normal quantile of 97.5 %: two-sided 95 %. Abramowitz & Stegun 1964, table 26.5 (from memory); distributions.json agrees. */
export const z95TwoSided = 1.95996398454005424;

/** Normal quantile of 95 %: a one-sided test at 95 %. Same source. */
export const z95OneSided = 1.644853626951472714;

/** One standard deviation: two-sided 68.27 %. */
export const z68 = 1;

/** delta chi^2 of two parameters for 68.27 % and 95.45 %: -2 ln(1 - P). Press et al. 1992, table in chapter 15.6 (from memory). */
export const ellipseDeltaChiSquare: readonly { readonly sigmas: number; readonly deltaChiSquare: number }[] = [
  { sigmas: 1, deltaChiSquare: 2.29574892889863639 },
  { sigmas: 2, deltaChiSquare: 6.18007430624417328 },
];

/** Below this many fiducial realisations for each entry the precision matrix is noisy enough to warn. Common practice, no source. */
export const fewFiducialsPerEntry = 2;
