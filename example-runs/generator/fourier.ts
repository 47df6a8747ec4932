/** A square complex field, row-major, as two arrays of size^2. */
export interface ComplexField {
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
}

export interface Fourier {
  readonly size: number;
  /** In place: F(m, n) = sum_jk f(j, k) exp(-2 pi i (j m + k n) / size). */
  readonly forward: (field: ComplexField) => void;
  /** In place, the inverse of `forward`: with the factor 1 / size^2. */
  readonly inverse: (field: ComplexField) => void;
}

/**
 * Fourier transforms of square fields, rows then columns, each by the radix-2 algorithm in place (Cooley & Tukey 1965,
 * Math. Comp. 19, 297): bit-reversed order, then log2(size) passes of butterflies.
 * @param size a power of two
 */
export function fourier(size: number): Fourier {
  if (!Number.isInteger(Math.log2(size))) throw new Error(`size ${String(size)} is not a power of two`);
  const line = lineTransform(size);
  const forward = (field: ComplexField): void => {
    overLines(field, size, 1, line);
    overLines(field, size, size, line);
  };
  // The transform with real and imaginary part exchanged is the inverse, but for the factor.
  const inverse = ({ real, imaginary }: ComplexField): void => {
    forward({ real: imaginary, imaginary: real });
    const factor = 1 / size ** 2;
    for (let i = 0; i < real.length; i += 1) {
      real[i]! *= factor;
      imaginary[i]! *= factor;
    }
  };
  return { size, forward, inverse };
}

type Line = (real: Float64Array, imaginary: Float64Array) => void;

/** Applies a transform along rows (step 1) or columns (step size), through a copy of each line. */
function overLines({ real, imaginary }: ComplexField, size: number, step: number, line: Line): void {
  const stride = step === 1 ? size : 1;
  const lineReal = new Float64Array(size);
  const lineImaginary = new Float64Array(size);
  for (let l = 0; l < size; l += 1) {
    for (let i = 0; i < size; i += 1) {
      lineReal[i] = real[l * stride + i * step]!;
      lineImaginary[i] = imaginary[l * stride + i * step]!;
    }
    line(lineReal, lineImaginary);
    for (let i = 0; i < size; i += 1) {
      real[l * stride + i * step] = lineReal[i]!;
      imaginary[l * stride + i * step] = lineImaginary[i]!;
    }
  }
}

function lineTransform(size: number): Line {
  const cosines = Float64Array.from({ length: size / 2 }, (_, i) => Math.cos((2 * Math.PI * i) / size));
  const sines = Float64Array.from({ length: size / 2 }, (_, i) => -Math.sin((2 * Math.PI * i) / size));
  const swapped = reversedBits(size);
  return (real, imaginary) => {
    for (let i = 0; i < size; i += 1) {
      const j = swapped[i]!;
      if (j <= i) continue;
      [real[i], real[j]] = [real[j]!, real[i]!];
      [imaginary[i], imaginary[j]] = [imaginary[j]!, imaginary[i]!];
    }
    for (let half = 1; half < size; half *= 2) {
      const turn = size / (2 * half);
      for (let start = 0; start < size; start += 2 * half) {
        for (let k = 0; k < half; k += 1) {
          const a = start + k;
          const b = a + half;
          const cosine = cosines[k * turn]!;
          const sine = sines[k * turn]!;
          const oddReal = real[b]! * cosine - imaginary[b]! * sine;
          const oddImaginary = real[b]! * sine + imaginary[b]! * cosine;
          real[b] = real[a]! - oddReal;
          imaginary[b] = imaginary[a]! - oddImaginary;
          real[a]! += oddReal;
          imaginary[a]! += oddImaginary;
        }
      }
    }
  };
}

function reversedBits(size: number): Int32Array {
  const order = new Int32Array(size);
  for (let i = 1; i < size; i += 1) order[i] = (order[i >> 1]! >> 1) | ((i & 1) === 1 ? size / 2 : 0);
  return order;
}
