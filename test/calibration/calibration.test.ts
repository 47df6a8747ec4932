import { describe, expect, it } from 'vitest';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import type { Trial } from './trials.js';
import { binomialBounds, covers, falselySupported, reliable, runTrials, within } from './trials.js';

// Every study is seeded and made from a linear Gaussian (or lognormal) model whose errors are known in closed form.
// Bounds are those of the binomial law around the ranges of the contract (methods, section 4), not what came out.

const smooth = (entry: number, parameter: number): number =>
  0.5 * Math.cos((entry + 1) * (0.3 + 0.45 * parameter)) + (parameter === 1 ? 0.15 : 0);

const regular: GaussianModel = {
  entries: [10, 13],
  parameters: 3,
  fiducials: 1000,
  derivatives: 250,
  derivativeNoise: 0.6,
  response: smooth,
  rho: 0.3,
  commonNoise: 0.3,
};

const studies = 240;

function expectCoverage(trials: readonly Trial[], pick: 'error' | 'gain', low: number, high: number): void {
  const truth = (trial: Trial): number => (pick === 'error' ? trial.trueError : trial.trueGain);
  const covered = trials.filter((trial) => covers(trial[pick], truth(trial))).length;
  const [least, most] = binomialBounds(trials.length, low, high);
  expect(covered).toBeGreaterThanOrEqual(least);
  expect(covered).toBeLessThanOrEqual(most);
}

describe('well-determined studies', () => {
  const trials = runTrials(regular, studies, 10_000);

  it('are well determined: nearly all are settled or correctable', () => {
    expect(trials.filter(({ error }) => reliable(error)).length).toBeGreaterThan(0.9 * studies);
  });

  it('have 68.3 % intervals of sigma that cover the truth 63 to 80 % of the time', () => {
    expectCoverage(trials.filter(({ error }) => reliable(error)), 'error', 0.63, 0.8);
  });

  it('have 68.3 % intervals of the gain that cover the truth 63 to 80 % of the time', () => {
    expectCoverage(trials.filter(({ gain }) => reliable(gain)), 'gain', 0.63, 0.8);
  });

  it('support a false claim at most 5 % of the time', () => {
    expect(trials.filter(falselySupported).length).toBeLessThanOrEqual(binomialBounds(studies, 0, 0.05)[1]);
  });

  it('lie within the tolerance of the truth at least 93 % of the time where called settled or correctable', () => {
    for (const pick of ['error', 'gain'] as const) {
      const called = trials.filter((trial) => reliable(trial[pick]));
      const right = called.filter((trial) => within(trial[pick], pick === 'error' ? trial.trueError : trial.trueGain, 0.1));
      expect(right.length).toBeGreaterThanOrEqual(binomialBounds(called.length, 0.93, 0.93)[0]);
    }
  });
});

describe('studies with noisy derivatives', () => {
  const trials = runTrials({ ...regular, entries: [10, 20], fiducials: 400, derivatives: 60, derivativeNoise: 1.2 }, studies, 20_000);

  it('have intervals that cover at least 63 % of the time', () => {
    expectCoverage(trials, 'error', 0.63, 1);
    expectCoverage(trials, 'gain', 0.63, 1);
  });

  it('support a false claim at most 5 % of the time', () => {
    expect(trials.filter(falselySupported).length).toBeLessThanOrEqual(binomialBounds(studies, 0, 0.05)[1]);
  });
});

describe('an added probe without information', () => {
  const base = 10;
  // Strong responses in the baseline, none in the added probe, and noise that is not correlated between entries: the true gain is 1.
  const silent: GaussianModel = {
    ...regular,
    entries: [base, 20],
    fiducials: 500,
    derivatives: 100,
    derivativeNoise: 1,
    rho: 0,
    response: (entry, parameter) => (entry < base ? 2 * smooth(entry, parameter) : 0),
  };
  const trials = runTrials(silent, studies, 30_000);

  it('has a true gain of 1, and a raw gain above it in nearly every study: the noise flatters', () => {
    expect(trials[0]!.trueGain).toBeCloseTo(1, 12);
    const flattered = trials.filter(({ gain }) => gain.raw !== null && gain.raw > 1).length;
    expect(flattered).toBeGreaterThan(0.8 * studies);
  });

  it('has a median corrected gain of 1: as many studies above as below', () => {
    const above = trials.filter(({ gain }) => gain.corrected !== null && gain.corrected > 1).length;
    const [least, most] = binomialBounds(studies, 0.5, 0.5);
    expect(above).toBeGreaterThanOrEqual(least);
    expect(above).toBeLessThanOrEqual(most);
  });

  it('is claimed to improve at most 5 % of the time', () => {
    expect(trials.filter(falselySupported).length).toBeLessThanOrEqual(binomialBounds(studies, 0, 0.05)[1]);
  });

  it('has intervals that cover at least 63 % of the time', () => {
    expectCoverage(trials, 'gain', 0.63, 1);
  });

  it('has a sham gain that tells the raw one: their medians agree', () => {
    const median = (values: readonly number[]): number => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]!;
    const raw = median(trials.map(({ gain }) => gain.raw!));
    const sham = median(trials.map(({ gain }) => gain.sham!));
    // Both are medians of the same law of raw gains; each has an error of about 1.25 standard deviations over root 240.
    const spread = median(trials.map(({ gain }) => (gain.shamInterval![1] - gain.shamInterval![0]) / 2));
    expect(Math.abs(raw - sham)).toBeLessThan((3.09 * 1.25 * spread * Math.SQRT2) / Math.sqrt(studies));
  });
});

describe('lognormal data', () => {
  const trials = runTrials({ ...regular, lognormal: 0.4, rho: 0 }, studies, 40_000);

  it('have intervals that cover the truth 63 to 80 % of the time where reliable, and at least 63 % in all', () => {
    expectCoverage(trials.filter(({ error }) => reliable(error)), 'error', 0.63, 0.8);
    expectCoverage(trials, 'error', 0.63, 1);
    expectCoverage(trials, 'gain', 0.63, 1);
  });
});
