import type { Bins } from './histogram.js';
import { histogram } from './histogram.js';
import { pixels } from './sky.js';
import type { Scale } from './smoothing.js';

/** Bins of the height in units of the noise: none so rare that it is nearly constant. */
export const heights = {
  theta2: { low: -0.25, width: 0.35, count: 16 },
  theta4: { low: -0.75, width: 0.5, count: 16 },
  theta6: { low: -1, width: 0.7, count: 13 },
  theta9: { low: -1.5, width: 1, count: 10 },
} as const satisfies Readonly<Record<Scale, Bins>>;

/** Values of a periodic map at pixels that are above all eight neighbours. */
export function peakValues(map: Float64Array): number[] {
  const last = pixels - 1;
  const found: number[] = [];
  for (let row = 0; row < pixels; row += 1) {
    const rows = [(row + last) % pixels, row, (row + 1) % pixels].map((r) => r * pixels) as [number, number, number];
    for (let column = 0; column < pixels; column += 1) {
      const left = (column + last) % pixels;
      const right = (column + 1) % pixels;
      const value = map[rows[1] + column]!;
      if (
        value > map[rows[1] + left]! &&
        value > map[rows[1] + right]! &&
        value > map[rows[0] + column]! &&
        value > map[rows[2] + column]! &&
        value > map[rows[0] + left]! &&
        value > map[rows[0] + right]! &&
        value > map[rows[2] + left]! &&
        value > map[rows[2] + right]!
      ) {
        found.push(value);
      }
    }
  }
  return found;
}

/** Number of peaks in bins of height nu = kappa / rms of the noise. */
export function peakCounts(map: Float64Array, noise: number, bins: Bins): number[] {
  return histogram(
    peakValues(map).map((value) => value / noise),
    bins,
  );
}
