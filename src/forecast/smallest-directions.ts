import type { Matrix } from '../arrays/rows.js';
import { add, eigen } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted } from './combined.js';
import { partFisher } from './fisher.js';
import type { LogErrors } from './log-errors.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import { chosen } from './part.js';

/** Errors again without the smallest eigen-directions of the correlation matrix of the data. */
export interface SmallestDirections {
  /** Condition number of the correlation matrix. */
  readonly condition: number;
  /** Directions removed, from none; and the corrected log errors without them. */
  readonly removed: readonly number[];
  readonly logs: readonly LogErrors[];
}

/** Longest data vector for which all eigenvectors are made: a few seconds. */
const longest = 400;

/** How many directions are taken away, where there are that many. */
const steps = [0, 1, 2, 5, 10] as const;

/**
 * In the basis of the eigenvectors of the correlation matrix, with the largest eigenvalue first, removing the smallest directions is
 * taking a leading block, and the sums of `partFisher` give all of them at once, each with its own precision factor. An error that moves by
 * much when a few of the smallest directions go rests on cancellations that the covariance may not know well enough.
 * null for several suites, for derivatives without realisations, or where D > 400.
 * Source: methods, section 7; common practice.
 */
export function smallestDirections(combined: Combined): SmallestDirections | null {
  const [part, ...others] = combined.parts;
  if (part === undefined || others.length > 0 || !combined.assessable || part.entries.length > longest) return null;
  const basis = eigenBasis(part);
  const size = part.entries.length;
  const removed = steps.filter((count) => size - count > combined.active.length);
  const rotated: Part = {
    ...part,
    prefixes: removed.map((count) => size - count).reverse(),
    exact: rotate(part.plainExact, basis.whitening),
    strands: part.strands.map((strand) => ({
      ...strand,
      mean: rotate({ data: strand.plainMean, rows: 1, columns: size }, basis.whitening).data,
      centred: rotate(strand.plain, basis.whitening),
    })),
  };
  const fishers = [...partFisher(rotated)].reverse();
  return {
    condition: basis.condition,
    removed,
    logs: fishers.map(({ corrected }) => solve(add([1, combined.prior], [1, restricted(corrected, combined.active)])).logs),
  };
}

/** Columns v_k/(sd sqrt(lambda_k)), largest eigenvalue first: rows times this are whitened. */
function eigenBasis(part: Part): { readonly whitening: Matrix; readonly condition: number } {
  const size = part.entries.length;
  const covariance = chosen(part.covariance.covariance, part.picks);
  const deviation = Float64Array.from({ length: size }, (_, i) => Math.sqrt(covariance.data[i * (size + 1)]!));
  const correlation = covariance.data.map((value, k) => value / (deviation[Math.floor(k / size)]! * deviation[k % size]!));
  const { values, vectors } = eigen({ data: correlation, size });
  const data = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let k = 0; k < size; k += 1) {
      const from = size - 1 - k;
      data[i * size + k] = vectors.data[i * size + from]! / (deviation[i]! * Math.sqrt(values[from]!));
    }
  }
  return { whitening: { data, rows: size, columns: size }, condition: values[size - 1]! / values[0]! };
}

function rotate(matrix: Matrix, basis: Matrix): Matrix {
  const { rows, columns } = matrix;
  const data = new Float64Array(rows * columns);
  for (let row = 0; row < rows; row += 1) {
    for (let i = 0; i < columns; i += 1) {
      const value = matrix.data[row * columns + i]!;
      if (value === 0) continue;
      for (let k = 0; k < columns; k += 1) {
        data[row * columns + k] = data[row * columns + k]! + value * basis.data[i * columns + k]!;
      }
    }
  }
  return { data, rows, columns };
}
