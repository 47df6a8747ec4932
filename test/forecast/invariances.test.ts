import { describe, expect, it } from 'vitest';
import { seededBits, shuffled } from '../../src/forecast/random.js';
import type { Estimate, Results } from '../../src/results/schema.js';
import type { Study } from '../../src/study/study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { columnsOf, ensembleRun, parameter, realisations } from '../fixtures/memory-study.js';
import { allRows, changedRun, changedStudy, cosine, forecastOf, normalRows, picked, range, seededRealisations } from './seeded-study.js';

// Sums in another order, scaled: 1e-13 from rounding, times the condition (10 to 100) of small Fisher matrices.
const rounding = 1e-10;

/** Two parameters, nodes by seed for one and rows for the other, data correlated between entries. */
const size = 9;
const seeds = range(60, 300);
const noisy = (a: number, salt: number) => ({ shared: 0.5, own: 0.3, salt: 10 * a + salt });

const study: Study = {
  ...gaussianStudy({ entries: [5, 4], parameters: 2, fiducials: 200, derivatives: 60, derivativeNoise: 1, response: cosine, rho: 0.4, commonNoise: 0 }, 1),
  runs: [
    ensembleRun('run', [...columnsOf('base', 5), ...columnsOf('added', 4)], mixedFiducial(), {
      p0: {
        kind: 'nodes',
        nodes: [
          { at: -1, realisations: seededRealisations(seeds, size, (i) => -cosine(i, 0), noisy(0, 1)) },
          { at: 1, realisations: seededRealisations(seeds, size, (i) => cosine(i, 0), noisy(0, 2)) },
        ],
      },
      p1: { kind: 'per realisation', realisations: seededRealisations(seeds, size, (i) => cosine(i, 1), noisy(1, 3)) },
    }),
  ],
};

function mixedFiducial() {
  const rows = normalRows(200, size, 4);
  const mixed = rows.map((value, k) => (k % size === 0 ? value : 0.8 * value + 0.6 * rows[k - 1]!));
  return realisations(mixed, size, range(200, 1000));
}

type Kind = 'marginalised' | 'fixed';
const kinds: readonly Kind[] = ['marginalised', 'fixed'];
const numbers = ['raw', 'corrected', 'standardError', 'relativeStandardError', 'limit', 'split'] as const;
/** What is the same to rounding whatever the order of realisations: blocks and splits depend on it. */
const orderless = ['raw', 'corrected', 'standardError', 'relativeStandardError'] as const;

function expectRatio(found: Estimate, expected: Estimate, factor: number, keys: readonly (typeof numbers)[number][] = numbers): void {
  for (const key of keys) {
    const scale = key === 'relativeStandardError' ? 1 : factor;
    expect(found[key]! / (scale * expected[key]!)).toBeCloseTo(1, -Math.log10(2 * rounding));
  }
  expect(found.status).toBe(expected.status);
}

/** Errors of every parameter and combination, and gains: `factor` on errors, gains as they were. */
function expectScaled(found: Results, expected: Results, factor: (parameter: string) => number, keys?: readonly (typeof numbers)[number][]): void {
  for (const name of ['p0', 'p1']) {
    for (const kind of kinds) {
      for (const combination of ['base', 'joint']) {
        expectRatio(found.combinations[combination]!.errors[name]![kind], expected.combinations[combination]!.errors[name]![kind], factor(name), keys);
      }
      expectRatio(found.improvements.joint![name]![kind], expected.improvements.joint![name]![kind], 1, keys);
    }
  }
}

const original = forecastOf(study);
const one = (): number => 1;

