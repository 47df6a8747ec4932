import type { Matrix } from '../arrays/rows.js';
import type { CholeskyFactor } from '../linalg/cholesky.js';
import { whiten } from '../linalg/cholesky.js';
import type { Column, Parameter, Run } from '../study/study.js';
import type { Strand } from './derivatives.js';
import { sameKeys } from './realisations.js';
import type { FiducialCovariance, Suite } from './suite.js';
import { columnOffset, rowOfSeed, seedNumbers } from './suite.js';

/** One entry of the data vector of a combination: a column of a run. */
export interface Entry {
  readonly run: Run;
  readonly index: number;
  readonly column: Column;
  /** Not in the baseline. */
  readonly added: boolean;
}

/** Realisations of one parameter's derivative, over the entries of a part, as measured and whitened. */
export interface PartStrand {
  /** Index among the study's parameters. */
  readonly parameter: number;
  /** Number in the suite of each row. */
  readonly seeds: Int32Array;
  /** Row of each seed of the suite, or -1. */
  readonly rowOf: Int32Array;
  /** Mean, [D], and rows less the mean, [N, D]: as measured. */
  readonly plainMean: Float64Array;
  readonly plain: Matrix;
  /** The same, whitened. */
  readonly mean: Float64Array;
  readonly centred: Matrix;
}

/** What one suite gives to one combination. */
export interface Part {
  readonly suite: Suite;
  readonly runs: readonly Run[];
  /** In the order of the factor: entries that the scan never cuts, then along the scan. */
  readonly entries: readonly Entry[];
  /** Entries kept at each cut of the scan, then all of them. */
  readonly prefixes: readonly number[];
  readonly covariance: FiducialCovariance;
  readonly picks: Int32Array;
  readonly factor: CholeskyFactor;
  readonly volumeScale: number;
  /** Derivatives without noise, [p, D], as measured and whitened. */
  readonly plainExact: Matrix;
  readonly exact: Matrix;
  readonly strands: readonly PartStrand[];
  /** False where a derivative came as a mean without realisations. */
  readonly assessable: boolean;
}

/** Columns of the entries among the runs of a covariance. */
export function picksOf(entries: readonly Entry[], covariance: FiducialCovariance): Int32Array {
  return Int32Array.from(entries, (entry) => columnOffset(covariance.runs, entry.run) + entry.index);
}

/** Sub-matrix of a covariance in the order of the picks, [D, D]. */
export function chosen(covariance: Matrix, picks: Int32Array): Matrix {
  const size = picks.length;
  const data = new Float64Array(size * size);
  for (let i = 0; i < size; i += 1) {
    const row = picks[i]! * covariance.columns;
    for (let j = 0; j < size; j += 1) data[i * size + j] = covariance.data[row + picks[j]!]!;
  }
  return { data, rows: size, columns: size };
}

/** Whitens what the suite's runs say about each parameter's derivative at the part's entries. */
export function makePart(
  base: Pick<Part, 'suite' | 'runs' | 'entries' | 'prefixes' | 'covariance' | 'picks' | 'factor' | 'volumeScale'>,
  parameters: readonly Parameter[],
): Part {
  const size = base.entries.length;
  const plainExact = { data: new Float64Array(parameters.length * size), rows: parameters.length, columns: size };
  const strands: PartStrand[] = [];
  let assessable = true;
  parameters.forEach(({ name }, parameter) => {
    for (const run of base.runs) {
      const derivative = base.suite.derivatives.get(run.name)!.get(name)!;
      if (derivative.kind === 'mean') assessable = false;
      if (derivative.exact !== null) placeExact(plainExact, parameter, base.entries, run, derivative.exact);
    }
    for (const piece of pieces(base.suite, base.runs, name)) {
      const strand = partStrand(base.suite, base.entries, base.factor, parameter, piece);
      // Rows of nothing but zeros are no response and have no noise, as an exact derivative of zeros has none.
      if (strand.plain.data.some((value) => value !== 0) || strand.plainMean.some((value) => value !== 0)) strands.push(strand);
    }
  });
  const exact = { ...plainExact, data: Float64Array.from(plainExact.data) };
  whiten(base.factor, exact);
  return { ...base, plainExact, exact, strands, assessable };
}

function placeExact(target: Matrix, parameter: number, entries: readonly Entry[], run: Run, values: Float64Array): void {
  entries.forEach((entry, i) => {
    if (entry.run.name === run.name) target.data[parameter * target.columns + i] = values[entry.index]!;
  });
}

/** Strands of several runs that belong together: the same realisations, seen by each run. */
type Piece = readonly { readonly run: Run; readonly strand: Strand }[];

/**
 * Where every run has one strand over the same realisations, they are one strand of the joint vector. Otherwise each
 * run's strands stand alone, zero elsewhere: the sums over common realisations know how the noise is shared.
 */
function pieces(suite: Suite, runs: readonly Run[], parameter: string): readonly Piece[] {
  const noisy = runs.flatMap((run) =>
    suite.derivatives
      .get(run.name)!
      .get(parameter)!
      .strands.map((strand) => ({ run, strand })),
  );
  const first = noisy[0];
  if (first === undefined) return [];
  const onePerRun = new Set(noisy.map(({ run }) => run.name)).size === noisy.length;
  const alike = onePerRun && noisy.every(({ strand }) => sameKeys(strand.keys, first.strand.keys));
  return alike ? [noisy] : noisy.map((one) => [one]);
}

function partStrand(
  suite: Suite,
  entries: readonly Entry[],
  factor: CholeskyFactor,
  parameter: number,
  piece: Piece,
): PartStrand {
  const seeds = seedNumbers(piece[0]!.strand.keys, suite.derivativeSeeds);
  const plain = { data: new Float64Array(seeds.length * entries.length), rows: seeds.length, columns: entries.length };
  for (const { run, strand } of piece) fill(plain, seeds, entries, run, strand, suite);
  const plainMean = centre(plain);
  const centred = { ...plain, data: Float64Array.from(plain.data) };
  whiten(factor, centred);
  const mean = Float64Array.from(plainMean);
  whiten(factor, { data: mean, rows: 1, columns: mean.length });
  return { parameter, seeds, rowOf: rowOfSeed(seeds, suite.derivativeSeeds.size), plainMean, plain, mean, centred };
}

function fill(target: Matrix, seeds: Int32Array, entries: readonly Entry[], run: Run, strand: Strand, suite: Suite): void {
  const rows = rowOfSeed(seedNumbers(strand.keys, suite.derivativeSeeds), suite.derivativeSeeds.size);
  entries.forEach((entry, i) => {
    if (entry.run.name !== run.name) return;
    seeds.forEach((seed, row) => {
      target.data[row * target.columns + i] = strand.rows.data[rows[seed]! * strand.rows.columns + entry.index]!;
    });
  });
}

/** Takes the mean off every row, in place, and returns it. Shifted by the first row: a common offset costs no digits. */
function centre(matrix: Matrix): Float64Array {
  const { data, rows, columns } = matrix;
  const mean = new Float64Array(columns);
  for (let row = 1; row < rows; row += 1) {
    for (let i = 0; i < columns; i += 1) mean[i] = mean[i]! + (data[row * columns + i]! - data[i]!);
  }
  for (let i = 0; i < columns; i += 1) mean[i] = data[i]! + mean[i]! / rows;
  for (let k = 0; k < data.length; k += 1) data[k] = data[k]! - mean[k % columns]!;
  return mean;
}
