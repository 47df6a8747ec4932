import { Ajv2020 } from 'ajv/dist/2020.js';
import { describe, expect, it } from 'vitest';
import { resultsJsonSchema } from '../../src/results/json-schema.js';
import type { Results } from '../../src/results/schema.js';
import { resultsSchema } from '../../src/results/schema.js';
import type { EnsembleDerivative, Study } from '../../src/study/study.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { columnsOf, combination, ensembleRun, gainClaim, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';
import { allRows, changedStudy, cosine, forecastOf, normalRows, range } from './seeded-study.js';

const validate = new Ajv2020({ strict: true }).compile(JSON.parse(resultsJsonSchema()) as object);

/** Every number of the results, with its path. */
function numbersIn(value: unknown, path: string): readonly (readonly [string, number])[] {
  if (typeof value === 'number') return [[path, value]];
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([key, inner]) => numbersIn(inner, `${path}.${key}`));
}

function expectValid(results: Results): void {
  expect(numbersIn(results, '').filter(([, value]) => !Number.isFinite(value))).toEqual([]);
  expect(resultsSchema.parse(results)).toEqual(results);
  const read: unknown = JSON.parse(JSON.stringify(results));
  expect(validate(read), JSON.stringify(validate.errors)).toBe(true);
  expect(JSON.stringify(read)).toBe(JSON.stringify(results));
}

const model: GaussianModel = {
  entries: [4, 4],
  parameters: 3,
  fiducials: 100,
  derivatives: 30,
  derivativeNoise: 0.4,
  response: cosine,
  rho: 0.3,
  commonNoise: 0.3,
};

const insensitive: EnsembleDerivative = { kind: 'insensitive' };

function withDerivatives(study: Study, change: (derivatives: Readonly<Record<string, EnsembleDerivative>>) => Readonly<Record<string, EnsembleDerivative>>): Study {
  return {
    ...study,
    runs: study.runs.map((run) => (run.data.kind === 'moments' ? run : { ...run, data: { ...run.data, derivatives: change(run.data.derivatives) } })),
  };
}

function scaled(study: Study, fiducial: number, derivative: number): Study {
  return changedStudy(study, {
    fiducial: (rows) => realisations(allRows(rows).map((value) => fiducial * value), rows.rows.columns),
    derivative: (rows) => realisations(allRows(rows).map((value) => derivative * value), rows.rows.columns),
  });
}

const priors = (study: Study, prior: number): Study => ({ ...study, parameters: study.parameters.map((one) => ({ ...one, prior })) });

const plain = gaussianStudy({ ...model, claims: [gainClaim('p0', 'joint', 'base', 1.1)] }, 1);
const identity = { data: Float64Array.from(range(64), (k) => (k % 9 === 0 ? 1 : 0)), rows: 8, columns: 8 };

function moments(realisationsBehind: number | null, exact: boolean): Study {
  const derivatives = Object.fromEntries(
    range(3).map((a) => {
      const values = Float64Array.from(range(8), (i) => cosine(i, a));
      return [`p${String(a)}`, exact ? { kind: 'exact' as const, values } : { kind: 'mean' as const, mean: values, realisations: null, noise: null }];
    }),
  );
  return { ...plain, runs: [momentsRun('run', plain.runs[0]!.columns, { covariance: identity, realisations: realisationsBehind, derivatives })] };
}

