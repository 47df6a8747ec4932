import { convergenceSpectrum, lognormalShift } from './convergence.js';
import type { ComplexField, Fourier } from './fourier.js';
import type { LognormalModel } from './lognormal.js';
import { lognormalModel } from './lognormal.js';
import type { Parameters } from './parameters.js';
import { normalNumbers } from './random-numbers.js';
import { onModes, pixelNoise, pixels } from './sky.js';

/** What one seed stands for: the same at every point of parameter space, so that realisations are matched. */
export interface Realisation {
  /** Fourier modes of white noise of unit variance a pixel: the phases of the sky. */
  readonly phases: ComplexField;
  /** Standard normal numbers: the shape noise of each pixel over its rms. */
  readonly noise: Float64Array;
}

const streams = { phases: 0, noise: 1 };

/** Makes the random numbers of one seed. */
export function realisation(seed: number, fourier: Fourier): Realisation {
  const phases = { real: normalNumbers(seed, streams.phases, pixels ** 2), imaginary: new Float64Array(pixels ** 2) };
  fourier.forward(phases);
  return { phases, noise: normalNumbers(seed, streams.noise, pixels ** 2) };
}

/** The lognormal model at one point of parameter space. */
export function modelAt(parameters: Parameters, fourier: Fourier): LognormalModel {
  return lognormalModel(onModes(convergenceSpectrum(parameters)), lognormalShift(parameters), fourier);
}

/** The Gaussian map g behind a convergence map. */
export function gaussianMap({ filter }: LognormalModel, { phases }: Realisation, fourier: Fourier): Float64Array {
  const real = phases.real.map((value, i) => value * filter[i]!);
  const imaginary = phases.imaginary.map((value, i) => value * filter[i]!);
  fourier.inverse({ real, imaginary });
  return real;
}

/** Convergence without noise: kappa = shift (exp(g - s^2/2) - 1). */
export function convergenceMap(model: LognormalModel, random: Realisation, fourier: Fourier): Float64Array {
  return gaussianMap(model, random, fourier).map((g) => model.shift * Math.expm1(g - model.variance / 2));
}

/** Convergence as the survey sees it: (1 + m) kappa + noise. */
export function observedMap(model: LognormalModel, shearBias: number, random: Realisation, fourier: Fourier): Float64Array {
  return convergenceMap(model, random, fourier).map((kappa, i) => (1 + shearBias) * kappa + pixelNoise * random.noise[i]!);
}
