import { EigenvalueDecomposition, Matrix as Dense } from 'ml-matrix';

/** A small symmetric p x p matrix, row-major. */
export interface Small {
  readonly data: Float64Array;
  readonly size: number;
}

export type Inversion =
  | { readonly kind: 'inverse'; readonly inverse: Small; readonly condition: number }
  | { readonly kind: 'not positive definite'; readonly smallest: number }
  | { readonly kind: 'ill conditioned'; readonly condition: number };

/** Beyond this no digit of an inverse is left in double precision (methods, section 3). */
const largestCondition = 1e14;

/** Zero matrix of p x p. */
export function zeros(size: number): Small {
  return { data: new Float64Array(size * size), size };
}

/** Sum of matrices of one size, each times its factor. */
export function add(...terms: readonly (readonly [number, Small])[]): Small {
  const size = terms[0]![1].size;
  const data = new Float64Array(size * size);
  for (const [factor, term] of terms) {
    for (let i = 0; i < data.length; i += 1) data[i] = data[i]! + factor * term.data[i]!;
  }
  return { data, size };
}

/** Eigenvalues (ascending) and eigenvectors (columns) of a symmetric matrix. */
export function eigen(matrix: Small): { readonly values: Float64Array; readonly vectors: Small } {
  const { size } = matrix;
  if (size === 0) return { values: new Float64Array(0), vectors: zeros(0) };
  const dense = new Dense(size, size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) dense.set(i, j, (matrix.data[i * size + j]! + matrix.data[j * size + i]!) / 2);
  }
  const decomposition = new EigenvalueDecomposition(dense, { assumeSymmetric: true });
  const order = decomposition.realEigenvalues.map((value, index) => ({ value, index })).sort((a, b) => a.value - b.value);
  const vectors = new Float64Array(size * size);
  order.forEach(({ index }, k) => {
    for (let i = 0; i < size; i += 1) vectors[i * size + k] = decomposition.eigenvectorMatrix.get(i, index);
  });
  return { values: Float64Array.from(order, ({ value }) => value), vectors: { data: vectors, size } };
}

/** The matrix with rows and columns divided by the roots of a positive diagonal; null where an element is not positive or not finite. */
export function unitDiagonal(matrix: Small): { readonly scaled: Small; readonly scale: Float64Array } | null {
  const { size, data } = matrix;
  const scale = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    const element = data[i * size + i]!;
    if (!(element > 0 && element < Infinity)) return null;
    scale[i] = Math.sqrt(element);
  }
  return { scaled: { data: data.map((value, k) => value / (scale[Math.floor(k / size)]! * scale[k % size]!)), size }, scale };
}

/**
 * Inverse of a symmetric positive-definite matrix, after scaling to unit diagonal: parameters differ by many powers of
 * ten, and the scaled condition is the one that limits the digits.
 * @returns the inverse with that condition; or why there is none: an eigenvalue that is not positive, or a condition
 * beyond 1e14.
 * Accuracy: relative error about condition times 1e-16 (NIST Longley, condition 2e9 scaled: 6 digits or more).
 */
export function invert(matrix: Small): Inversion {
  const { size } = matrix;
  const unit = unitDiagonal(matrix);
  if (unit === null) return { kind: 'not positive definite', smallest: smallestDiagonal(matrix) };
  const { values } = eigen(unit.scaled);
  const smallest = values[0] ?? 1;
  const condition = (values[size - 1] ?? 1) / Math.abs(smallest);
  if (condition > largestCondition) return { kind: 'ill conditioned', condition };
  if (smallest <= 0) return { kind: 'not positive definite', smallest };
  const inverse = invertByCholesky(unit.scaled);
  if (inverse === null) return { kind: 'ill conditioned', condition };
  const { scale } = unit;
  for (let k = 0; k < inverse.length; k += 1) {
    inverse[k] = inverse[k]! / (scale[Math.floor(k / size)]! * scale[k % size]!);
  }
  return { kind: 'inverse', inverse: { data: inverse, size }, condition };
}

function smallestDiagonal(matrix: Small): number {
  let smallest = Infinity;
  for (let i = 0; i < matrix.size; i += 1) smallest = Math.min(smallest, matrix.data[i * matrix.size + i]!);
  return smallest;
}

/** (L L^T)^-1 = L^-T L^-1; null where a pivot is not positive. */
export function invertByCholesky({ data, size }: Small): Float64Array | null {
  const lower = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = data[i * size + j]!;
      for (let k = 0; k < j; k += 1) sum -= lower[i * size + k]! * lower[j * size + k]!;
      if (i === j && !(sum > 0)) return null;
      lower[i * size + j] = i === j ? Math.sqrt(sum) : sum / lower[j * size + j]!;
    }
  }
  const root = new Float64Array(size * size);
  for (let column = 0; column < size; column += 1) {
    for (let i = column; i < size; i += 1) {
      let sum = i === column ? 1 : 0;
      for (let k = column; k < i; k += 1) sum -= lower[i * size + k]! * root[k * size + column]!;
      root[i * size + column] = sum / lower[i * size + i]!;
    }
  }
  const inverse = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let sum = 0;
      for (let k = i; k < size; k += 1) sum += root[k * size + i]! * root[k * size + j]!;
      inverse[i * size + j] = sum;
      inverse[j * size + i] = sum;
    }
  }
  return inverse;
}

/**
 * Geometric mean of two positive-definite matrices, A # B = A^1/2 (A^-1/2 B A^-1/2)^1/2 A^1/2, after scaling both by
 * the diagonal of A. null where either is not positive definite.
 * Source: Bhatia, Positive Definite Matrices, chapter 4 (from memory); symmetric in A and B, and (cA) # B = sqrt(c) (A # B).
 */
export function geometricMean(a: Small, b: Small): Small | null {
  const unit = unitDiagonal(a);
  if (unit === null) return null;
  const { scale } = unit;
  const { size } = a;
  const scaledB = { data: b.data.map((value, k) => value / (scale[Math.floor(k / size)]! * scale[k % size]!)), size };
  const root = spectral(unit.scaled, Math.sqrt);
  const inverseRoot = spectral(unit.scaled, (value) => 1 / Math.sqrt(value));
  if (root === null || inverseRoot === null) return null;
  const middle = spectral(product(product(inverseRoot, scaledB), inverseRoot), Math.sqrt);
  if (middle === null) return null;
  const mean = product(product(root, middle), root);
  return { data: mean.data.map((value, k) => value * scale[Math.floor(k / size)]! * scale[k % size]!), size };
}

/** f applied to the eigenvalues of a symmetric matrix; null where one is not positive. */
function spectral(matrix: Small, f: (value: number) => number): Small | null {
  const { values, vectors } = eigen(matrix);
  if (!((values[0] ?? 1) > 0)) return null;
  const { size } = matrix;
  const data = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) {
      let sum = 0;
      for (let k = 0; k < size; k += 1) sum += vectors.data[i * size + k]! * f(values[k]!) * vectors.data[j * size + k]!;
      data[i * size + j] = sum;
    }
  }
  return { data, size };
}

/** Matrix product of two square matrices. */
export function product(a: Small, b: Small): Small {
  const { size } = a;
  const data = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) {
      let sum = 0;
      for (let k = 0; k < size; k += 1) sum += a.data[i * size + k]! * b.data[k * size + j]!;
      data[i * size + j] = sum;
    }
  }
  return { data, size };
}