describe('a forecast', () => {
  it('is worth testing here: every error has a value and both kinds of noise', () => {
    for (const name of ['p0', 'p1']) {
      const { parts, corrected } = original.combinations.joint!.errors[name]!.marginalised;
      expect(corrected).toBeGreaterThan(0);
      expect(parts.derivatives).toBeGreaterThan(0.01);
      expect(parts.covariance).toBeGreaterThan(0.01);
    }
  });

  it('gives the same bytes from the same study', () => {
    expect(JSON.stringify(forecastOf(study))).toBe(JSON.stringify(original));
  });

  it.each([1e6, 1e-9])('of a parameter in another unit has errors in that unit, and the same gains: %d', (factor) => {
    const scaled = changedRun(study.runs[0]!, {
      derivative: (rows, name) => (name === 'p1' ? realisations(allRows(rows).map((value) => value / factor), size, seeds) : rows),
    });
    const found = forecastOf({ ...study, runs: [scaled] });
    expectScaled(found, original, (name) => (name === 'p1' ? factor : 1));
    for (const name of ['p0', 'p1']) {
      expect(found.improvements.joint![name]!.marginalised.sham).toBeCloseTo(original.improvements.joint![name]!.marginalised.sham!, 9);
    }
  });

  it('does not change with the units of the entries', () => {
    const units = range(size).map((i) => 10 ** (3 * i - 12));
    const rescaled = (rows: Parameters<typeof allRows>[0]) => realisations(allRows(rows).map((value, k) => value * units[k % size]!), size, Array.from(rows.seeds!));
    expectScaled(forecastOf(changedStudy(study, { fiducial: rescaled, derivative: rescaled })), original, one);
  });

  it('does not change with the order of the entries', () => {
    const order = Array.from(shuffled(size, seededBits('entries')));
    const permuted = (rows: Parameters<typeof allRows>[0]) => {
      const data = allRows(rows);
      return realisations(data.map((_, k) => data[Math.floor(k / size) * size + order[k % size]!]!), size, Array.from(rows.seeds!));
    };
    const changed = changedStudy(study, { fiducial: permuted, derivative: permuted });
    const run = changed.runs[0]!;
    expectScaled(forecastOf({ ...changed, runs: [{ ...run, columns: order.map((i) => run.columns[i]!) }] }), original, one);
  });

  it('does not change with the order of the fiducial rows', () => {
    const order = Array.from(shuffled(200, seededBits('rows')));
    expectScaled(forecastOf(changedStudy(study, { fiducial: (rows) => picked(rows, order) })), original, one);
  });

  it('does not change with the order of derivative rows, blocks and splits aside', () => {
    const changed = changedStudy(study, { derivative: (rows, name) => picked(rows, Array.from(shuffled(seeds.length, seededBits(name)))) });
    expectScaled(forecastOf(changed), original, one, orderless);
  });

  it('does not change with what seeds are called', () => {
    const renamed = changedStudy(study, {
      fiducial: (rows) => ({ ...rows, seeds: Array.from(rows.seeds!, (seed) => 5 * seed + 3) }),
      derivative: (rows) => ({ ...rows, seeds: Array.from(rows.seeds!, (seed) => 1e9 - seed) }),
    });
    expectScaled(forecastOf(renamed), original, one);
  });

  it('does not change with the sign of a response', () => {
    const turned = changedStudy(study, { derivative: (rows, name) => (name === 'p0' ? realisations(allRows(rows).map((value) => -value), size, seeds) : rows) });
    expectScaled(forecastOf(turned), original, one);
  });

  it('does not change with an offset of the data, to the digits that are left', () => {
    // 1e6 beside a scatter of one: ten digits are left of the rows.
    const lifted = forecastOf(changedStudy(study, { fiducial: (rows) => realisations(allRows(rows).map((value) => value + 1e6), size, range(200, 1000)) }));
    for (const name of ['p0', 'p1']) {
      expect(lifted.combinations.joint!.errors[name]!.marginalised.corrected! / original.combinations.joint!.errors[name]!.marginalised.corrected!).toBeCloseTo(1, 8);
    }
  });

  it('of a nuisance parameter that is known exactly is that with it fixed', () => {
    const known = forecastOf({ ...study, parameters: [parameter('p0'), parameter('p1', { role: 'nuisance', prior: 1e-6 })] });
    const alone = forecastOf({ ...study, parameters: [parameter('p0')] });
    const { marginalised } = known.combinations.joint!.errors.p0!;
    const fixed = known.combinations.joint!.errors.p0!.fixed;
    // What a prior of 1e-6 leaves is its square over an error of about one.
    expect(marginalised.corrected! / fixed.corrected!).toBeCloseTo(1, 10);
    expect(fixed.corrected! / alone.combinations.joint!.errors.p0!.marginalised.corrected!).toBeCloseTo(1, 10);
    expect(marginalised.parts.derivatives! / alone.combinations.joint!.errors.p0!.marginalised.parts.derivatives!).toBeCloseTo(1, 8);
  });

  it('is unmoved by a prior that says nothing', () => {
    const wide = { ...study, parameters: [parameter('p0', { prior: 1e8 }), parameter('p1', { prior: 1e8 })] };
    expectScaled(forecastOf(wide), original, one);
  });

  it('adds a full prior matrix as it adds diagonal ones', () => {
    const diagonal = forecastOf({ ...study, parameters: [parameter('p0', { prior: 0.5 }), parameter('p1', { prior: 0.25 })] });
    const full = forecastOf({ ...study, prior: { data: Float64Array.from([4, 0, 0, 16]), rows: 2, columns: 2 } });
    expectScaled(full, diagonal, one);
    expect(diagonal.combinations.joint!.fisher.prior).toEqual([[4, 0], [0, 16]]);
    expect(full.combinations.joint!.fisher.raw).toEqual(diagonal.combinations.joint!.fisher.raw);
  });

  it('has a covariance that is the inverse of Fisher plus prior, of a matrix that is not diagonal', () => {
    const joint = forecastOf({ ...study, prior: { data: Float64Array.from([4, -3, -3, 9]), rows: 2, columns: 2 } }).combinations.joint!;
    for (const which of ['raw', 'corrected'] as const) {
      const fisher = joint.fisher[which]!;
      const inverse = joint.covariance[which]!;
      const product = (i: number, j: number): number => range(2).reduce((sum, k) => sum + (fisher[i]![k]! + joint.fisher.prior[i]![k]!) * inverse[k]![j]!, 0);
      expect(product(0, 0)).toBeCloseTo(1, 12);
      expect(product(0, 1)).toBeCloseTo(0, 12);
      expect(joint.errors.p0!.marginalised[which]).toBeCloseTo(Math.sqrt(inverse[0]![0]!), 12);
      expect(joint.errors.p1!.fixed[which]).toBeCloseTo(1 / Math.sqrt(fisher[1]![1]! + 9), 12);
      expect(joint.correlation[which]![0]![1]).toBeCloseTo(inverse[0]![1]! / Math.sqrt(inverse[0]![0]! * inverse[1]![1]!), 12);
    }
    const product = joint.fisher.corrected![0]![0]! + 4;
    expect(joint.globalCorrelation.p0).toBeCloseTo(Math.sqrt(1 - 1 / (product * joint.covariance.corrected![0]![0]!)), 12);
  });
});

