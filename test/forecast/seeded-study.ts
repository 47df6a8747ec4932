import { buildParts } from '../../src/forecast/build-parts.js';
import type { Combined } from '../../src/forecast/combined.js';
import { combine } from '../../src/forecast/combined.js';
import { scanOf } from '../../src/forecast/cuts.js';
import { forecast } from '../../src/forecast/forecast.js';
import type { Part } from '../../src/forecast/part.js';
import { suitesOf } from '../../src/forecast/suite.js';
import type { Results } from '../../src/results/schema.js';
import type { Ensemble, EnsembleDerivative, Node, Realisations, Run, Study } from '../../src/study/study.js';
import { realisations } from '../fixtures/memory-study.js';
import { normals } from '../fixtures/random-normal.js';

/** from, from + 1, ... */
export function range(count: number, from = 0): number[] {
  return Array.from({ length: count }, (_, i) => from + i);
}

/** Independent standard normal numbers, [rows, columns]. */
export function normalRows(rows: number, columns: number, seed: number): Float64Array {
  const next = normals(seed);
  return Float64Array.from({ length: rows * columns }, () => next());
}

/** A response of entry i, unlike from parameter to parameter. */
export function cosine(entry: number, parameter: number): number {
  return 0.5 * Math.cos((entry + 1) * (0.3 + 0.45 * parameter)) + (parameter === 1 ? 0.15 : 0);
}

export interface Noise {
  /** Times unit noise that belongs to the seed alone, shared by everything that is drawn with it. */
  readonly shared: number;
  /** Times unit noise of its own. */
  readonly own: number;
  /** Names the noise of its own. */
  readonly salt: number;
}

/** Rows whose noise is a function of the seed (and of the salt), so that a seed means the same in every list. */
export function seededRealisations(
  seeds: readonly number[],
  columns: number,
  mean: (entry: number) => number,
  { shared, own, salt }: Noise,
  offset = 0,
): Realisations {
  const data = new Float64Array(seeds.length * columns);
  seeds.forEach((seed, row) => {
    const common = normals(seed * 7919 + 13);
    const alone = normals(seed * 104729 + 7 * salt + 31);
    // A run that starts further right in the joint vector sees later noise of the same simulation.
    for (let i = 0; i < offset; i += 1) {
      common();
      alone();
    }
    for (let i = 0; i < columns; i += 1) data[row * columns + i] = mean(i) + shared * common() + own * alone();
  });
  return realisations(data, columns, seeds);
}

/** The parts of one combination, as the forecast makes them. */
export function partsOf(study: Study, name: string): readonly Part[] {
  const chosen = study.combinations.find((combination) => combination.name === name)!;
  return buildParts(study, chosen, suitesOf(study), scanOf(study));
}

export function combinedOf(study: Study, name: string): Combined {
  const chosen = study.combinations.find((combination) => combination.name === name)!;
  return combine(study, chosen, partsOf(study, name));
}

export function forecastOf(study: Study): Results {
  return forecast(study, { name: 'sigmafolio', version: '0' });
}

/** All rows of a source, copied. */
export function allRows({ rows }: Realisations): Float64Array {
  return Float64Array.from(rows.read(0, rows.rows));
}

/** The rows at some places, with their seeds. */
export function picked(source: Realisations, places: readonly number[]): Realisations {
  const { columns } = source.rows;
  const data = allRows(source);
  const seeds = source.seeds;
  return realisations(
    Float64Array.from(places.flatMap((place) => Array.from(data.subarray(place * columns, (place + 1) * columns)))),
    columns,
    seeds === null ? null : places.map((place) => seeds[place]!),
  );
}

/** A change to every array of realisations of a run: the fiducial rows and each derivative's. */
export interface Change {
  readonly fiducial?: (rows: Realisations) => Realisations;
  readonly derivative?: (rows: Realisations, parameter: string) => Realisations;
  readonly exact?: (values: Float64Array, parameter: string) => Float64Array;
}

const same = <T>(value: T): T => value;

export function changedRun(run: Run, change: Change): Run {
  if (run.data.kind === 'moments') throw new Error('only runs with realisations are changed here');
  const { fiducial = same, derivative = same, exact = same } = change;
  const derivatives = Object.fromEntries(
    Object.entries(run.data.derivatives).map(([name, one]): [string, EnsembleDerivative] => {
      switch (one.kind) {
        case 'insensitive':
          return [name, one];
        case 'exact':
          return [name, { ...one, values: exact(one.values, name) }];
        case 'per realisation':
          return [name, { ...one, realisations: derivative(one.realisations, name) }];
        case 'nodes':
          return [name, { ...one, nodes: one.nodes.map((node) => changedNode(node, (rows) => derivative(rows, name))) }];
      }
    }),
  );
  const data: Ensemble = { kind: 'ensemble', fiducial: fiducial(run.data.fiducial), derivatives };
  return { ...run, data };
}

function changedNode(node: Node, change: (rows: Realisations) => Realisations): Node {
  return node.realisations === 'fiducial' ? node : { ...node, realisations: change(node.realisations) };
}

export function changedStudy(study: Study, change: Change): Study {
  return { ...study, runs: study.runs.map((run) => changedRun(run, change)) };
}

/** The study without the derivative realisations of one seed, wherever it occurs. */
export function withoutSeed(study: Study, seed: number): Study {
  return changedStudy(study, {
    derivative: (rows) => picked(rows, range(rows.rows.rows).filter((place) => rows.seeds![place] !== seed)),
  });
}

/** Largest difference between two lists of numbers, relative to the largest of the second. */
export function distance(a: ArrayLike<number>, b: ArrayLike<number>): number {
  if (a.length !== b.length) return Infinity;
  let most = 0;
  let scale = 0;
  for (let i = 0; i < a.length; i += 1) {
    most = Math.max(most, Math.abs(a[i]! - b[i]!));
    scale = Math.max(scale, Math.abs(b[i]!));
  }
  return scale > 0 ? most / scale : most;
}

export function meanOf(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Standard deviation, divisor n - 1. */
export function deviationOf(values: readonly number[]): number {
  const centre = meanOf(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - centre) ** 2, 0) / (values.length - 1));
}
