import { describe, expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { changed, edited, minimalStudy, writeStudy } from '../fixtures/study-folder.js';
import { refusals } from './refusals.js';

const yaml = `format: 1
kind: moments
suite: box-b
vector:
  - {probe: power, block: monopole, coordinate: k, values: [0.1, 0.2]}
covariance: covariance.npy
realisations: 100
derivatives:
  omega_m: {mean: [1, 2], realisations: 50, noise: noise.npy}
  sigma_8: {mean: [3, 4]}
  shear_bias: {exact: [5, 6]}
`;
const matrix = (...values: number[]) => ({ shape: [2, 2], values });
const study = changed(minimalStudy(), { 'runs/power/run.yaml': yaml, 'runs/power/covariance.npy': matrix(2, 1, 1, 3), 'runs/power/noise.npy': matrix(1, 0, 0, 0) });
const run = (from: string, to: string) => edited(study, 'runs/power/run.yaml', from, to);
const covariance = (...values: number[]) => changed(study, { 'runs/power/covariance.npy': matrix(...values) });

describe('a run of moments', () => {
  it('has a covariance, the realisations behind it, and derivatives with their noise', async () => {
    const { runs } = await loadStudy(writeStudy(study));
    expect(runs[1]!.data).toEqual({
      kind: 'moments',
      covariance: { data: Float64Array.of(2, 1, 1, 3), rows: 2, columns: 2 },
      realisations: 100,
      derivatives: {
        omega_m: { kind: 'mean', mean: Float64Array.of(1, 2), realisations: 50, noise: { data: Float64Array.of(1, 0, 0, 0), rows: 2, columns: 2 } },
        sigma_8: { kind: 'mean', mean: Float64Array.of(3, 4), realisations: null, noise: null },
        shear_bias: { kind: 'exact', values: Float64Array.of(5, 6) },
      },
    });
  });

  it('takes the mean of the two halves of a covariance that differ by rounding', async () => {
    const { runs } = await loadStudy(writeStudy(covariance(2, 1, 1 + 2 ** -22, 3)));
    const { data } = runs[1]!;
    expect(data.kind === 'moments' ? Array.from(data.covariance.data) : null).toEqual([2, 1 + 2 ** -23, 1 + 2 ** -23, 3]);
  });
});

describe('moments that are refused', () => {
  it('a covariance that is not symmetric', async () => {
    expect(await refusals(covariance(2, 1, 1.1, 3))).toMatchInlineSnapshot(`
      "error: a covariance is not symmetric
        where     runs/power/run.yaml:6:1  covariance
        found     covariance.npy: 1.1 at [1, 0] and 1 at [0, 1] (counted from 0)
        expected  a matrix that equals its transpose, to within 1e-6 of the standard deviations
        do        check that the file holds a covariance; save (C + C.T) / 2 if only rounding differs more than this"
    `);
  });

  it('a variance that is 0', async () => {
    expect(await refusals(covariance(2, 0, 0, 0))).toMatchInlineSnapshot(`
      "error: a covariance has a variance that cannot be
        where     runs/power/run.yaml:6:1  covariance
        found     covariance.npy: 0 at [1, 1] (counted from 0)
        expected  every variance above 0
        do        check that the file holds a covariance; leave entries that never vary out of the vector"
    `);
  });

  it('noise with a variance below 0', async () => {
    expect(await refusals(changed(study, { 'runs/power/noise.npy': matrix(1, 0, 0, -1) }))).toMatchInlineSnapshot(`
      "error: a covariance has a variance that cannot be
        where     runs/power/run.yaml:9:45  derivatives.omega_m.noise
        found     noise.npy: -1 at [1, 1] (counted from 0)
        expected  no variance below 0
        do        check that the file holds a covariance; leave entries that never vary out of the vector"
    `);
  });

  it('a covariance of the wrong size', async () => {
    expect(await refusals(changed(study, { 'runs/power/covariance.npy': { shape: [3, 2], values: [1, 2, 3, 4, 5, 6] } }))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:1  covariance
        found     covariance.npy has the shape [3, 2]
        expected  [2, 2]
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('noise without the number of realisations', async () => {
    expect(await refusals(run('realisations: 50, noise', 'noise'))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     runs/power/run.yaml:9:3  derivatives.omega_m
        found     noise: without realisations:
        expected  both: the noise of the mean is that of one realisation over their number
        do        add realisations:, the number that the mean was taken over"
    `);
  });

  it('noise beside an exact derivative', async () => {
    expect(await refusals(run('{exact: [5, 6]}', '{exact: [5, 6], noise: noise.npy}'))).toMatchInlineSnapshot(`
      "error: a key means nothing here
        where     runs/power/run.yaml:11:31  derivatives.shear_bias.noise
        found     noise: beside exact:
        expected  exact: without noise:
        do        remove one of the two"
    `);
  });

  it('a number of realisations that is not whole', async () => {
    expect(await refusals(run('realisations: 100', 'realisations: 99.5'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     runs/power/run.yaml:7:1  realisations
        found     99.5
        expected  a whole number, at least 2
        do        write a whole number, at least 2"
    `);
  });

  it('a suite shared with another run', async () => {
    expect(await refusals(run('suite: box-b', 'suite: box-a'))).toMatchInlineSnapshot(`
      "error: a run without realisations shares a suite
        where     runs/power/run.yaml:3:1  suite
        found     run power of kind moments in suite box-a, beside run peaks
        expected  a suite of its own: the covariance between the two runs cannot be known
        do        put both probes into one run with their joint covariance, or give this run a suite of its own if the simulations differ"
    `);
  });
});

describe('a prior matrix that is refused', () => {
  const prior = (...values: number[]) => changed(edited(minimalStudy(), 'study.yaml', 'baseline: power', 'baseline: power\nprior: prior.npy'), { 'prior.npy': { shape: [3, 3], values } });

  it('one with a negative eigenvalue', async () => {
    expect(await refusals(prior(1, 2, 0, 2, 1, 0, 0, 0, 1))).toMatchInlineSnapshot(`
      "error: the prior is not a Fisher matrix
        where     study.yaml:11:1  prior
        found     a matrix with a negative eigenvalue
        expected  a symmetric, positive semidefinite matrix: the inverse of a covariance, in the order of parameters
        do        check that the file holds the prior Fisher matrix, not a covariance or a factor of it"
    `);
  });

  it('one that is not symmetric', async () => {
    expect(await refusals(prior(1, 0.5, 0, 0.4, 1, 0, 0, 0, 1))).toMatchInlineSnapshot(`
      "error: the prior is not a Fisher matrix
        where     study.yaml:11:1  prior
        found     element [1, 0] (counted from 0) differs from its mirror image
        expected  a symmetric, positive semidefinite matrix: the inverse of a covariance, in the order of parameters
        do        check that the file holds the prior Fisher matrix, not a covariance or a factor of it"
    `);
  });

  it('one that has not a row for each parameter', async () => {
    expect(await refusals(changed(prior(), { 'prior.npy': { shape: [2, 2], values: [1, 0, 0, 1] } }))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     study.yaml:11:1  prior
        found     prior.npy has the shape [2, 2]
        expected  [3, 3]
        do        check that this is the right file, and the vector of its run"
    `);
  });
});
