import type { Matrix } from '../arrays/rows.js';
import { cholesky, unwhiten, whiten } from '../linalg/cholesky.js';
import type { CholeskyFactor } from '../linalg/cholesky.js';
import { add, zeros } from '../linalg/small.js';
import type { Small } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { restricted, whole } from './combined.js';
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
  readonly logs: LogErrors | null;
}

/**
 * Errors with each block left out of the joint data vector. The precision matrix of what is kept is
 * Q_kk - Q_kB Q_BB^-1 Q_Bk with Q = S^-1, so that F loses g_B^T Q_BB^-1 g_B with g = S^-1 d: one inverse of the block, and no
 * new factor of the rest. Both the raw matrix and its noise are quadratic in the derivatives, so the same holds for the corrected one.
 * A combination of one block has nothing left without it: logs are null.
 * Source: methods, section 6; the inverse of a partitioned matrix (Schur complement).
 */
export function withoutBlocks(combined: Combined): readonly WithoutBlock[] {
  if (!combined.assessable) return [];
  return combined.parts.flatMap((part) => {
    const blocks = new Map(part.entries.map(({ column }) => [`${column.probe}/${column.block}`, column]));
    return [...blocks.values()].map(({ probe, block }) => {
      const places = part.entries.flatMap(({ column }, i) => (column.probe === probe && column.block === block ? [i] : []));
      return { probe, block, entries: places.length, logs: logsWithout(combined, part, Int32Array.from(places)) };
    });
  });
}

function logsWithout(combined: Combined, part: Part, places: Int32Array): LogErrors | null {
  const fishers: Small[] = combined.parts.map((other) => last(partFisher(other)).corrected);
  const index = combined.parts.indexOf(part);
  fishers[index] = places.length === part.entries.length ? zeros(part.exact.rows) : lessBlock(part, fishers[index]!, places);
  const total = add([1, combined.prior], ...fishers.map((fisher) => [1, restricted(fisher, combined.active)] as const));
  const { corrected } = whole(combined);
  return corrected === null ? null : solve(total).logs;
}

function last<T>(values: readonly T[]): T {
  return values[values.length - 1]!;
}

function lessBlock(part: Part, fisher: Small, places: Int32Array): Small {
  const { realisations } = part.covariance;
  const kept = precisionFactor(realisations, part.entries.length - places.length);
  const all = precisionFactor(realisations, part.entries.length);
  const block = precisionFactor(realisations, places.length);
  const lost = last(partFisher(blockPart(part, places))).corrected;
  return add([kept / all, fisher], [-kept / block, lost]);
}

/** A part over the block alone, in the metric Q_BB^-1 of S^-1 times the derivatives. */
function blockPart(part: Part, places: Int32Array): Part {
  const factor = blockFactor(part.factor, places);
  const through = (matrix: Matrix): Matrix => {
    const size = places.length;
    const data = new Float64Array(matrix.rows * size);
    for (let row = 0; row < matrix.rows; row += 1) {
      const whitened = matrix.data.subarray(row * matrix.columns, (row + 1) * matrix.columns);
      const solution = unwhiten(part.factor, whitened, matrix.columns);
      places.forEach((place, k) => {
        data[row * size + k] = solution[place]!;
      });
    }
    const block = { data, rows: matrix.rows, columns: size };
    whiten(factor, block);
    return block;
  };
  return {
    ...part,
    prefixes: [places.length],
    entries: Array.from(places, (place) => part.entries[place]!),
    exact: through(part.exact),
    strands: part.strands.map((strand) => ({
      ...strand,
      mean: through({ data: strand.mean, rows: 1, columns: strand.mean.length }).data,
      centred: through(strand.centred),
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
