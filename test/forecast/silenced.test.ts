import { describe, expect, it } from 'vitest';
import { partFisher, whitenedDerivatives } from '../../src/forecast/fisher.js';
import { silenced } from '../../src/forecast/silenced.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { realisations } from '../fixtures/memory-study.js';
import { allRows, changedStudy, cosine, distance, partsOf } from './seeded-study.js';

const model = { entries: [4, 3], parameters: 2, fiducials: 60, derivatives: 20, derivativeNoise: 0.5, response: cosine, rho: 0.4, commonNoise: 0.3 } as const;
const study = gaussianStudy(model, 1);
const part = partsOf(study, 'joint')[0]!;

describe('a part whose added entries are silenced', () => {
  it('is that of a study with those derivatives at zero', () => {
    const zeroed = changedStudy(study, { derivative: (rows) => realisations(allRows(rows).map((value, k) => (k % 7 < 4 ? value : 0)), 7) });
    const found = partFisher(silenced(part)).at(-1)!;
    const expected = partFisher(partsOf(zeroed, 'joint')[0]!).at(-1)!;
    expect(distance(found.raw.data, expected.raw.data)).toBeLessThan(1e-12);
    expect(distance(found.corrected.data, expected.corrected.data)).toBeLessThan(1e-12);
    expect(distance(found.without, expected.without)).toBeLessThan(1e-12);
  });

  it('changes nothing where nothing is added, and leaves the part as it was', () => {
    const before = Float64Array.from(whitenedDerivatives(part));
    const base = partsOf(study, 'base')[0]!;
    expect(distance(whitenedDerivatives(silenced(base)), whitenedDerivatives(base))).toBeLessThan(1e-14);
    silenced(part);
    expect(whitenedDerivatives(part)).toEqual(before);
  });

  it('twice is the same as once', () => {
    expect(distance(whitenedDerivatives(silenced(silenced(part))), whitenedDerivatives(silenced(part)))).toBeLessThan(1e-14);
  });
});