const studies: readonly (readonly [string, Study])[] = [
  ['a plain one', plain],
  ['one with the fewest realisations', gaussianStudy({ ...model, derivatives: 3, fiducials: 11 }, 2)],
  ['one with ten derivative realisations', gaussianStudy({ ...model, derivatives: 10 }, 3)],
  ['noise far above the response', gaussianStudy({ ...model, derivativeNoise: 30 }, 4)],
  ['derivatives without noise', gaussianStudy({ ...model, derivativeNoise: 0 }, 5)],
  ['more parameters than entries', gaussianStudy({ ...model, entries: [1, 1], parameters: 5 }, 6)],
  ['more parameters than entries, with priors', priors(gaussianStudy({ ...model, entries: [1, 1], parameters: 5 }, 6), 0.3)],
  ['nothing that responds', withDerivatives(plain, (all) => Object.fromEntries(Object.keys(all).map((name) => [name, insensitive])))],
  ['one parameter that nothing responds to', withDerivatives(plain, (all) => ({ ...all, p1: insensitive }))],
  ['exact and noisy derivatives', withDerivatives(plain, (all) => ({ ...all, p1: { kind: 'exact', values: Float64Array.from(range(8), (i) => cosine(i, 1)) } }))],
  ['two parameters with one response', withDerivatives(plain, (all) => ({ ...all, p1: all.p0! }))],
  ['priors that say nothing', priors(plain, 1e100)],
  ['priors that say all', priors(plain, 1e-60)],
  ['a full prior of rank one', { ...plain, prior: { data: new Float64Array(9).fill(1), rows: 3, columns: 3 } }],
  ['data of 1e30', scaled(plain, 1e30, 1e30)],
  ['data of 1e-60', scaled(plain, 1e-60, 1e-60)],
  ['responses of 1e60', scaled(plain, 1, 1e60)],
  ['responses of 1e-60', scaled(plain, 1, 1e-60)],
  ['moments without realisations', moments(null, false)],
  ['moments with exact derivatives', moments(50, true)],
  ['moments known exactly', moments(null, true)],
  ['a combination that shares nothing with the baseline', { ...plain, combinations: [combination('base', ['base']), combination('joint', ['added'])] }],
  ['one combination alone', { ...plain, combinations: [combination('base', ['base'])], claims: [] }],
  ['no coordinate', { ...plain, scan: null, runs: plain.runs.map((run) => ({ ...run, columns: run.columns.map((column) => ({ ...column, coordinate: null })) })) }],
];

describe('the results', () => {
  it.each(studies)('follow both schemas, and hold nothing but finite numbers: %s', (_, study) => {
    expectValid(forecastOf(study));
  });

  it('name every combination, run and parameter of the study', () => {
    const results = forecastOf(plain);
    expect(Object.keys(results.combinations)).toEqual(['base', 'joint']);
    expect(Object.keys(results.improvements)).toEqual(['joint']);
    expect(Object.keys(results.combinations.joint!.errors)).toEqual(['p0', 'p1', 'p2']);
    expect(results.combinations.joint).toMatchObject({
      entries: 8,
      fiducialRealisations: 100,
      derivativeRealisations: { p0: 30, p1: 30, p2: 30 },
      precisionFactor: 90 / 99,
      parameters: ['p0', 'p1', 'p2'],
      cuts: [],
      volume: null,
      notAssessable: [],
    });
    expect(results.combinations.joint!.suites[0]).toMatchObject({ suite: 'box', runs: ['run'], wishartDegrees: 100 - 1 - 8 + 3, volumeScale: 1 });
    expect(results.runs.run).toMatchObject({ kind: 'ensemble', entries: 8, fiducialRealisations: 100 });
    expect(results.rules.statuses).toHaveLength(5);
  });

  it('leave a parameter out of the matrices where nothing responds to it, and say so', () => {
    const results = forecastOf(withDerivatives(plain, (all) => ({ ...all, p1: insensitive })));
    expect(results.combinations.joint!.parameters).toEqual(['p0', 'p2']);
    expect(results.combinations.joint!.fisher.raw).toHaveLength(2);
    expect(results.combinations.joint!.errors.p1!.marginalised).toMatchObject({
      raw: null,
      status: 'undetermined',
      why: 'Nothing here responds to this parameter, and it has no prior.',
    });
    expect(results.checks.find(({ id }) => id === 'silent-parameters-joint')).toBeDefined();
  });

  it('say what cannot be assessed, for derivatives and covariances without realisations', () => {
    const { combinations, claims } = forecastOf({ ...moments(null, false), claims: [gainClaim('p0', 'joint', 'base', 1)] });
    expect(combinations.joint!.errors.p0!.fixed).toMatchObject({ corrected: null, status: 'not assessable' });
    expect(combinations.joint!.errors.p0!.fixed.raw).toBeGreaterThan(0);
    expect(combinations.joint!.notAssessable).toEqual([
      'Suite box: the noise of the covariance, which was given without a number of realisations.',
      ...range(3).map((a) => `Run run: the noise of the derivative by p${String(a)}, which was given as a mean without realisations.`),
    ]);
    expect(claims[0]!.verdict).toBe('not assessable');
  });

  it('of moments with exact derivatives have the errors of the closed form', () => {
    const known = forecastOf(moments(null, true)).combinations.joint!.errors.p0!.fixed;
    const information = range(8).reduce((sum, i) => sum + cosine(i, 0) ** 2, 0);
    expect(known).toMatchObject({ raw: expect.closeTo(1 / Math.sqrt(information), 12) as number, status: 'settled', standardError: 0, parts: { derivatives: 0, covariance: 0 } });
    const estimated = forecastOf(moments(50, true)).combinations.joint!.errors.p0!.fixed;
    expect(estimated.raw).toBeCloseTo(1 / Math.sqrt((information * 40) / 49), 12);
    expect(estimated.parts.covariance).toBeGreaterThan(0.1);
  });

  it('have a gain of exactly one of a combination over its double', () => {
    const twice = forecastOf({ ...plain, combinations: [combination('base', ['base', 'added']), combination('joint', ['base', 'added'])] });
    expect(twice.improvements.joint!.p0!.marginalised).toMatchObject({ raw: 1, corrected: 1, standardError: 0, sham: 1 });
  });
});

