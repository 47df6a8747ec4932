import { describe, expect, it } from 'vitest';
import { budgetFor } from '../../src/forecast/budget.js';
import type { Standing } from '../../src/forecast/budget.js';
import { wishartDegrees } from '../../src/forecast/precision.js';
import type { Estimate } from '../../src/results/schema.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { runTrials } from './trials.js';

// The budget predicts from a quarter of the realisations what all of them reach; here all of them are drawn, and checked.

const model: GaussianModel = {
  entries: [8, 10],
  parameters: 2,
  fiducials: 800,
  derivatives: 240,
  derivativeNoise: 0.5,
  response: (entry, parameter) => 0.6 * Math.cos((entry + 1) * (0.35 + 0.5 * parameter)),
  rho: 0.2,
  commonNoise: 0.2,
};
const entries = 18;
const studies = 40;

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]!;
}

/** Median parts of the relative standard error of the joint error over seeded studies. */
function parts(changes: Partial<GaussianModel>, pick: (parts: Estimate['parts']) => number | null): number {
  return median(runTrials({ ...model, ...changes }, studies, 60_000).map(({ error }) => pick(error.parts)!));
}

function standing(derivatives: number, covariance: number, changes: Partial<GaussianModel>): Standing {
  const { fiducials, derivatives: count } = { ...model, ...changes };
  return {
    logRaw: 0,
    logCorrected: 0,
    varianceDerivatives: derivatives ** 2,
    varianceCovariance: covariance ** 2,
    derivativeRealisations: count,
    fiducials: { realisations: fiducials, degrees: wishartDegrees(fiducials, entries, 2) },
  };
}

describe('a budget made from a quarter of the realisations', () => {
  const quarter = { fiducials: model.fiducials / 4, derivatives: model.derivatives / 4 };
  const now = {
    derivatives: parts(quarter, ({ derivatives }) => derivatives),
    covariance: parts(quarter, ({ covariance }) => covariance),
  };

  it('of derivative realisations is met by all of them, to a fifth', () => {
    const reached = parts({ fiducials: quarter.fiducials }, ({ derivatives }) => derivatives);
    const { derivatives } = budgetFor(standing(now.derivatives, 0, quarter), reached);
    // A median of 40 standard errors is known to some per cent; the law asks for more rather than fewer where noise dominates.
    expect(derivatives! / model.derivatives).toBeGreaterThan(0.85);
    expect(derivatives! / model.derivatives).toBeLessThan(1.35);
  });

  it('of fiducial realisations is met by all of them, to a tenth', () => {
    const reached = parts({ derivatives: quarter.derivatives }, ({ covariance }) => covariance);
    const { fiducials } = budgetFor(standing(0, now.covariance, quarter), reached);
    expect(fiducials! / model.fiducials).toBeGreaterThan(0.9);
    expect(fiducials! / model.fiducials).toBeLessThan(1.1);
  });
});
