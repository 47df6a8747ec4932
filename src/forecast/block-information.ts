import type { Matrix } from '../arrays/rows.js';
import { cholesky, unwhiten, whiten } from '../linalg/cholesky.js';
import type { CholeskyFactor } from '../linalg/cholesky.js';
import { add, zeros } from '../linalg/small.js';
import type { Small } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted } from './combined.js';
import { partFisher } from './fisher.js';
import type { LogErrors } from './log-errors.js';
import { solve } from './log-errors.js';
import type { Part } from './part.js';
import { precisionFactor } from './precision.js';

/** Corrected log errors of a combination without one block of its data vector. */
export interface WithoutBlock {
  readonly probe: string;
  readonly block: string;
  readonly entries: number;
  readonly logs: LogErrors;
}

/**
 * Errors with each block left out of the joint data vector. The precision matrix of what is kept is
 * Q_kk - Q_kB Q_BB^-1 Q_Bk with Q = S^-1, so that F loses g_B^T Q_BB^-1 g_B with g = S^-1 d: one inverse of the block, and no
 * new factor of the rest. Both the raw matrix and its noise are quadratic in the derivatives, so the same holds for the corrected one.
 * A combination of one block has only its priors left without it.
 * Source: methods, section 6; the inverse of a partitioned matrix (Schur complement).
 */
export function withoutBlocks(combined: Combined): readonly WithoutBlock[] {
  if (!combined.assessable) return [];
  const fishers = combined.parts.map((part) => last(partFisher(part)).corrected);
  const solved = combined.parts.map(precisionTimes);
  return combined.parts.flatMap((part, index) => {
    const blocks = new Map(part.entries.map(({ column }) => [`${column.probe}/${column.block}`, column]));
    return [...blocks.values()].map(({ probe, block }) => {
      const places = part.entries.flatMap(({ column }, i) => (column.probe === probe && column.block === block ? [i] : []));
      return { probe, block, entries: places.length, logs: logsWithout(combined, fishers, solved, index, Int32Array.from(places)) };
    });
  });
}

function logsWithout(
  combined: Combined,
  fishers: readonly Small[],
  solved: readonly Solution[],
  index: number,
  places: Int32Array,
): LogErrors {
  const part = combined.parts[index]!;
  const all = places.length === part.entries.length;
  const rest = all ? zeros(part.exact.rows) : lessBlock(part, solved[index]!, fishers[index]!, places);
  const terms = fishers.map((fisher, k) => [1, restricted(k === index ? rest : fisher, combined.active)] as const);
  return solve(add([1, combined.prior], ...terms)).logs;
}

function last<T>(values: readonly T[]): T {
  return values[values.length - 1]!;
}

/** S^-1 times every derivative row of a part. */
interface Solution {
  readonly exact: Matrix;
  readonly strands: readonly { readonly mean: Matrix; readonly centred: Matrix }[];
}

function precisionTimes(part: Part): Solution {
  const solve = (matrix: Matrix): Matrix => {
    const data = new Float64Array(matrix.data.length);
    for (let start = 0; start < data.length; start += matrix.columns) {
      data.set(unwhiten(part.factor, matrix.data.subarray(start, start + matrix.columns), matrix.columns), start);
    }
    return { ...matrix, data };
  };
  return {
    exact: solve(part.exact),
    strands: part.strands.map(({ mean, centred }) => ({
      mean: solve({ data: mean, rows: 1, columns: mean.length }),
      centred: solve(centred),
    })),
  };
}

function lessBlock(part: Part, solution: Solution, fisher: Small, places: Int32Array): Small {
  const { realisations } = part.covariance;
  const kept = precisionFactor(realisations, part.entries.length - places.length);
  const all = precisionFactor(realisations, part.entries.length);
  const block = precisionFactor(realisations, places.length);
  const lost = last(partFisher(blockPart(part, solution, places))).corrected;
  return add([kept / all, fisher], [-kept / block, lost]);
}

/** A part over the block alone, in the metric Q_BB^-1 of S^-1 times the derivatives. */
function blockPart(part: Part, solution: Solution, places: Int32Array): Part {
  const factor = blockFactor(part.factor, places);
  const through = (matrix: Matrix): Matrix => {
    const size = places.length;
    const data = new Float64Array(matrix.rows * size);
    for (let row = 0; row < matrix.rows; row += 1) {
      for (let k = 0; k < size; k += 1) data[row * size + k] = matrix.data[row * matrix.columns + places[k]!]!;
    }
    const block = { data, rows: matrix.rows, columns: size };
    whiten(factor, block);
    return block;
  };
  return {
    ...part,
    prefixes: [places.length],
    entries: Array.from(places, (place) => part.entries[place]!),
    exact: through(solution.exact),
    strands: part.strands.map((strand, k) => ({
      ...strand,
      mean: through(solution.strands[k]!.mean).data,
      centred: through(solution.strands[k]!.centred),
    })),
  };
}

/** Factor of Q_BB, the block of the inverse covariance. */
function blockFactor(factor: CholeskyFactor, places: Int32Array): CholeskyFactor {
  const size = places.length;
  const inverse = { data: new Float64Array(size * factor.columns), rows: size, columns: factor.columns };
  places.forEach((place, row) => {
    inverse.data[row * factor.columns + place] = 1;
  });
  // L^-1 e_B: their products are (L^-T L^-1)_BB.
  whiten(factor, inverse);
  const data = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    for (let j = 0; j < size; j += 1) {
      let sum = 0;
      for (let k = 0; k < factor.columns; k += 1) sum += inverse.data[i * factor.columns + k]! * inverse.data[j * factor.columns + k]!;
      data[i * size + j] = sum;
    }
  }
  const block = cholesky({ data, rows: size, columns: size });
  if (block.kind === 'factor') return block.factor;
  throw new Error('a block of the inverse of a positive-definite matrix must be positive definite');
}
