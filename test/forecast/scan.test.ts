import { describe, expect, it } from 'vitest';
import type { Results } from '../../src/results/schema.js';
import type { Scan, Study } from '../../src/study/study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { columnsOf, combination, parameter } from '../fixtures/memory-study.js';
import { cosine, forecastOf } from './seeded-study.js';

const base = gaussianStudy(
  { entries: [6, 5], parameters: 2, fiducials: 200, derivatives: 80, derivativeNoise: 0.4, response: cosine, rho: 0.3, commonNoise: 0.2 },
  3,
);
const withScan = (scan: Scan): Study => ({ ...base, scan });

/** A study with the entries of one cut alone. */
function cutStudy(range: { readonly min: number | null; readonly max: number | null }): Results {
  const keep = ['base', 'added'].map((probe) => ({ probe, ranges: [{ coordinate: 'x', ...range }], blocks: null }));
  return forecastOf({
    ...base,
    scan: null,
    combinations: base.combinations.map((one) => ({ ...one, keep: keep.filter(({ probe }) => one.probes.includes(probe)) })),
  });
}

/** Both without a value, or equal to the rounding of another order of the same sums. */
function expectSame(found: number | null, expected: number | null): void {
  if (found === null || expected === null) expect(found).toBe(expected);
  else expect(found / expected).toBeCloseTo(1, 9);
}

describe('a scan', () => {
  const cases: readonly (readonly ['below' | 'above', readonly number[]])[] = [
    ['below', [2, 3, 5, 6]],
    ['above', [1, 3, 5]],
  ];

  it.each(cases)('has the errors and gains of studies with the entries of each cut alone: %s', (keep, at) => {
    const { scan } = forecastOf(withScan({ coordinate: 'x', keep, at }));
    at.forEach((value, k) => {
      const alone = cutStudy(keep === 'below' ? { min: null, max: value } : { min: value, max: null });
      for (const name of ['base', 'joint']) {
        const found = scan[name]!;
        expect(found.at).toEqual(at);
        expect(found.entries[k]).toBe(alone.combinations[name]!.entries);
        for (const kind of ['marginalised', 'fixed'] as const) {
          for (const which of ['raw', 'corrected', 'relativeStandardError'] as const) {
            expectSame(found.errors.p1![kind][which][k]!, alone.combinations[name]!.errors.p1![kind][which]);
          }
        }
      }
      const improvement = alone.improvements.joint!.p0!.marginalised;
      const found = scan.joint!.improvements!.p0!.marginalised;
      expectSame(found.corrected[k]!, improvement.corrected);
      expectSame(found.relativeStandardError[k]!, improvement.relativeStandardError);
    });
    expect(scan.base!.improvements).toBeNull();
  });

  it('is undetermined where a cut has fewer entries than parameters, or none', () => {
    const { scan } = forecastOf(withScan({ coordinate: 'x', keep: 'below', at: [0, 1, 6] }));
    const { marginalised, fixed } = scan.base!.errors.p0!;
    expect(scan.base!.entries).toEqual([0, 1, 6]);
    expect(marginalised.status.slice(0, 2)).toEqual(['undetermined', 'undetermined']);
    expect(marginalised.corrected.slice(0, 2)).toEqual([null, null]);
    expect(fixed.status[0]).toBe('undetermined');
    expect(fixed.corrected[1]).toBeGreaterThan(0);
    expect(marginalised.corrected[2]).toBeGreaterThan(0);
  });

  it('rests on priors alone where a cut leaves nothing', () => {
    const parameters = ['p0', 'p1'].map((name) => parameter(name, { prior: 0.5 }));
    const { scan } = forecastOf({ ...withScan({ coordinate: 'x', keep: 'below', at: [0, 6] }), parameters });
    expect(scan.joint!.errors.p0!.marginalised.corrected[0]).toBeCloseTo(0.5, 14);
    expect(scan.joint!.errors.p0!.marginalised.relativeStandardError[0]).toBe(0);
    expect(scan.joint!.improvements!.p0!.marginalised.corrected[0]).toBe(1);
  });

  it('leaves out a combination without entries along its coordinate', () => {
    const study = {
      ...base,
      runs: [{ ...base.runs[0]!, columns: [...columnsOf('base', 6), ...columnsOf('added', 5).map((column) => ({ ...column, coordinate: null }))] }],
      combinations: [...base.combinations, combination('alone', ['added'])],
      scan: { coordinate: 'x', keep: 'below', at: [2, 4] } as const,
    };
    const { scan } = forecastOf(study);
    expect(Object.keys(scan)).toEqual(['base', 'joint']);
    expect(scan.joint!.entries).toEqual([7, 9]);
  });

  it('ends in the errors of the whole where the last cut keeps everything', () => {
    const results = forecastOf(withScan({ coordinate: 'x', keep: 'below', at: [3, 6] }));
    expect(results.scan.joint!.errors.p0!.marginalised.corrected[1]).toBe(results.combinations.joint!.errors.p0!.marginalised.corrected);
  });
});
