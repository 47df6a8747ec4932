import { dot } from '../linalg/dot.js';
import type { Small } from '../linalg/small.js';
import type { Part, PartStrand } from './part.js';
import { precisionFactor } from './precision.js';
import { sharedRows, sharedWeight } from './shared-noise.js';

/** Fisher matrices of one part at one cut, [p, p] each, scaled to the volume asked for. */
export interface PartFisher {
  readonly entries: number;
  readonly precision: number;
  readonly raw: Small;
  readonly corrected: Small;
  /** The corrected matrix without realisation s, for every s of the suite: [K, p, p]. */
  readonly without: Float64Array;
}

/** Whitened derivatives of a part, [p, D]: the exact part and the means of the strands. */
export function whitenedDerivatives(part: Part): Float64Array {
  const derivatives = Float64Array.from(part.exact.data);
  const { columns } = part.exact;
  for (const strand of part.strands) {
    const start = strand.parameter * columns;
    for (let i = 0; i < columns; i += 1) derivatives[start + i] = derivatives[start + i]! + strand.mean[i]!;
  }
  return derivatives;
}

/**
 * Fisher matrices of a part, raw and with the noise of the derivatives removed, at each cut, and the corrected matrix
 * with each realisation left out.
 *
 * raw F_ab = h d_a . d_b, whitened; corrected F_ab = raw - h sum_uv T_uv/(N_u N_v kappa_uv) over the strands u of a
 * and v of b, T_uv = sum over common realisations of the product of the centred rows. With all realisations common
 * this is the U-statistic h sum_{i != j} w_ia . w_jb/(N (N - 1)), exactly unbiased for a fixed covariance.
 *
 * All sums grow along the entries, so that one walk gives every cut, at O(K S^2 D) for K realisations and S strands.
 * The leave-one-out matrices are exact (not linearised): leaving out a realisation moves the mean of a strand by
 * -w/(N - 1) and every other centred row by +w/(N - 1).
 *
 * Source: methods, section 3; the U-statistic form is Hoeffding 1948, Ann. Math. Stat. 19, 293 (from memory); weights
 * for partly shared realisations derived in shared-noise.
 */
export function partFisher(part: Part): readonly PartFisher[] {
  const sums = startSums(part);
  let from = 0;
  return part.prefixes.map((to) => {
    addSegment(sums, from, to);
    from = to;
    return emit(sums, to);
  });
}

interface Sums {
  readonly part: Part;
  readonly parameters: number;
  readonly derivatives: Float64Array;
  readonly pairs: readonly Pair[];
  /** d_a . d_b, [p, p]. */
  readonly dd: Float64Array;
  /** d_a . w_us, [K, S, p]. */
  readonly dw: Float64Array;
  /** w_us . w_vs where both have s, [K, S, S]. */
  readonly ww: Float64Array;
  /** w_us . R_vu with R_vu the sum of v's rows over what it shares with u, [K, S, S]; zero where v shares all. */
  readonly wr: Float64Array;
  readonly seeds: number;
}

interface Pair {
  readonly a: number;
  readonly b: number;
  readonly common: number;
  readonly rowsA: Int32Array;
  readonly rowsB: Int32Array;
  /** Sum of b's centred rows over common realisations, [D]; null when all of b is common. */
  readonly restB: Float64Array | null;
  product: number;
}

function startSums(part: Part): Sums {
  const parameters = part.exact.rows;
  const strands = part.strands.length;
  const seeds = part.suite.derivativeSeeds.size;
  const pairs = part.strands.flatMap((a, i) => part.strands.map((b, j) => makePair(a, b, i, j)));
  return {
    part,
    parameters,
    derivatives: whitenedDerivatives(part),
    pairs,
    dd: new Float64Array(parameters * parameters),
    dw: new Float64Array(seeds * strands * parameters),
    ww: new Float64Array(seeds * strands * strands),
    wr: new Float64Array(seeds * strands * strands),
    seeds,
  };
}

function makePair(a: PartStrand, b: PartStrand, i: number, j: number): Pair {
  const { rowsA, rowsB, count } = sharedRows(a, b);
  const whole = count === b.seeds.length;
  return { a: i, b: j, common: count, rowsA, rowsB, restB: whole ? null : sumOfRows(b, rowsB), product: 0 };
}

function sumOfRows(strand: PartStrand, rows: Int32Array): Float64Array {
  const { data, columns } = strand.centred;
  const sum = new Float64Array(columns);
  for (const row of rows) {
    for (let i = 0; i < columns; i += 1) sum[i] = sum[i]! + data[row * columns + i]!;
  }
  return sum;
}

function addSegment(sums: Sums, from: number, to: number): void {
  const { part, parameters, derivatives, dd } = sums;
  const { columns } = part.exact;
  for (let a = 0; a < parameters; a += 1) {
    for (let b = 0; b < parameters; b += 1) {
      dd[a * parameters + b] = dd[a * parameters + b]! + dot(derivatives, a * columns, derivatives, b * columns, from, to);
    }
  }
  part.strands.forEach((strand, u) => {
    addDerivativeProducts(sums, strand, u, from, to);
  });
  for (const pair of sums.pairs) addPairProducts(sums, pair, from, to);
}

