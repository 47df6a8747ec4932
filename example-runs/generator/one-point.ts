import type { Bins } from './histogram.js';
import { histogram, middles } from './histogram.js';
import type { Scale } from './smoothing.js';

/** Width of the bins of the convergence: about 0.35 of the rms of the fiducial map on each scale. */
const widths: Readonly<Record<Scale, number>> = { theta2: 0.0033, theta4: 0.0025, theta6: 0.0021, theta9: 0.0019 };

/**
 * From -1.8 to 3.2 times the rms, which nearly every pixel is in: so the sum over the bins is nearly the number of pixels,
 * and any bin is nearly known from the others. One near the middle is left out.
 */
const leftOut = 4;

function binsOf(scale: Scale): Bins {
  return { low: -5 * widths[scale], width: widths[scale], count: 14 };
}

function withoutOne<T>(bins: readonly T[]): readonly T[] {
  return bins.filter((_, b) => b !== leftOut);
}

/** Middles of the bins that are kept. */
export function onePointValues(scale: Scale): readonly number[] {
  return withoutOne(middles(binsOf(scale)));
}

/** Share of the pixels in each kept bin, in per cent. */
export function onePointDistribution(map: Float64Array, scale: Scale): readonly number[] {
  return withoutOne(histogram(map, binsOf(scale))).map((count) => (100 * count) / map.length);
}
