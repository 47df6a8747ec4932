import { inverse, Matrix as Dense } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { partFisher } from '../../src/forecast/fisher.js';
import { subsetFisher } from '../../src/forecast/subset.js';
import type { EnsembleDerivative, Realisations, Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import {
  allRows,
  cosine,
  deviationOf,
  distance,
  meanOf,
  normalRows,
  partsOf,
  range,
  seededRealisations,
  withoutSeed,
} from './seeded-study.js';

// Sums of a few hundred products of numbers of order one: rounding stays below 1e-13; 1e-12 leaves a digit.
const rounding = 1e-12;

/** Seeds of the lower and of the upper node of each parameter. */
type SeedLists = readonly (readonly [readonly number[], readonly number[]])[];

const left = 5;
const right = 4;

/** Nodes at -1 and 1 over some columns of the joint vector; a simulation's noise at the two nodes is alike but not the same. */
function nodesOf(lists: SeedLists, offset: number, columns: number, salt: number): Record<string, EnsembleDerivative> {
  return Object.fromEntries(
    lists.map((seeds, a): [string, EnsembleDerivative] => [
      `p${String(a)}`,
      {
        kind: 'nodes',
        nodes: seeds.map((list, side) => ({
          at: 2 * side - 1,
          realisations: seededRealisations(
            list,
            columns,
            (i) => (2 * side - 1) * cosine(i + offset, a),
            { shared: 0.7, own: 0.5, salt: 10 * a + side + salt },
            offset,
          ),
        })),
      },
    ]),
  );
}

const scan = { coordinate: 'x', keep: 'below', at: [1, 2, 4] } as const;

function oneRun(lists: SeedLists): Study {
  const size = left + right;
  const fiducial = realisations(normalRows(60, size, 1), size);
  return memoryStudy({
    parameters: lists.map((_, a) => parameter(`p${String(a)}`)),
    combinations: [combination('joint', ['base', 'added'])],
    runs: [ensembleRun('run', [...columnsOf('base', left), ...columnsOf('added', right)], fiducial, nodesOf(lists, 0, size, 0))],
    scan,
  });
}

/** The two probes in two runs of one suite, with seed lists of their own. */
function twoRuns(first: SeedLists, second: SeedLists): Study {
  const seeds = range(60);
  const noise = { shared: 1, own: 0, salt: 0 };
  const zero = (): number => 0;
  return memoryStudy({
    parameters: first.map((_, a) => parameter(`p${String(a)}`)),
    combinations: [combination('joint', ['base', 'added'])],
    runs: [
      ensembleRun('one', columnsOf('base', left), seededRealisations(seeds, left, zero, noise), nodesOf(first, 0, left, 0)),
      ensembleRun('two', columnsOf('added', right), seededRealisations(seeds, right, zero, noise, left), nodesOf(second, left, right, 100)),
    ],
    scan,
  });
}

const alike = (seeds: readonly number[]): readonly [readonly number[], readonly number[]] => [seeds, seeds];

const cases: readonly (readonly [string, Study])[] = [
  ['one matched strand', oneRun([alike(range(7))])],
  ['three matched parameters with the same seeds', oneRun([alike(range(6)), alike(range(6)), alike(range(6))])],
  ['matched parameters with partly overlapping seeds', oneRun([alike(range(8)), alike(range(6, 4)), alike(range(5, 20))])],
  ['unmatched nodes', oneRun([[range(5), range(6, 100)], [range(7, 200), range(5, 300)]])],
  ['partly overlapping nodes', oneRun([[range(6), range(7, 3)], [range(5, 1), range(8, 2)]])],
  ['nodes that match once a seed is gone', oneRun([[range(6), range(7)], [range(7), range(6)]])],
  ['one common seed', oneRun([[range(4), range(4, 3)], alike(range(5, 3))])],
  ['two runs with the same seeds', twoRuns([alike(range(6)), alike(range(6))], [alike(range(6)), alike(range(6))])],
  ['two runs with partly overlapping seeds', twoRuns([alike(range(6)), [range(5), range(6, 2)]], [alike(range(7, 3)), alike(range(5))])],
  ['two runs without a common seed', twoRuns([alike(range(6))], [alike(range(7, 50))])],
  ['three realisations, the fewest', oneRun([alike(range(3)), [range(3), range(3, 2)]])],
];

describe('the Fisher matrix without one realisation', () => {
  it.each(cases)('is that of the study without it: %s', (_, study) => {
    const part = partsOf(study, 'joint')[0]!;
    const fishers = partFisher(part);
    for (const [seed, number] of part.suite.derivativeSeeds) {
      const count = fewestWithout(study, Number(seed));
      // A study refuses two realisations; the sums do not, so the smallest case goes through the members of a subset.
      const expected = count < 3 ? null : partFisher(partsOf(withoutSeed(study, Number(seed)), 'joint')[0]!);
      fishers.forEach((fisher, cut) => {
        const size = fisher.raw.size ** 2;
        const found = fisher.without.subarray(number * size, (number + 1) * size);
        if (expected !== null) expect(distance(found, expected[cut]!.corrected.data)).toBeLessThan(rounding);
      });
      const whole = fishers[fishers.length - 1]!;
      const size = whole.raw.size ** 2;
      const members = new Uint8Array(part.suite.derivativeSeeds.size).fill(1);
      members[number] = 0;
      const subset = subsetFisher(part, members)!;
      expect(distance(whole.without.subarray(number * size, (number + 1) * size), subset.corrected.data)).toBeLessThan(rounding);
    }
  });

  function fewestWithout(study: Study, seed: number): number {
    const counts = study.runs.flatMap((run) =>
      run.data.kind === 'moments' ? [] : Object.values(run.data.derivatives).flatMap((one) => (one.kind === 'nodes' ? one.nodes.map((node) => leftOf(node.realisations, seed)) : [])),
    );
    return Math.min(...counts);
  }

  function leftOf(rows: Realisations | 'fiducial', seed: number): number {
    return rows === 'fiducial' ? Infinity : Array.from(rows.seeds!).filter((one) => one !== seed).length;
  }
});

/** The noise-free sum over pairs of different realisations, with a dense inverse: nothing of the program's own but h. */
function uStatistic(rows: readonly Float64Array[], count: number, columns: number, precision: Dense): number[] {
  const at = (a: number, i: number): Dense => new Dense([Array.from(rows[a]!.subarray(i * columns, (i + 1) * columns))]);
  return rows.flatMap((_, a) =>
    rows.map((_unused, b) => {
      let sum = 0;
      for (let i = 0; i < count; i += 1) {
        for (let j = 0; j < count; j += 1) {
          if (i !== j) sum += at(a, i).mmul(precision).mmul(at(b, j).transpose()).get(0, 0);
        }
      }
      return sum / (count * (count - 1));
    }),
  );
}

function covarianceOf(rows: Float64Array, columns: number): Dense {
  const dense = new Dense(Array.from({ length: rows.length / columns }, (_, k) => Array.from(rows.subarray(k * columns, (k + 1) * columns))));
  const centred = dense.clone().center('column');
  return centred.transpose().mmul(centred).div(dense.rows - 1);
}

function perRealisation(rows: readonly Realisations[], fiducial: Realisations, size: number): Study {
  return memoryStudy({
    parameters: rows.map((_, a) => parameter(`p${String(a)}`)),
    combinations: [combination('joint', ['base'])],
    runs: [
      ensembleRun(
        'run',
        columnsOf('base', size),
        fiducial,
        Object.fromEntries(rows.map((one, a) => [`p${String(a)}`, { kind: 'per realisation', realisations: one }])),
      ),
    ],
    scan: { coordinate: 'x', keep: 'below', at: [] },
  });
}

describe('the corrected Fisher matrix', () => {
  it('of one entry and two parameters is the hand-made sum', () => {
    // Fiducials -1, 0, 1, 0, 0, 0, 0: variance 2/6, h = (7 - 1 - 2)/6 = 2/3, so h/S = 2. Derivatives 1, 2, 3: sum over pairs
    // i != j of y_i y_j is 36 - 14 = 22, over 3 * 2; with 1, 1, 4 beside it, (6 * 6 - 15)/6 and (36 - 18)/6.
    const fiducial = realisations(Float64Array.from([-1, 0, 1, 0, 0, 0, 0]), 1);
    const study = perRealisation([realisations(Float64Array.from([1, 2, 3]), 1), realisations(Float64Array.from([1, 1, 4]), 1)], fiducial, 1);
    const fisher = partFisher(partsOf(study, 'joint')[0]!)[0]!;
    expect(fisher.precision).toBeCloseTo(2 / 3, 14);
    expect(distance(fisher.raw.data, [8, 8, 8, 8])).toBeLessThan(rounding);
    expect(distance(fisher.corrected.data, [(2 * 22) / 6, (2 * 21) / 6, (2 * 21) / 6, (2 * 18) / 6])).toBeLessThan(rounding);
  });

  it('is the double sum over different realisations when all are common', () => {
    const size = 6;
    const count = 9;
    const fiducial = normalRows(40, size, 3);
    const rows = [0, 1, 2].map((a) => seededRealisations(range(count), size, (i) => cosine(i, a), { shared: 1, own: 0.6, salt: a }));
    const study = perRealisation(rows, realisations(fiducial, size), size);
    const fisher = partFisher(partsOf(study, 'joint')[0]!)[0]!;
    const precision = inverse(covarianceOf(fiducial, size)).mul((40 - size - 2) / 39);
    expect(distance(fisher.corrected.data, uStatistic(rows.map(allRows), count, size, precision))).toBeLessThan(rounding);
  });

  it('is the raw one where derivatives are exact', () => {
    const study = memoryStudy({
      parameters: [parameter('p0')],
      combinations: [combination('joint', ['base'])],
      runs: [ensembleRun('run', columnsOf('base', 3), realisations(normalRows(30, 3, 4), 3), { p0: { kind: 'exact', values: Float64Array.from([1, 2, 3]) } })],
    });
    const fisher = partFisher(partsOf(study, 'joint')[0]!).at(-1)!;
    expect(fisher.corrected.data).toEqual(fisher.raw.data);
    expect(fisher.without).toHaveLength(0);
  });

  it('adds an exact derivative to noisy ones without noise of its own', () => {
    const size = 4;
    const noisy = seededRealisations(range(8), size, (i) => cosine(i, 0), { shared: 1, own: 0, salt: 0 });
    const exact = Float64Array.from({ length: size }, (_, i) => cosine(i, 1));
    const fiducial = realisations(normalRows(40, size, 5), size);
    const make = (p1: EnsembleDerivative): Study =>
      memoryStudy({
        parameters: [parameter('p0'), parameter('p1')],
        combinations: [combination('joint', ['base'])],
        runs: [ensembleRun('run', columnsOf('base', size), fiducial, { p0: { kind: 'per realisation', realisations: noisy }, p1 })],
      });
    const repeated = realisations(Float64Array.from(range(8).flatMap(() => Array.from(exact))), size, range(8));
    const mixed = partFisher(partsOf(make({ kind: 'exact', values: exact }), 'joint')[0]!).at(-1)!;
    const same = partFisher(partsOf(make({ kind: 'per realisation', realisations: repeated }), 'joint')[0]!).at(-1)!;
    expect(distance(mixed.corrected.data, same.corrected.data)).toBeLessThan(rounding);
    expect(distance(mixed.without, same.without)).toBeLessThan(rounding);
  });

  it('of all members of a subset is that of the part', () => {
    for (const [, study] of cases) {
      const part = partsOf(study, 'joint')[0]!;
      const fisher = partFisher(part).at(-1)!;
      const subset = subsetFisher(part, new Uint8Array(part.suite.derivativeSeeds.size).fill(1))!;
      expect(distance(subset.raw.data, fisher.raw.data)).toBeLessThan(rounding);
      expect(distance(subset.corrected.data, fisher.corrected.data)).toBeLessThan(rounding);
    }
  });

  it('keeps its digits when the derivatives stand on an offset of 1e8', () => {
    // The noise is 1e-8 of the mean: a centred sum keeps 8 digits of the correction itself, and so all of the matrix.
    const size = 3;
    const plain = seededRealisations(range(20), size, () => 0, { shared: 1, own: 0, salt: 0 });
    const lifted = realisations(allRows(plain).map((value) => value + 1e8), size, range(20));
    const fiducial = realisations(normalRows(40, size, 6), size);
    const bias = (rows: Realisations): number => {
      const fisher = partFisher(partsOf(perRealisation([rows], fiducial, size), 'joint')[0]!)[0]!;
      return fisher.raw.data[0]! - fisher.corrected.data[0]!;
    };
    // raw is 1e16 times the bias: its difference holds no digit of it, but it must not be off by more than raw's rounding.
    expect(Math.abs(bias(lifted) - bias(plain))).toBeLessThan(1e17 * size * 4 * Number.EPSILON);
  });
});

describe('the expectation over many studies', () => {
  const size = 6;
  const repeats = 400;
  // One covariance for all: then the matrices are quadratic forms in the derivatives with a fixed metric.
  const fiducial = realisations(normalRows(60, size, 8), size);
  const precision = inverse(covarianceOf(allRows(fiducial), size)).mul((60 - size - 2) / 59);
  const response = (a: number): Dense => new Dense([range(size).map((i) => cosine(i, a))]);
  const truth = [0, 1].flatMap((a) => [0, 1].map((b) => response(a).mmul(precision).mmul(response(b).transpose()).get(0, 0)));

  const settings: readonly (readonly [string, SeedLists])[] = [
    ['matched', [alike(range(5)), alike(range(5))]],
    ['unmatched', [[range(5), range(7, 10)], [range(4, 20), range(6, 30)]]],
    ['partly overlapping', [[range(5), range(6, 2)], [range(5, 1), range(8, 3)]]],
    ['overlapping between parameters only', [alike(range(6)), alike(range(5, 4))]],
  ];

  it.each(settings)('is the truth for the corrected matrix, and more than that for the raw one: %s', (_, lists) => {
    const shifted = (k: number): SeedLists => lists.map(([a, b]) => [a.map((seed) => seed + 100 * k), b.map((seed) => seed + 100 * k)]);
    const fishers = range(repeats, 1).map((k) => {
      const study = memoryStudy({
        parameters: lists.map((_unused, a) => parameter(`p${String(a)}`)),
        combinations: [combination('joint', ['base'])],
        runs: [ensembleRun('run', columnsOf('base', size), fiducial, nodesOf(shifted(k), 0, size, 0))],
        scan: { coordinate: 'x', keep: 'below', at: [] },
      });
      return partFisher(partsOf(study, 'joint')[0]!)[0]!;
    });
    truth.forEach((value, place) => {
      const corrected = fishers.map((fisher) => fisher.corrected.data[place]!);
      // Four standard errors of the mean: one in 16 000 for each of 16 numbers.
      expect(Math.abs(meanOf(corrected) - value)).toBeLessThan((4 * deviationOf(corrected)) / Math.sqrt(repeats));
    });
    for (const place of [0, 3]) {
      const raw = fishers.map((fisher) => fisher.raw.data[place]!);
      expect(meanOf(raw) - truth[place]!).toBeGreaterThan((4 * deviationOf(raw)) / Math.sqrt(repeats));
    }
  });
});

describe('a cut', () => {
  it.each(cases)('has the matrices of a study with its entries alone: %s', (_, study) => {
    const fishers = partFisher(partsOf(study, 'joint')[0]!);
    scan.at.forEach((at, cut) => {
      const keep = ['base', 'added'].map((probe) => ({ probe, ranges: [{ coordinate: 'x', min: null, max: at }], blocks: null }));
      const alone = { ...study, combinations: [combination('joint', ['base', 'added'], { keep })], scan: null };
      const expected = partFisher(partsOf(alone, 'joint')[0]!).at(-1)!;
      const found = fishers[cut]!;
      expect(found.entries).toBe(expected.entries);
      expect(found.precision).toBe((60 - found.entries - 2) / 59);
      expect(distance(found.raw.data, expected.raw.data)).toBeLessThan(rounding);
      expect(distance(found.corrected.data, expected.corrected.data)).toBeLessThan(rounding);
      expect(distance(found.without, expected.without)).toBeLessThan(rounding);
    });
  });

  it('at 0 entries is empty', () => {
    const study = { ...oneRun([alike(range(5))]), scan: { ...scan, at: [0, 9] } };
    const [none, all] = partFisher(partsOf(study, 'joint')[0]!);
    expect(none!.entries).toBe(0);
    expect(none!.raw.data).toEqual(new Float64Array(1));
    expect(all!.entries).toBe(left + right);
  });
});