describe('results of odd studies', () => {
  it('leave out a parameter whose realisations are all zero, as they do where exact ones are', () => {
    const zeroed = (name: string): EnsembleDerivative =>
      name === 'p1' ? { kind: 'per realisation', realisations: realisations(new Float64Array(8 * 30), 8) } : { kind: 'exact', values: Float64Array.from(range(8), (i) => cosine(i, 0)) };
    const results = forecastOf(withDerivatives(plain, (all) => ({ ...all, p1: zeroed('p1') })));
    expect(results.combinations.joint!.parameters).toEqual(['p0', 'p2']);
    expect(results.combinations.joint!.errors.p0!.marginalised.corrected).not.toBeNull();
  });

  it('have no negative factor on a variance where parameters outnumber entries', () => {
    const few = memoryStudy({
      parameters: range(10).map((a) => parameter(`p${String(a)}`, { prior: 1 })),
      combinations: [combination('base', ['base'])],
      runs: [
        ensembleRun('run', columnsOf('base', 1), realisations(normalRows(7, 1, 1), 1), Object.fromEntries(range(10).map((a) => [`p${String(a)}`, { kind: 'exact', values: Float64Array.from([1]) }]))),
      ],
    });
    const { factors } = forecastOf(few).combinations.base!.suites[0]!;
    if (factors !== null) expect(Math.min(factors.dodelsonSchneider, factors.percival2014)).toBeGreaterThan(0);
  });

  it('hold finite correlations where responses are 1e100', () => {
    expectValid(forecastOf(scaled(plain, 1, 1e100)));
  });

  it('refuse a run of one realisation, used or not', () => {
    const lonely = ensembleRun('lonely', columnsOf('lonely', 2), realisations(normalRows(1, 2, 1), 2), { p0: insensitive, p1: insensitive, p2: insensitive }, 'far');
    expect(() => forecastOf({ ...plain, runs: [...plain.runs, lonely] })).toThrow('too few fiducial realisations');
  });
});