function addDerivativeProducts(sums: Sums, strand: PartStrand, u: number, from: number, to: number): void {
  const { parameters, derivatives, dw, part } = sums;
  const { data, columns } = strand.centred;
  strand.seeds.forEach((seed, row) => {
    const place = (seed * part.strands.length + u) * parameters;
    for (let a = 0; a < parameters; a += 1) {
      dw[place + a] = dw[place + a]! + dot(derivatives, a * columns, data, row * columns, from, to);
    }
  });
}

function addPairProducts(sums: Sums, pair: Pair, from: number, to: number): void {
  const { strands } = sums.part;
  const a = strands[pair.a]!;
  const b = strands[pair.b]!;
  const { columns } = a.centred;
  pair.rowsA.forEach((rowA, k) => {
    const product = dot(a.centred.data, rowA * columns, b.centred.data, pair.rowsB[k]! * columns, from, to);
    pair.product += product;
    const place = (a.seeds[rowA]! * strands.length + pair.a) * strands.length + pair.b;
    sums.ww[place] = sums.ww[place]! + product;
  });
  const rest = pair.restB;
  if (rest === null || pair.common === 0) return;
  a.seeds.forEach((seed, row) => {
    const place = (seed * strands.length + pair.a) * strands.length + pair.b;
    sums.wr[place] = sums.wr[place]! + dot(a.centred.data, row * columns, rest, 0, from, to);
  });
}

function emit(sums: Sums, entries: number): PartFisher {
  const { part, parameters } = sums;
  const precision = precisionFactor(part.covariance.realisations, entries);
  const scale = precision * part.volumeScale;
  const raw = { data: sums.dd.map((value) => scale * value), size: parameters };
  const corrected = { data: Float64Array.from(raw.data), size: parameters };
  for (const pair of sums.pairs) {
    const a = part.strands[pair.a]!;
    const b = part.strands[pair.b]!;
    const place = a.parameter * parameters + b.parameter;
    const bias = pair.product * sharedWeight(a.seeds.length, b.seeds.length, pair.common);
    corrected.data[place] = corrected.data[place]! - scale * bias;
  }
  const without = new Float64Array(sums.seeds * parameters * parameters);
  for (let seed = 0; seed < sums.seeds; seed += 1) leaveOut(sums, seed, scale, without);
  return { entries, precision, raw, corrected, without };
}

function leaveOut(sums: Sums, seed: number, scale: number, without: Float64Array): void {
  const { part, parameters, dd } = sums;
  const start = seed * parameters * parameters;
  for (let k = 0; k < dd.length; k += 1) without[start + k] = dd[k]!;
  part.strands.forEach((strand, u) => {
    if (strand.rowOf[seed]! < 0) return;
    const shift = 1 / (strand.seeds.length - 1);
    const place = (seed * part.strands.length + u) * parameters;
    for (let a = 0; a < parameters; a += 1) {
      const change = shift * sums.dw[place + a]!;
      const row = start + strand.parameter * parameters + a;
      const column = start + a * parameters + strand.parameter;
      without[row] = without[row]! - change;
      without[column] = without[column]! - change;
    }
  });
  for (const pair of sums.pairs) leaveOutPair(sums, pair, seed, without, start);
  for (let k = 0; k < dd.length; k += 1) without[start + k] = without[start + k]! * scale;
}

/** The shift of the means squared, less the noise that is left once the realisation is gone. */
function leaveOutPair(sums: Sums, pair: Pair, seed: number, without: Float64Array, start: number): void {
  const { part, parameters } = sums;
  const { strands } = part;
  const a = strands[pair.a]!;
  const b = strands[pair.b]!;
  const inA = a.rowOf[seed]! >= 0;
  const inB = b.rowOf[seed]! >= 0;
  const both = inA && inB ? 1 : 0;
  const shiftA = inA ? 1 / (a.seeds.length - 1) : 0;
  const shiftB = inB ? 1 / (b.seeds.length - 1) : 0;
  const place = (seed * strands.length + pair.a) * strands.length + pair.b;
  const mirrored = (seed * strands.length + pair.b) * strands.length + pair.a;
  const ww = sums.ww[place]!;
  const common = pair.common - both;
  const product =
    pair.product -
    ww +
    shiftA * (sums.wr[place]! - ww) +
    shiftB * (sums.wr[mirrored]! - ww) +
    shiftA * shiftB * ww * common;
  const weight = sharedWeight(a.seeds.length - (inA ? 1 : 0), b.seeds.length - (inB ? 1 : 0), common);
  const target = start + a.parameter * parameters + b.parameter;
  without[target] = without[target]! + shiftA * shiftB * ww - weight * product;
}
