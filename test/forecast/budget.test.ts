import { describe, expect, it } from 'vitest';
import type { Standing } from '../../src/forecast/budget.js';
import { budgetFor, decidingError, rawBudget, settledError } from '../../src/forecast/budget.js';
import type { Results } from '../../src/results/schema.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { gainClaim } from '../fixtures/memory-study.js';
import { cosine, forecastOf } from './seeded-study.js';

const standing: Standing = {
  logRaw: 0,
  logCorrected: 0.2,
  varianceDerivatives: 0.04 ** 2,
  varianceCovariance: 0.03 ** 2,
  derivativeRealisations: 100,
  fiducials: { realisations: 210, degrees: 200 },
};

/** The standard error that the scaling laws give for some numbers of realisations. */
function predicted(of: Standing, derivatives: number, fiducials: number): number {
  const { realisations, degrees } = of.fiducials!;
  const nu = degrees + fiducials - realisations;
  return Math.sqrt((of.varianceDerivatives * of.derivativeRealisations!) / derivatives + (of.varianceCovariance * degrees) / nu);
}

describe('a budget', () => {
  it('reaches its goal by the laws it states, and one less does not', () => {
    const { derivatives, fiducials, both } = budgetFor(standing, 0.04);
    expect(predicted(standing, derivatives!, 210)).toBeLessThanOrEqual(0.04 * (1 + 1e-12));
    expect(predicted(standing, derivatives! - 1, 210)).toBeGreaterThan(0.04);
    expect(fiducials).toBeNull();
    expect(predicted(standing, both!.derivatives, both!.fiducials)).toBeLessThanOrEqual(0.04 * (1 + 1e-12));
    const other = budgetFor({ ...standing, varianceDerivatives: 0.03 ** 2, varianceCovariance: 0.04 ** 2 }, 0.04);
    expect(predicted({ ...standing, varianceDerivatives: 0.03 ** 2, varianceCovariance: 0.04 ** 2 }, 100, other.fiducials!)).toBeLessThanOrEqual(0.04 * (1 + 1e-12));
  });

  it('is what there is where the goal is reached', () => {
    expect(budgetFor(standing, 0.06)).toEqual({ derivatives: 100, fiducials: 210, both: { derivatives: 100, fiducials: 210 } });
  });

  it('is none of a kind where the other alone is beyond the goal, and both where each is', () => {
    expect(budgetFor(standing, 0.02)).toMatchObject({ derivatives: null, fiducials: null });
    const { both } = budgetFor(standing, 0.02);
    expect(predicted(standing, both!.derivatives, both!.fiducials)).toBeLessThanOrEqual(0.02 * (1 + 1e-12));
  });

  it('gives the derivatives what a small covariance part leaves of the goal, not just half', () => {
    const small: Standing = { ...standing, varianceCovariance: 0.001 ** 2 };
    expect(budgetFor(small, 0.03).both).toEqual({ derivatives: Math.ceil((100 * 0.0016) / (0.0009 - 1e-6)), fiducials: 210 });
  });

  it('asks for nothing where there is nothing of a kind', () => {
    const exact: Standing = { ...standing, varianceDerivatives: 0, derivativeRealisations: null };
    expect(budgetFor(exact, 0.02)).toMatchObject({ derivatives: null });
    expect(budgetFor(exact, 0.02).fiducials).toBe(210 + Math.ceil((200 * 9) / 4 - 200));
    const known: Standing = { ...standing, varianceCovariance: 0, fiducials: null };
    expect(budgetFor(known, 0.02)).toMatchObject({ derivatives: 400, fiducials: null });
  });

  it('of the raw value goes by its bias, which falls as 1/N', () => {
    expect(rawBudget(standing, 0.1)).toBe(Math.ceil((100 * 0.2) / Math.log(1.1)));
    expect(rawBudget({ ...standing, logRaw: 0.19 }, 0.1)).toBe(100);
    expect(rawBudget({ ...standing, logRaw: null }, 0.1)).toBeNull();
    expect(rawBudget({ ...standing, derivativeRealisations: null }, 0.1)).toBeNull();
  });

  it('has goals that statuses and verdicts use', () => {
    expect(1.959963984540054 * settledError(0.1)).toBeCloseTo(Math.log(1.1), 14);
    expect(decidingError(Math.log(2), Math.log(1.8))).toBeCloseTo(Math.log(2 / 1.8) / 1.6448536269514727, 14);
    expect(decidingError(1, 1)).toBe(0);
  });
});

describe('the budget in the results', () => {
  const model = { entries: [5, 5], parameters: 2, fiducials: 300, derivatives: 100, derivativeNoise: 0.6, response: cosine, rho: 0, commonNoise: 0 } as const;
  const rowsOf = (results: Results) => results.budget!;

  it('has a row for every target error and gain, then one a claim, and agrees with the status about the uncertainty', () => {
    const results = forecastOf(gaussianStudy({ ...model, claims: [gainClaim('p0', 'joint', 'base', 1.1)] }, 1));
    const rows = rowsOf(results);
    expect(rows.map(({ parameter, combination, against, claim }) => [parameter, combination, against, claim])).toEqual([
      ['p0', 'base', null, null],
      ['p1', 'base', null, null],
      ['p0', 'joint', null, null],
      ['p1', 'joint', null, null],
      ['p0', 'joint', 'base', null],
      ['p1', 'joint', 'base', null],
      ['p0', 'joint', 'base', 'p0-joint'],
    ]);
    for (const row of rows.slice(0, 4)) {
      const { status, relativeStandardError } = results.combinations[row.combination]!.errors[row.parameter]!.marginalised;
      expect(row.now).toBe(relativeStandardError);
      expect(row.goal).toBe(settledError(0.1));
      if (status === 'settled' || status === 'correctable') expect(row.reached).toBe(true);
      if (!row.reached) expect(status).toBe('unsettled');
    }
  });

  it('foretells the uncertainty of a study of that size', () => {
    // The rows of two studies differ, so that their own standard errors do too: by a tenth or so.
    const few = forecastOf(gaussianStudy({ ...model, fiducials: 2000, derivatives: 40 }, 2));
    const row = rowsOf(few).find(({ parameter, combination, against }) => parameter === 'p0' && combination === 'joint' && against === null)!;
    expect(row.reached).toBe(false);
    const more = forecastOf(gaussianStudy({ ...model, fiducials: 2000, derivatives: row.derivatives! }, 3));
    expect(more.combinations.joint!.errors.p0!.marginalised.relativeStandardError! / row.goal!).toBeLessThan(1.25);
    expect(more.combinations.joint!.errors.p0!.marginalised.relativeStandardError! / row.goal!).toBeGreaterThan(0.6);
  });
});
