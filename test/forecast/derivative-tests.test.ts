import { describe, expect, it } from 'vitest';
import { derivativeTests } from '../../src/forecast/derivative-tests.js';
import { runDerivative } from '../../src/forecast/derivatives.js';
import type { EnsembleDerivative, Run } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { forecastOf, meanOf, deviationOf, normalRows, range, seededRealisations } from './seeded-study.js';

const size = 3;
const variance = new Float64Array(size).fill(1);

/** Nodes of x = a t + b t^2 + c t^3 in each entry, times the entry's number. */
function runOf(places: readonly number[], [a, b, c]: readonly [number, number, number], own = 0, fiducialSeeds: readonly number[] | null = null, first = 0): Run {
  const at = (t: number) => seededRealisations(range(40, first), size, (i) => (i + 1) * (a * t + b * t * t + c * t ** 3), { shared: 1, own, salt: 100 * t });
  const derivative: EnsembleDerivative = { kind: 'nodes', nodes: places.map((t) => ({ at: t, realisations: at(t) })) };
  const fiducial = seededRealisations(fiducialSeeds ?? range(60, 900), size, () => 0, { shared: 1, own, salt: 0 });
  return ensembleRun('run', columnsOf('base', size), fiducial, { p0: derivative });
}

const testsOf = (run: Run) => derivativeTests(run, runDerivative(run, 'p0', 0), variance, 0);

describe('tests of a derivative', () => {
  it('find nothing to test with two nodes and no fiducial rows of the same seeds', () => {
    expect(testsOf(runOf([-1, 1], [1, 0.2, 0.1]))).toEqual([]);
  });

  it('find the truncation of a cubic by step size: c (h^2 - H^2)/a', () => {
    const [step] = testsOf(runOf([-2, -1, 1, 2], [1, 0, 0.1])).filter(({ kind }) => kind === 'step size');
    // Central differences of t^3 at 1 and 2 are 1 and 4; four nodes are exact for a cubic, so that the response is a = 1.
    expect(step!.share).toBeCloseTo(0.1 * (1 - 4), 12);
    expect(step!.standardError).toBeLessThan(1e-12);
    expect(step!.realisations).toBe(40);
  });

  it('find the curvature: half of the second derivative, b/a', () => {
    const tests = testsOf(runOf([-1, 1], [2, 0.3, 0], 0, range(60)));
    expect(tests.map(({ kind }) => kind)).toEqual(['one-sided', 'curvature']);
    expect(tests[1]!.share).toBeCloseTo(0.3 / 2, 12);
    // Forward less central: (a + b) - a, as a share of a.
    expect(tests[0]!.share).toBeCloseTo(0.3 / 2, 12);
  });

  it('leave the fiducial rows out where they lack a seed', () => {
    expect(testsOf(runOf([-1, 1], [2, 0.3, 0], 0, range(39)))).toEqual([]);
  });

  it('have standard errors that are the scatter of the share over studies', () => {
    const shares: number[] = [];
    const errors: number[] = [];
    for (let k = 1; k <= 200; k += 1) {
      const [, curvature] = testsOf(runOf([-1, 1], [2, 0.3, 0], 0.5, range(60, 100 * k), 100 * k));
      shares.push(curvature!.share);
      errors.push(curvature!.standardError ** 2);
    }
    // Chi-square of 199 degrees: 1 -+ 3.29 sqrt(2/199); the response's own noise adds little.
    const ratio = deviationOf(shares) ** 2 / meanOf(errors);
    expect(Math.abs(ratio - 1)).toBeLessThan(0.35);
    expect(Math.abs(meanOf(shares) - 0.15)).toBeLessThan((4 * deviationOf(shares)) / Math.sqrt(200));
  });

  it('do not change with the unit of an entry', () => {
    const run = runOf([-2, -1, 1, 2], [1, 0.1, 0.1], 0.3);
    const derivative = runDerivative(run, 'p0', 0);
    const scaled = { ...derivative, nodeRows: derivative.nodeRows!.map(({ keys, rows }) => ({ keys, rows: { ...rows, data: rows.data.map((value, k) => value * 10 ** (k % size)) } })) };
    const units = Float64Array.from({ length: size }, (_, i) => 10 ** (2 * i));
    const found = derivativeTests(run, scaled, units, 0);
    derivativeTests(run, derivative, variance, 0).forEach((test, k) => {
      expect(found[k]!.share).toBeCloseTo(test.share, 12);
      expect(found[k]!.standardError).toBeCloseTo(test.standardError, 12);
    });
  });

  const studyOf = (run: Run) => memoryStudy({ parameters: [parameter('p0')], combinations: [combination('base', ['base'], { keep: [{ probe: 'base', ranges: [{ coordinate: 'x', min: null, max: 2 }], blocks: null }] })], runs: [run] });
  const finite = (run: Run): boolean => forecastOf(studyOf(run)).derivativeTests!.every(({ share, standardError }) => Number.isFinite(share) && Number.isFinite(standardError));

  it('stand in the results as numbers', () => {
    expect(finite(runOf([-2, -1, 1, 2], [1, 0.1, 0.1], 0.3))).toBe(true);
  });

  it('are numbers, or left out, where a parameter changes nothing', () => {
    const flat = runOf([-1, 1], [0, 0, 0], 0, range(60));
    const derivative = runDerivative(flat, 'p0', 0);
    expect(derivativeTests(flat, derivative, variance, 0).every(({ share }) => Number.isFinite(share))).toBe(true);
  });

  it('are numbers where a column that no combination keeps is constant', () => {
    const run = runOf([-2, -1, 1, 2], [1, 0.1, 0.1], 0.3);
    const rows = normalRows(60, size, 4).map((value, k) => (k % size === 2 ? 5 : value));
    const fiducial = realisations(rows, size, range(60, 900));
    if (run.data.kind === 'moments') throw new Error('the run has realisations');
    expect(finite({ ...run, data: { ...run.data, fiducial } })).toBe(true);
  });
});
