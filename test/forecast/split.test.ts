import { describe, expect, it } from 'vitest';
import { whole } from '../../src/forecast/combined.js';
import { splitLogs } from '../../src/forecast/split.js';
import type { Study } from '../../src/study/study.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { columnsOf, combination, ensembleRun, parameter, realisations } from '../fixtures/memory-study.js';
import { combinedOf, cosine, forecastOf, meanOf, normalRows, range } from './seeded-study.js';

const model: GaussianModel = {
  entries: [5, 5],
  parameters: 2,
  fiducials: 400,
  derivatives: 100,
  derivativeNoise: 0.3,
  response: cosine,
  rho: 0.2,
  commonNoise: 0.3,
};

describe('the split estimate', () => {
  it('is the raw value where no realisation differs from another', () => {
    const study = gaussianStudy({ ...model, derivativeNoise: 0 }, 1);
    const combined = combinedOf(study, 'joint');
    splitLogs(combined, 'seed').forEach((log, q) => {
      // F # F = F: square roots of matrices of condition 10 to 100.
      expect(log).toBeCloseTo(whole(combined).raw.logs[q]!, 10);
    });
  });

  it('of one entry and one parameter is the product of mean derivatives: by hand', () => {
    // One entry: F = E^2/G = d_B^2 h/S whatever the direction; its mean with the raw one is sqrt(mean(d_B^2)) |d| h/S, 1/sigma^2.
    const rows = realisations(Float64Array.from(range(10), (k) => (k < 5 ? 3 : 1)), 1);
    const study: Study = {
      ...gaussianStudy(model, 2),
      parameters: [parameter('p0')],
      combinations: [combination('joint', ['base'])],
      baseline: 'joint',
      runs: [ensembleRun('run', columnsOf('base', 1), realisations(normalRows(50, 1, 3), 1), { p0: { kind: 'per realisation', realisations: rows } })],
    };
    const combined = combinedOf(study, 'joint');
    const raw = whole(combined).fisher.raw.data[0]!;
    const split = Math.exp(-2 * splitLogs(combined, 'seed')[0]!);
    // (split/raw)^2 = mean over 20 splits of d_B^2/d^2, d = 2, three of ten rows in B: d_B in {1, 5/3, 7/3, 3}.
    const share = (split / raw) ** 2;
    expect(share).toBeGreaterThan(0.25);
    expect(share).toBeLessThan(2.25);
    // 20 (split/raw)^2 is a sum of 20 numbers (d_B/2)^2 = m^2/36 with m = 3, 5, 7 or 9.
    expect(20 * 36 * share).toBeCloseTo(Math.round(20 * 36 * share), 8);
    expect(Math.round(20 * 36 * share) % 8).toBe(20 % 8);
  });

  it('lies near the corrected value where noise is small, on the side of more than the raw one', () => {
    const studies = 40;
    const logs = range(studies).map((k) => {
      const combined = combinedOf(gaussianStudy(model, 50 + k), 'joint');
      const { raw, corrected } = whole(combined);
      return { split: splitLogs(combined, 'seed')[0]! - corrected!.logs[0]!, raw: raw.logs[0]! - corrected!.logs[0]! };
    });
    // The two biases of the raw value are about 1 % here; the split's is below that in size (methods, section 5).
    expect(Math.abs(meanOf(logs.map(({ split }) => split)))).toBeLessThan(0.03);
    expect(meanOf(logs.map(({ split, raw }) => split - raw))).toBeGreaterThan(0);
  });

  it('is the same from the same seed', () => {
    const combined = combinedOf(gaussianStudy(model, 4), 'joint');
    expect(splitLogs(combined, 'one')).toEqual(splitLogs(combined, 'one'));
    expect(splitLogs(combined, 'two')).not.toEqual(splitLogs(combined, 'one'));
  });

  it('leaves out a parameter that does not respond in one of two suites', () => {
    const study = gaussianStudy(model, 5);
    const second = ensembleRun('far', columnsOf('far', 3), realisations(normalRows(100, 3, 6), 3), {
      p0: { kind: 'per realisation', realisations: realisations(normalRows(50, 3, 7).map((value) => 1 + 0.2 * value), 3) },
      p1: { kind: 'insensitive' },
    }, 'other');
    const both = { ...study, runs: [...study.runs, second], combinations: [combination('joint', ['base', 'added', 'far'])], baseline: 'joint' };
    for (const log of splitLogs(combinedOf(both, 'joint'), 'seed')) expect(log).not.toBeNull();
  });
});

describe('statuses that hang on the split estimate', () => {
  const study = gaussianStudy({ ...model, fiducials: 2000, derivatives: 400 }, 8);
  const statusIn = (of: Study, name = 'joint') => forecastOf(of).combinations[name]!.errors.p0!.marginalised.status;

  it('are settled where all is well', () => {
    expect(statusIn(study)).toBe('settled');
  });

  it('stay settled beside a nuisance parameter that only its prior holds', () => {
    const run = study.runs[0]!;
    if (run.data.kind === 'moments') throw new Error('the study has realisations');
    const insensitive = { ...run, data: { ...run.data, derivatives: { ...run.data.derivatives, nu: { kind: 'insensitive' as const } } } };
    const parameters = [...study.parameters, parameter('nu', { role: 'nuisance', prior: 0.01 })];
    expect(statusIn({ ...study, parameters, runs: [insensitive] })).toBe('settled');
  });

  it('stay settled beside a second suite with fewer entries than parameters', () => {
    const rows = (seed: number) => realisations(normalRows(400, 1, seed).map((value) => 0.5 + 0.1 * value), 1);
    const second = ensembleRun('far', columnsOf('far', 1), realisations(normalRows(2000, 1, 9), 1), {
      p0: { kind: 'per realisation', realisations: rows(10) },
      p1: { kind: 'per realisation', realisations: rows(11) },
    }, 'other');
    const combinations = [...study.combinations, combination('all', ['base', 'added', 'far'])];
    expect(statusIn({ ...study, runs: [...study.runs, second], combinations }, 'all')).toBe('settled');
  });
});
