import { describe, expect, it } from 'vitest';
import { quantile, shamDraws, shamGains } from '../../src/forecast/sham.js';
import type { EnsembleDerivative, Study } from '../../src/study/study.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { combination, parameter } from '../fixtures/memory-study.js';
import { combinedOf, cosine, deviationOf, forecastOf, range } from './seeded-study.js';

const model: GaussianModel = {
  entries: [5, 6],
  parameters: 2,
  fiducials: 120,
  derivatives: 40,
  derivativeNoise: 0.8,
  response: cosine,
  rho: 0.3,
  commonNoise: 0.3,
};

function withDerivatives(study: Study, derivatives: Readonly<Record<string, EnsembleDerivative>>): Study {
  const run = study.runs[0]!;
  return { ...study, runs: [{ ...run, data: { ...run.data, derivatives } as typeof run.data }] };
}

describe('the sham gain', () => {
  it('is exactly 1 where derivatives are exact', () => {
    const exact = withDerivatives(
      gaussianStudy(model, 1),
      Object.fromEntries(range(2).map((a) => [`p${String(a)}`, { kind: 'exact', values: Float64Array.from({ length: 11 }, (_, i) => cosine(i, a)) }])),
    );
    for (const sham of shamGains(combinedOf(exact, 'joint'), 'seed')) expect(sham).toEqual({ median: 1, low: 1, high: 1 });
  });

  it('is exactly 1 where nothing is added to the baseline', () => {
    const study = { ...gaussianStudy(model, 2), combinations: [combination('base', ['base', 'added']), combination('joint', ['base'])] };
    for (const sham of shamGains(combinedOf(study, 'joint'), 'seed')) expect(sham).toEqual({ median: 1, low: 1, high: 1 });
  });

  it('is above 1 at the median where derivatives are noisy, and in order', () => {
    for (const sham of shamGains(combinedOf(gaussianStudy(model, 3), 'joint'), 'seed')) {
      expect(sham!.median).toBeGreaterThan(1);
      expect(sham!.low).toBeLessThan(sham!.median);
      expect(sham!.high).toBeGreaterThan(sham!.median);
    }
  });

  it('does not exist for a combination that shares nothing with the baseline, and the results say why', () => {
    const study = { ...gaussianStudy(model, 4), combinations: [combination('base', ['base']), combination('joint', ['added'])] };
    expect(shamGains(combinedOf(study, 'joint'), 'seed')).toEqual([null, null, null, null]);
    expect(forecastOf(study).improvements.joint!.p0!.marginalised).toMatchObject({
      sham: null,
      shamInterval: null,
      shamWhy: 'Without the added entries there is no error to compare with: the combination rests on them alone.',
    });
  });

  it('exists for it where priors hold every parameter', () => {
    const study = {
      ...gaussianStudy(model, 5),
      parameters: range(2).map((a) => parameter(`p${String(a)}`, { prior: 1 })),
      combinations: [combination('base', ['base']), combination('joint', ['added'])],
    };
    for (const sham of shamGains(combinedOf(study, 'joint'), 'seed')) expect(sham!.median).toBeGreaterThan(1);
  });

  it('is the same from the same seed and differs little from another', () => {
    const combined = combinedOf(gaussianStudy(model, 6), 'joint');
    const [first] = shamGains(combined, 'one');
    expect(shamGains(combined, 'one')[0]).toEqual(first);
    const [second] = shamGains(combined, 'two');
    expect(second).not.toEqual(first);
    // Medians of 100 draws: 1.25 standard deviations over 10 each; four errors of their difference.
    const spread = (first!.high - first!.low) / 2;
    expect(Math.abs(second!.median - first!.median)).toBeLessThan((4 * Math.SQRT2 * 1.25 * spread) / Math.sqrt(shamDraws));
  });

  it('is about the raw gain of a probe without information, noise correlated or not', () => {
    for (const rho of [0, 0.6]) {
      const silent: GaussianModel = { ...model, rho, response: (i, a) => (i < 5 ? 2 * cosine(i, a) : 0), derivatives: 30, derivativeNoise: 1, commonNoise: 0.5 };
      const studies = 120;
      const raw: number[] = [];
      const sham: number[] = [];
      for (let k = 0; k < studies; k += 1) {
        // Everything but the added noise is removed from the raw gain by the ratio to the one with zero responses.
        const study = gaussianStudy(silent, 900 + k);
        const zeroed = exactlySilent(study);
        const joint = combinedOf(study, 'joint');
        raw.push(combinedOf(zeroed, 'joint').cuts.at(-1)!.raw.logs[0]! - joint.cuts.at(-1)!.raw.logs[0]!);
        sham.push(Math.log(shamGains(joint, 'seed')[0]!.median));
      }
      const median = (values: readonly number[]): number => quantile([...values].sort((a, b) => a - b), 0.5);
      // The median of n draws has an error of 1.25 standard deviations over root n; 4 of them. Centring on the mean takes 1/N of the noise.
      const allowed = (4 * 1.25 * Math.hypot(deviationOf(raw), deviationOf(sham))) / Math.sqrt(studies);
      expect(Math.abs(median(raw) - median(sham))).toBeLessThan(allowed + median(sham) / 30);
      expect(median(sham)).toBeGreaterThan(0.02);
    }
  });

  /** The added entries' rows set to zero: what the raw gain of a null probe is counted from. */
  function exactlySilent(study: Study): Study {
    const { data } = study.runs[0]!;
    if (data.kind === 'moments') throw new Error('the study has realisations');
    return withDerivatives(
      study,
      Object.fromEntries(
        Object.entries(data.derivatives).map(([name, one]) => {
          if (one.kind !== 'per realisation') throw new Error('the study has one derivative a realisation');
          const values = one.realisations.rows.read(0, one.realisations.rows.rows).map((value, k) => (k % 11 < 5 ? value : 0));
          const rows = { rows: one.realisations.rows.rows, columns: 11, read: (start: number, count: number) => values.slice(start * 11, (start + count) * 11) };
          return [name, { ...one, realisations: { ...one.realisations, rows } }];
        }),
      ),
    );
  }
});

describe('a quantile', () => {
  it('lies on the values, and linearly between them', () => {
    expect([0, 0.25, 0.5, 0.75, 1].map((share) => quantile([1, 2, 4, 8, 16], share))).toEqual([1, 2, 4, 8, 16]);
    expect(quantile([1, 3], 0.16)).toBeCloseTo(1.32, 14);
    expect(quantile([7], 0.84)).toBe(7);
  });
});
