import type { ComplexField, Fourier } from './fourier.js';
import { arcminute, fundamental, pixelNoise, pixels, squaredModes } from './sky.js';

/** Gaussian smoothing exp(-l^2 theta^2 / 2) of a map, its mean taken away. */
export interface Smoothing {
  /** theta in arcminutes. */
  readonly scale: number;
  readonly window: Float64Array;
  /** Rms of the smoothed noise: what heights are measured in. */
  readonly noise: number;
}

function smoothing(scale: number): Smoothing {
  const window = Float64Array.from(squaredModes, (squared) =>
    squared === 0 ? 0 : Math.exp((-squared * (fundamental * scale * arcminute) ** 2) / 2),
  );
  const passed = window.reduce((sum, factor) => sum + factor ** 2, 0) / pixels ** 2;
  return { scale, window, noise: pixelNoise * Math.sqrt(passed) };
}

/** By the name of the blocks that are measured on them. */
export const smoothings = { theta2: smoothing(2), theta4: smoothing(4), theta6: smoothing(6), theta9: smoothing(9) } as const;

export type Scale = keyof typeof smoothings;
export const scales = Object.keys(smoothings) as readonly Scale[];

/** The map smoothed on every scale, from its transform. One inverse transform serves two scales: A + iB gives a + ib. */
export function smoothedMaps(modes: ComplexField, fourier: Fourier): ReadonlyMap<Scale, Float64Array> {
  const smoothed = new Map<Scale, Float64Array>();
  for (let i = 0; i < scales.length; i += 2) {
    const [first, second] = [scales[i]!, scales[i + 1] ?? scales[i]!];
    const pair = windowed(modes, smoothings[first].window, smoothings[second].window);
    fourier.inverse(pair);
    smoothed.set(first, pair.real).set(second, second === first ? pair.real : pair.imaginary);
  }
  return smoothed;
}

function windowed({ real, imaginary }: ComplexField, first: Float64Array, second: Float64Array): ComplexField {
  return {
    real: real.map((value, i) => value * first[i]! - imaginary[i]! * second[i]!),
    imaginary: imaginary.map((value, i) => value * first[i]! + real[i]! * second[i]!),
  };
}
