import { describe, expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { minimalStudy, writeStudy } from '../fixtures/study-folder.js';

describe('loading a study', () => {
  it('reads the minimal study', async () => {
    const study = await loadStudy(writeStudy(minimalStudy()));
    expect(study.parameters.map(({ name }) => name)).toEqual(['omega_m', 'sigma_8', 'shear_bias']);
    expect(study.runs.map(({ name }) => name)).toEqual(['peaks', 'power']);
    expect(study.inputs).toHaveLength(18);
  });
});
