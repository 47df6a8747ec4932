import type { ComplexField } from './fourier.js';
import { fundamental, mapArea, pixelArea, pixelNoise, pixels, squaredModes } from './sky.js';

/** Edges of the bins in multipole: equal steps of the logarithm. */
const [lowest, highest, bins] = [100, 3000, 16];
const edges = Array.from({ length: bins + 1 }, (_, b) => lowest * (highest / lowest) ** (b / bins));

/** Bin of each mode, -1 outside of all. */
const binOf = Int32Array.from(squaredModes, (squared) => {
  const multipole = fundamental * Math.sqrt(squared);
  return multipole < lowest || multipole >= highest ? -1 : edges.findIndex((edge) => multipole < edge) - 1;
});

/** Fourier modes in each bin; k and -k are one number, so that half of them are independent. */
export const modesInBins: readonly number[] = edges.slice(1).map((_, b) => binOf.filter((bin) => bin === b).length);

/** Mean multipole of the modes of each bin, to whole numbers. */
export const multipoles: readonly number[] = meanOver((i) => fundamental * Math.sqrt(squaredModes[i]!)).map(Math.round);

/** Mean of a quantity over the modes of each bin. */
export function meanOver(quantity: (mode: number) => number): number[] {
  const sums = new Array<number>(bins).fill(0);
  for (let i = 0; i < binOf.length; i += 1) {
    const bin = binOf[i]!;
    if (bin >= 0) sums[bin]! += quantity(i);
  }
  return sums.map((sum, b) => sum / modesInBins[b]!);
}

/** C of a map at one of its modes: |K|^2 area / pixels^4, K the plain transform. */
export function powerAt({ real, imaginary }: ComplexField, mode: number): number {
  return ((real[mode]! ** 2 + imaginary[mode]! ** 2) * mapArea) / pixels ** 4;
}

/** l^2 C / 2 pi in each bin, times 10^5, less the mean power of the noise: C_noise = sigma_pix^2 A_pix. */
export function powerSpectrum(modes: ComplexField): number[] {
  const noise = pixelNoise ** 2 * pixelArea;
  return meanOver((i) => ((1e5 * fundamental ** 2 * squaredModes[i]!) / (2 * Math.PI)) * (powerAt(modes, i) - noise));
}