describe('volume', () => {
  it('divides errors by its root, leaves relative uncertainty and gains of one volume alone', () => {
    const run = { ...study.runs[0]!, volume: 2, volumeUnit: '(Gpc/h)^3' };
    const scaled = forecastOf({ ...study, runs: [run], combinations: study.combinations.map((one) => ({ ...one, volume: 8 })) });
    expectScaled(scaled, original, () => 0.5);
    expect(scaled.combinations.joint!.suites[0]!.volumeScale).toBe(4);
  });

  it('does not touch priors', () => {
    const parameters = [parameter('p0', { prior: 0.1 }), parameter('p1')];
    const run = { ...study.runs[0]!, volume: 1 };
    const scaled = forecastOf({ ...study, parameters, runs: [run], combinations: study.combinations.map((one) => ({ ...one, volume: 1e12 })) });
    const small = forecastOf({ ...study, parameters, runs: [run], combinations: study.combinations.map((one) => ({ ...one, volume: 1e-12 })) });
    expect(scaled.combinations.joint!.fisher.prior[0]![0]).toBeCloseTo(100, 12);
    expect(small.combinations.joint!.errors.p0!.fixed.corrected).toBeCloseTo(0.1, 10);
  });
});

describe('suites', () => {
  const copy: Study['runs'][number] = {
    ...study.runs[0]!,
    name: 'again',
    suite: 'other',
    columns: study.runs[0]!.columns.map((column) => ({ ...column, probe: `${column.probe}2` })),
  };

  it('that are independent copies double the information: errors and their uncertainty fall by root 2', () => {
    const both = forecastOf({
      ...study,
      runs: [...study.runs, copy],
      combinations: [...study.combinations, { ...study.combinations[1]!, name: 'twice', probes: ['base', 'added', 'base2', 'added2'] }],
    });
    for (const name of ['p0', 'p1']) {
      for (const kind of kinds) {
        const single = both.combinations.joint!.errors[name]![kind];
        const double = both.combinations.twice!.errors[name]![kind];
        expect(double.corrected! / single.corrected!).toBeCloseTo(Math.SQRT1_2, 10);
        expect(double.raw! / single.raw!).toBeCloseTo(Math.SQRT1_2, 10);
        // Each copy moves half of the information: the first order is exact for the covariance. The jackknife sees steps of half the size.
        expect(double.parts.covariance! / single.parts.covariance!).toBeCloseTo(Math.SQRT1_2, 10);
        expect(Math.abs((double.parts.derivatives! / single.parts.derivatives!) * Math.SQRT2 - 1)).toBeLessThan(0.05);
      }
    }
  });

  it('of the same simulations do not: a copy of every entry is refused as one suite', () => {
    const joined = { ...copy, suite: study.runs[0]!.suite };
    expect(() => forecastOf({ ...study, runs: [...study.runs, joined], combinations: [study.combinations[0]!, { ...study.combinations[1]!, probes: ['base', 'base2'] }] })).toThrow('a duplicated column');
  });

  it('give one result whether the probes of one set of simulations stand in one run or in two', () => {
    const half = (name: string, from: number, to: number): Study['runs'][number] => {
      const cut = (rows: Parameters<typeof allRows>[0]) => {
        const data = allRows(rows);
        const kept = data.filter((_, k) => k % size >= from && k % size < to);
        return realisations(kept, to - from, Array.from(rows.seeds!));
      };
      return { ...changedRun(study.runs[0]!, { fiducial: cut, derivative: cut }), name, columns: study.runs[0]!.columns.slice(from, to) };
    };
    expectScaled(forecastOf({ ...study, runs: [half('one', 0, 5), half('two', 5, 9)] }), original, one);
  });
});
