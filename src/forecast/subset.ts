import { dot } from '../linalg/dot.js';
import type { Small } from '../linalg/small.js';
import { zeros } from '../linalg/small.js';
import type { Part, PartStrand } from './part.js';
import { precisionFactor } from './precision.js';
import { sharedRows, sharedWeight } from './shared-noise.js';

/** Which realisations of a suite take part: 1 or 0 for each. */
export type Members = Uint8Array;

/** Precision factor and volume of the whole part: what a product of whitened derivatives is multiplied by. */
export function scaleOf(part: Part): number {
  return precisionFactor(part.covariance.realisations, part.entries.length) * part.volumeScale;
}

/**
 * Whitened derivatives from some realisations only, [p, D]; null where a strand has fewer than `least` of them.
 */
export function derivativesOf(part: Part, members: Members, least: number): Float64Array | null {
  const derivatives = Float64Array.from(part.exact.data);
  const { columns } = part.exact;
  for (const strand of part.strands) {
    const mean = meanOver(strand, members, least);
    if (mean === null) return null;
    const start = strand.parameter * columns;
    for (let i = 0; i < columns; i += 1) derivatives[start + i] = derivatives[start + i]! + strand.mean[i]! + mean[i]!;
  }
  return derivatives;
}

/** Mean of the centred rows over the members, [D]. */
function meanOver(strand: PartStrand, members: Members, least: number): Float64Array | null {
  const { data, columns } = strand.centred;
  const mean = new Float64Array(columns);
  let count = 0;
  strand.seeds.forEach((seed, row) => {
    if (members[seed] === 0) return;
    count += 1;
    for (let i = 0; i < columns; i += 1) mean[i] = mean[i]! + data[row * columns + i]!;
  });
  if (count < least) return null;
  for (let i = 0; i < columns; i += 1) mean[i] = mean[i]! / count;
  return mean;
}

/** All products of rows of one [p, D] block with another, times a factor, [p, p]. */
export function products(a: Float64Array, b: Float64Array, parameters: number, factor: number): Small {
  const matrix = zeros(parameters);
  const columns = a.length / parameters;
  for (let i = 0; i < parameters; i += 1) {
    for (let j = 0; j < parameters; j += 1) {
      matrix.data[i * parameters + j] = factor * dot(a, i * columns, b, j * columns, 0, columns);
    }
  }
  return matrix;
}

/**
 * Fisher matrices of a part, raw and corrected, from some of its realisations and the full covariance. With all
 * realisations it is what `partFisher` gives for the whole data vector. null where a strand has fewer than two.
 */
export function subsetFisher(part: Part, members: Members): { readonly raw: Small; readonly corrected: Small } | null {
  const derivatives = derivativesOf(part, members, 2);
  if (derivatives === null) return null;
  const parameters = part.exact.rows;
  const scale = scaleOf(part);
  const raw = products(derivatives, derivatives, parameters, scale);
  const corrected = { data: Float64Array.from(raw.data), size: parameters };
  const means = part.strands.map((strand) => meanOver(strand, members, 2)!);
  part.strands.forEach((a, i) => {
    part.strands.forEach((b, j) => {
      const place = a.parameter * parameters + b.parameter;
      corrected.data[place] = corrected.data[place]! - scale * sharedNoise(a, means[i]!, b, means[j]!, members);
    });
  });
  return { raw, corrected };
}

/** Estimated covariance (trace, whitened) of the two strands' means over the members. */
function sharedNoise(a: PartStrand, meanA: Float64Array, b: PartStrand, meanB: Float64Array, members: Members): number {
  const { rowsA, rowsB } = sharedRows(a, b);
  const { columns } = a.centred;
  const offset = dot(meanA, 0, meanB, 0, 0, columns);
  let sum = 0;
  let common = 0;
  rowsA.forEach((rowA, k) => {
    if (members[a.seeds[rowA]!] === 0) return;
    const startA = rowA * columns;
    const startB = rowsB[k]! * columns;
    common += 1;
    sum += dot(a.centred.data, startA, b.centred.data, startB, 0, columns) + offset;
    sum -= dot(a.centred.data, startA, meanB, 0, 0, columns) + dot(b.centred.data, startB, meanA, 0, 0, columns);
  });
  return sum * sharedWeight(countOf(a, members), countOf(b, members), common);
}

/** Realisations of a strand among the members. */
export function countOf(strand: PartStrand, members: Members): number {
  let count = 0;
  for (const seed of strand.seeds) count += members[seed]!;
  return count;
}
