/** The invented survey's patch of sky and its noise. */

/** Pixels on a side of the square, periodic map. */
export const pixels = 128;

/** Side of the map in degrees. */
export const sideInDegrees = 6;

const radians = Math.PI / 180;
const side = sideInDegrees * radians;

export const arcminute = radians / 60;

/** Multipole of the longest wave that fits into the map. */
export const fundamental = (2 * Math.PI) / side;

export const mapArea = side ** 2;
export const pixelArea = mapArea / pixels ** 2;

/** Galaxies for each square arcminute, and the rms of one component of their ellipticity. */
const galaxyDensity = 40;
const ellipticity = 0.26;

/** Noise of the convergence in a pixel: sigma_e^2 / (n A) with sigma_e of one component (Kaiser & Squires 1993, from memory). */
export const pixelNoise = ellipticity / Math.sqrt((galaxyDensity * pixelArea) / arcminute ** 2);

/** The wave in place i of a transform, from -pixels/2 to pixels/2 - 1. */
function wave(i: number): number {
  return i < pixels / 2 ? i : i - pixels;
}

/** Squared length of each mode in units of the fundamental: whole numbers, row-major. */
export const squaredModes: Int32Array = Int32Array.from(
  { length: pixels ** 2 },
  (_, i) => wave(Math.floor(i / pixels)) ** 2 + wave(i % pixels) ** 2,
);

/** A spectrum C(l) at each mode of the map. The mean of a map is given the power of the longest wave. */
export function onModes(spectrum: (multipole: number) => number): Float64Array {
  const known = new Map<number, number>();
  return Float64Array.from(squaredModes, (squared) => {
    const key = Math.max(squared, 1);
    const value = known.get(key) ?? spectrum(fundamental * Math.sqrt(key));
    known.set(key, value);
    return value;
  });
}
