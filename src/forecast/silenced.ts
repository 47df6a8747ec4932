import { whiten } from '../linalg/cholesky.js';
import type { Matrix } from '../arrays/rows.js';
import type { Part, PartStrand } from './part.js';

/**
 * A part, at its full length only, whose added entries respond to nothing: their derivatives are exactly zero, their covariance with the baseline's
 * entries stays. What such a combination still gains, it gains by predicting the baseline's noise.
 */
export function silenced(part: Part): Part {
  const plainExact = masked(part, part.plainExact);
  const exact = { ...plainExact, data: Float64Array.from(plainExact.data) };
  whiten(part.factor, exact);
  return { ...part, prefixes: [part.entries.length], plainExact, exact, strands: part.strands.map((strand) => silencedStrand(part, strand)) };
}

function silencedStrand(part: Part, strand: PartStrand): PartStrand {
  const plain = masked(part, strand.plain);
  const centred = { ...plain, data: Float64Array.from(plain.data) };
  whiten(part.factor, centred);
  const plainMean = masked(part, { data: strand.plainMean, rows: 1, columns: strand.plainMean.length }).data;
  const mean = Float64Array.from(plainMean);
  whiten(part.factor, { data: mean, rows: 1, columns: mean.length });
  return { ...strand, plainMean, plain, mean, centred };
}

function masked(part: Part, matrix: Matrix): Matrix {
  const { columns } = matrix;
  return { ...matrix, data: matrix.data.map((value, k) => (part.entries[k % columns]!.added ? 0 : value)) };
}
