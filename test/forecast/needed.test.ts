import { describe, expect, it } from 'vitest';
import { whole } from '../../src/forecast/combined.js';
import { realisationsNeeded } from '../../src/forecast/needed.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { combinedOf, cosine, forecastOf, normalRows, range } from './seeded-study.js';

/** Two parameters that respond nearly alike, under noise that hides what tells them apart. */
const model: GaussianModel = {
  entries: [6, 6],
  parameters: 2,
  fiducials: 400,
  derivatives: 20,
  derivativeNoise: 1,
  response: (entry, a) => cosine(entry, 0) + (a === 1 ? 0.12 * Math.sin(entry + 1) : 0),
  rho: 0,
  commonNoise: 0,
};

const isUndetermined = (of: GaussianModel, seed: number): boolean => whole(combinedOf(gaussianStudy(of, seed), 'joint')).corrected!.inversion.kind !== 'inverse';

describe('the realisations that an undetermined matrix needs', () => {
  const undetermined = range(60, 1).filter((seed) => isUndetermined(model, seed));

  it('are asked for here: a good share of the studies is undetermined', () => {
    expect(undetermined.length).toBeGreaterThan(10);
    expect(undetermined.length).toBeLessThan(60);
  });

  it('are more than there are, or cannot be said', () => {
    for (const seed of undetermined) {
      const needed = realisationsNeeded(combinedOf(gaussianStudy(model, seed), 'joint'));
      if (needed !== null) expect(needed).toBeGreaterThanOrEqual(21);
    }
  });

  it('are null for a study that is determined', () => {
    const determined = range(60, 1).find((seed) => !undetermined.includes(seed))!;
    expect(realisationsNeeded(combinedOf(gaussianStudy(model, determined), 'joint'))).toBeNull();
  });

  it('make a new study of that size determined more often than one of the size it had', () => {
    const asked = undetermined.flatMap((seed) => {
      const needed = realisationsNeeded(combinedOf(gaussianStudy(model, seed), 'joint'));
      return needed === null ? [] : [{ seed, needed: Math.min(needed, 400) }];
    });
    expect(asked.length).toBeGreaterThan(5);
    const stillUndetermined = asked.filter(({ seed, needed }) => isUndetermined({ ...model, derivatives: needed }, 10_000 + seed)).length;
    const before = undetermined.length / 60;
    // At most the share of new studies of the old size, less what chance allows (one standard deviation would be 0.1 of it).
    expect(stillUndetermined / asked.length).toBeLessThan(before);
  });

  it('are 2 SE N/(lambda + 1.645 SE) for one entry and one parameter, by hand', () => {
    // All in units of the raw matrix, the square of the mean: h and S cancel.
    const rows = [1.1, -0.9, 1.3, -1.2, 0.8, -0.7, 0.9, 0.4];
    const pairs = (of: readonly number[]): number => {
      const sum = of.reduce((total, value) => total + value, 0);
      return (sum ** 2 - of.reduce((total, value) => total + value ** 2, 0)) / (of.length * (of.length - 1));
    };
    const raw = (rows.reduce((total, value) => total + value, 0) / 8) ** 2;
    const lambda = pairs(rows) / raw;
    expect(lambda).toBeLessThan(0);
    const error = Math.sqrt(rows.reduce((sum, _, s) => sum + (7 / 8) * (pairs(rows.filter((_unused, i) => i !== s)) / raw - lambda) ** 2, 0));
    const expected = Math.ceil((2 * error * 8) / (lambda + 1.6448536269514727 * error));
    const study = memoryStudy({
      parameters: [parameter('p0')],
      combinations: [combination('joint', ['base'])],
      runs: [ensembleRun('run', columnsOf('base', 1), realisations(normalRows(40, 1, 1), 1), { p0: { kind: 'per realisation', realisations: realisations(Float64Array.from(rows), 1) } })],
    });
    expect(expected).toBeGreaterThan(8);
    expect(realisationsNeeded(combinedOf(study, 'joint'))).toBe(expected);
  });

  it('do not depend on the unit of a parameter', () => {
    const seed = undetermined.find((one) => realisationsNeeded(combinedOf(gaussianStudy(model, one), 'joint')) !== null)!;
    const study = gaussianStudy(model, seed);
    const run = study.runs[0]!;
    if (run.data.kind === 'moments') throw new Error('the study has realisations');
    const one = run.data.derivatives.p1!;
    if (one.kind !== 'per realisation') throw new Error('the study has one derivative a realisation');
    const { rows } = one.realisations;
    const scaled = { ...rows, read: (start: number, count: number) => rows.read(start, count).map((value) => 1e6 * value) };
    const derivatives = { ...run.data.derivatives, p1: { ...one, realisations: { ...one.realisations, rows: scaled } } };
    const changed = { ...study, runs: [{ ...run, data: { ...run.data, derivatives } }] };
    expect(realisationsNeeded(combinedOf(changed, 'joint'))).toBe(realisationsNeeded(combinedOf(study, 'joint')));
  });

  it('stand in the sentence of the status, and beside it', () => {
    for (const seed of undetermined.slice(0, 5)) {
      const { marginalised } = forecastOf(gaussianStudy(model, seed)).combinations.joint!.errors.p0!;
      const { derivativeRealisationsNeeded: needed } = marginalised;
      expect(marginalised.status).toBe('undetermined');
      expect(marginalised.why).toBe(
        `Too few derivative realisations to tell: with their noise removed the Fisher matrix is not positive definite; ${needed === null ? 'how many more cannot be said' : `at least ${String(needed)} are needed`}.`,
      );
    }
  });

  it('are not asked for where priors determine the matrix', () => {
    const study = { ...gaussianStudy(model, undetermined[0]!), parameters: [parameter('p0', { prior: 0.1 }), parameter('p1', { prior: 0.1 })] };
    const combined = combinedOf(study, 'joint');
    expect(whole(combined).corrected!.inversion.kind).toBe('inverse');
    expect(realisationsNeeded(combined)).toBeNull();
  });
});
