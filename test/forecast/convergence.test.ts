import { describe, expect, it } from 'vitest';
import { convergenceOf } from '../../src/forecast/convergence.js';
import type { EnsembleDerivative, Study } from '../../src/study/study.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { changedStudy, combinedOf, cosine, deviationOf, forecastOf, meanOf, picked, range } from './seeded-study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';

const model: GaussianModel = {
  entries: [4, 4],
  parameters: 2,
  fiducials: 150,
  derivatives: 64,
  derivativeNoise: 0.6,
  response: cosine,
  rho: 0.2,
  commonNoise: 0.3,
};

describe('convergence', () => {
  it('has blocks of an eighth, a quarter, a half and all of the realisations; the last is the whole', () => {
    const combined = combinedOf(gaussianStudy(model, 1), 'joint');
    const convergence = convergenceOf(combined)!;
    expect(convergence.realisations).toEqual([8, 16, 32, 64]);
    expect(convergence.levels.map((blocks) => blocks.length)).toEqual([8, 4, 2, 1]);
    const [all] = convergence.levels[3]!;
    const whole = combined.cuts.at(-1)!;
    all!.raw.forEach((log, q) => {
      expect(log).toBeCloseTo(whole.raw.logs[q]!, 12);
    });
    all!.corrected.forEach((log, q) => {
      expect(log).toBeCloseTo(whole.corrected!.logs[q]!, 12);
    });
  });

  it('has the errors of a study that has only the block', () => {
    const study = gaussianStudy(model, 2);
    const convergence = convergenceOf(combinedOf(study, 'joint'))!;
    const alone = combinedOf(changedStudy(study, { derivative: (rows) => picked(rows, range(16).map((k) => 4 * k + 1)) }), 'joint').cuts.at(-1)!;
    const block = convergence.levels[1]![1]!;
    block.raw.forEach((log, q) => {
      expect(log).toBeCloseTo(alone.raw.logs[q]!, 12);
    });
    block.corrected.forEach((log, q) => {
      if (log === null) expect(alone.corrected!.logs[q]).toBeNull();
      else expect(log).toBeCloseTo(alone.corrected!.logs[q]!, 12);
    });
  });

  it('of a fixed error has a limit that is the corrected value in the mean', () => {
    const studies = 200;
    const differences = range(studies).map((k) => {
      const combined = combinedOf(gaussianStudy({ ...model, derivatives: 32 }, 100 + k), 'joint');
      const { fits } = convergenceOf(combined)!;
      return Math.exp(-2 * fits[1]!.logLimit) - Math.exp(-2 * combined.cuts.at(-1)!.corrected!.logs[1]!);
    });
    // Both estimate 1/sigma^2 without bias for the same covariance. Four standard errors of the mean.
    expect(Math.abs(meanOf(differences))).toBeLessThan((4 * deviationOf(differences)) / Math.sqrt(studies));
  });

  it('has exactly the law (1 + b/N)/limit^2 where blocks are copies of one another but for their number', () => {
    // Rows +-1 around the response in turn: each block of even size has the mean exactly, no noise in the mean, b = 0.
    const rows = realisations(Float64Array.from(range(64), (k) => 2 + (Math.floor(k / 8) % 2 === 0 ? 1 : -1)), 1);
    const study = memoryStudy({
      parameters: [parameter('p0')],
      combinations: [combination('joint', ['base'])],
      runs: [ensembleRun('run', columnsOf('base', 1), realisations(Float64Array.from(range(20)), 1), { p0: { kind: 'per realisation', realisations: rows } })],
    });
    const combined = combinedOf(study, 'joint');
    const [fit] = convergenceOf(combined)!.fits;
    expect(fit!.b).toBeCloseTo(0, 12);
    expect(fit!.logLimit).toBeCloseTo(combined.cuts.at(-1)!.raw.logs[0]!, 12);
  });

  it('has no fit from fewer than three sizes, and leaves out sizes with fewer than two realisations a block', () => {
    const sizes = (derivatives: number) => {
      const { realisations: counts, fits } = convergenceOf(combinedOf(gaussianStudy({ ...model, derivatives }, 3), 'joint'))!;
      return [counts, fits[0] === null];
    };
    expect(sizes(3)).toEqual([[3], true]);
    expect(sizes(4)).toEqual([[2, 4], true]);
    expect(sizes(7)).toEqual([[3.5, 7], true]);
    expect(sizes(8)).toEqual([[2, 4, 8], false]);
    expect(sizes(15)).toEqual([[3.75, 7.5, 15], false]);
    expect(sizes(16)).toEqual([[2, 4, 8, 16], false]);
  });

  it('is none without noise, and none for moments without realisations', () => {
    const exact: EnsembleDerivative = { kind: 'exact', values: Float64Array.from([1, 2]) };
    const fiducial = realisations(Float64Array.from(range(40), (k) => Math.sin(k * k)), 2);
    const base = { parameters: [parameter('p0')], combinations: [combination('joint', ['base'])] };
    const noiseless: Study = memoryStudy({ ...base, runs: [ensembleRun('run', columnsOf('base', 2), fiducial, { p0: exact })] });
    expect(convergenceOf(combinedOf(noiseless, 'joint'))).toBeNull();
    const identity = { data: Float64Array.from([1, 0, 0, 1]), rows: 2, columns: 2 };
    const moments = momentsRun('run', columnsOf('base', 2), {
      covariance: identity,
      realisations: 50,
      derivatives: { p0: { kind: 'mean', mean: Float64Array.from([1, 2]), realisations: 20, noise: null } },
    });
    expect(convergenceOf(combinedOf(memoryStudy({ ...base, runs: [moments] }), 'joint'))).toBeNull();
  });

  it('in the results gives the mean and scatter of the blocks, and counts those that have a value', () => {
    const study = gaussianStudy({ ...model, derivativeNoise: 1.2, derivatives: 24 }, 5);
    const { marginalised } = forecastOf(study).convergence.joint!.errors.p0!;
    const levels = convergenceOf(combinedOf(study, 'joint'))!.levels;
    levels.forEach((blocks, k) => {
      const raw = blocks.map((block) => Math.exp(block.raw[0]!));
      expect(marginalised.raw[k]).toBeCloseTo(meanOf(raw), 12);
      if (blocks.length > 1) expect(marginalised.rawScatter[k]).toBeCloseTo(deviationOf(raw), 12);
      else expect(marginalised.rawScatter[k]).toBeNull();
      const determined = blocks.filter((block) => block.corrected[0] !== null).length;
      expect(marginalised.determined[k]).toBe(determined);
      expect(marginalised.corrected[k] === null).toBe(determined < blocks.length);
    });
    // Three realisations of such noise leave some blocks without a value: the case is there.
    expect(marginalised.determined[0]).toBeLessThan(8);
  });

  it('has a limit where one parameter was simulated at every second seed', () => {
    const seeded = changedStudy(gaussianStudy(model, 6), { derivative: (rows) => ({ ...rows, seeds: range(64) }) });
    const study = changedStudy(seeded, { derivative: (rows, name) => (name === 'p1' ? picked(rows, range(32).map((k) => 2 * k)) : rows) });
    const convergence = convergenceOf(combinedOf(study, 'joint'))!;
    expect(convergence.realisations).toEqual([4, 8, 16, 32]);
    expect(convergence.fits[0]).not.toBeNull();
  });
});
