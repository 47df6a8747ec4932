import type { Fourier } from './fourier.js';
import { mapArea, pixelArea } from './sky.js';

/** What turns white noise into lognormal maps at one point of parameter space. */
export interface LognormalModel {
  /** Least value of a map with its sign turned. */
  readonly shift: number;
  /** Variance of the Gaussian map. */
  readonly variance: number;
  /** Factor on each Fourier mode of white noise of unit variance a pixel. */
  readonly filter: Float64Array;
}

/**
 * The Gaussian field behind a lognormal one (Coles & Jones 1991, MNRAS 248, 1, from memory):
 * kappa = shift (exp(g - s^2/2) - 1) has mean 0 and xi_kappa = shift^2 (exp(xi_g) - 1), so xi_g = ln(1 + xi_kappa / shift^2).
 * Both steps between xi and power are exact on the periodic grid, xi = (1/area) sum C exp(i l x).
 * @param power C of the convergence at each mode
 * @throws where no Gaussian field has the correlation that is needed: a negative power beyond rounding
 */
export function lognormalModel(power: Float64Array, shift: number, fourier: Fourier): LognormalModel {
  const real = power.map((value) => value / pixelArea);
  const imaginary = new Float64Array(power.length);
  fourier.inverse({ real, imaginary });
  const correlation = real.map((value) => Math.log1p(value / shift ** 2));
  const variance = correlation[0]!;
  imaginary.fill(0);
  fourier.forward({ real: correlation, imaginary });
  // The transform of xi is the variance of each mode of white noise that has been through the filter.
  const least = -1e-12 * correlation.reduce((most, value) => Math.max(most, value), 0);
  const filter = correlation.map((value) => {
    // Not a number, where the correlation falls below -shift^2, is refused as well.
    if (!(value >= least)) throw new Error(`a lognormal map of shift ${String(shift)} cannot have this spectrum: power ${String(value)} in a mode`);
    return Math.sqrt(Math.max(value, 0));
  });
  return { shift, variance, filter };
}

/** Variance of the lognormal map that a spectrum asks for: xi(0) = (1/area) sum C. */
export function mapVariance(power: Float64Array): number {
  return power.reduce((sum, value) => sum + value, 0) / mapArea;
}
