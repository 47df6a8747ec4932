import type { Matrix, RowSource } from '../arrays/rows.js';
import type { Moments } from '../linalg/gram.js';
import { momentsOf } from '../linalg/gram.js';
import type { Realisations, Run, Study } from '../study/study.js';
import type { RunDerivative } from './derivatives.js';
import { runDerivative } from './derivatives.js';
import type { Key } from './realisations.js';
import { commonKeys, joined, kept, keysOf } from './realisations.js';

/**
 * Runs whose realisations are the same simulations: their entries have a cross-covariance, their seeds name the same
 * noise. Different suites are independent.
 */
export interface Suite {
  readonly name: string;
  readonly runs: readonly Run[];
  /** By run name, then parameter name. */
  readonly derivatives: ReadonlyMap<string, ReadonlyMap<string, RunDerivative>>;
  /** Every derivative realisation of the suite, numbered. */
  readonly derivativeSeeds: ReadonlyMap<Key, number>;
  /** Every fiducial realisation of the suite, numbered. */
  readonly fiducialSeeds: ReadonlyMap<Key, number>;
  /** Covariance over all entries of the given runs, computed once for each set of runs that differs in realisations. */
  readonly covarianceOf: (runs: readonly Run[]) => FiducialCovariance;
  /** How many fiducial realisations some runs have in common; null for moments. */
  readonly sharedFiducials: (runs: readonly Run[]) => number | null;
}

/** Covariance of the entries of some runs side by side, and the rows it came from. */
export interface FiducialCovariance {
  readonly runs: readonly Run[];
  readonly covariance: Matrix;
  readonly mean: Float64Array | null;
  /** N_s; null where the covariance was given without it. */
  readonly realisations: number | null;
  /** Aligned rows with their numbers in the suite; null where only moments are given. */
  readonly rows: { readonly source: RowSource; readonly seeds: Int32Array } | null;
}

/** Groups the runs of a study by suite, in the order in which suites first appear. */
export function suitesOf(study: Study): readonly Suite[] {
  const names = [...new Set(study.runs.map((run) => run.suite))];
  return names.map((name) => makeSuite(study, name));
}

function makeSuite(study: Study, name: string): Suite {
  const runs = study.runs.filter((run) => run.suite === name);
  const derivatives = new Map(
    runs.map((run) => [
      run.name,
      new Map(study.parameters.map(({ name: parameter, fiducial }) => [parameter, runDerivative(run, parameter, fiducial)])),
    ]),
  );
  const strands = [...derivatives.values()].flatMap((run) => [...run.values()]).flatMap((derivative) => derivative.strands);
  const fiducialSeeds = numbered(runs.flatMap((run) => fiducialOf(run)).map(keysOf));
  return {
    name,
    runs,
    derivatives,
    derivativeSeeds: numbered(strands.map((strand) => strand.keys)),
    fiducialSeeds,
    covarianceOf: remembering(runs, fiducialSeeds),
    sharedFiducials: (chosen) => (chosen.every((run) => run.data.kind === 'ensemble') ? sharedKeys(chosen).length : null),
  };
}

function fiducialOf(run: Run): readonly Realisations[] {
  return run.data.kind === 'ensemble' ? [run.data.fiducial] : [];
}

function numbered(lists: readonly (readonly Key[])[]): ReadonlyMap<Key, number> {
  const numbers = new Map<Key, number>();
  for (const list of lists) {
    for (const key of list) {
      if (!numbers.has(key)) numbers.set(key, numbers.size);
    }
  }
  return numbers;
}

/** Where every run of the suite has the same realisations, one covariance serves every combination. */
function remembering(all: readonly Run[], seeds: ReadonlyMap<Key, number>): (runs: readonly Run[]) => FiducialCovariance {
  const known = new Map<string, FiducialCovariance>();
  return (runs) => {
    const shared = sharedKeys(all).length;
    const alike = all.every((run) => fiducialOf(run).every((fiducial) => fiducial.rows.rows === shared));
    const chosen = alike ? all : runs;
    const label = chosen.map((run) => run.name).join(' ');
    const found = known.get(label) ?? measure(chosen, seeds);
    known.set(label, found);
    return found;
  };
}

function sharedKeys(runs: readonly Run[]): readonly Key[] {
  return commonKeys(runs.flatMap(fiducialOf).map(keysOf));
}

function measure(runs: readonly Run[], seeds: ReadonlyMap<Key, number>): FiducialCovariance {
  const [first] = runs;
  if (first?.data.kind === 'moments') {
    const { covariance, realisations } = first.data;
    return { runs, covariance, mean: null, realisations, rows: null };
  }
  const keys = [...sharedKeys(runs)];
  const source = kept(joined(runs.flatMap(fiducialOf), keys));
  const moments: Moments = momentsOf(source);
  return {
    runs,
    covariance: moments.covariance,
    mean: moments.mean,
    realisations: moments.count,
    rows: { source, seeds: Int32Array.from(keys, (key) => seeds.get(key)!) },
  };
}

/** Offset of a run's first column among the entries of the runs side by side. */
export function columnOffset(runs: readonly Run[], run: Run): number {
  let offset = 0;
  for (const other of runs) {
    if (other.name === run.name) return offset;
    offset += other.columns.length;
  }
  throw new Error(`run ${run.name} is not among ${runs.map((other) => other.name).join(', ')}`);
}

/** Number of a key in a suite's table. */
export function seedNumbers(keys: readonly Key[], table: ReadonlyMap<Key, number>): Int32Array {
  return Int32Array.from(keys, (key) => table.get(key)!);
}

/** Row of each seed number, or -1. */
export function rowOfSeed(seeds: Int32Array, count: number): Int32Array {
  const rows = new Int32Array(count).fill(-1);
  seeds.forEach((seed, row) => {
    rows[seed] = row;
  });
  return rows;
}
