import { describe, expect, it } from 'vitest';
import { runDerivative } from '../../src/forecast/derivatives.js';
import { derivativeResult, vectorResults } from '../../src/forecast/vectors.js';
import { suitesOf } from '../../src/forecast/suite.js';
import type { EnsembleDerivative, Run, Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';
import { deviationOf, meanOf, normalRows, range, seededRealisations } from './seeded-study.js';

const size = 3;

function studyOf(derivative: EnsembleDerivative, fiducial = realisations(normalRows(30, size, 1), size, range(30))): Study {
  return memoryStudy({
    parameters: [parameter('p0')],
    combinations: [combination('base', ['base'])],
    runs: [ensembleRun('run', columnsOf('base', size), fiducial, { p0: derivative })],
  });
}

const vectorOf = (study: Study) => vectorResults(study, suitesOf(study)).base!.only!;

describe('a data vector', () => {
  it('has mean and standard deviation of the fiducial rows', () => {
    const rows = normalRows(30, size, 1);
    const { mean, standardDeviation, values, coordinate, run } = vectorOf(studyOf({ kind: 'insensitive' }));
    range(size).forEach((i) => {
      const column = range(30).map((k) => rows[k * size + i]!);
      expect(mean![i]).toBeCloseTo(meanOf(column), 13);
      expect(standardDeviation[i]).toBeCloseTo(deviationOf(column), 13);
    });
    expect([values, coordinate, run]).toEqual([[1, 2, 3], 'x', 'run']);
  });

  it('has the standard error of a mean for one derivative a realisation: s/sqrt(N)', () => {
    const rows = normalRows(25, size, 2);
    const derivative = vectorOf(studyOf({ kind: 'per realisation', realisations: realisations(rows, size) })).derivatives.p0!;
    range(size).forEach((i) => {
      const column = range(25).map((k) => rows[k * size + i]!);
      expect(derivative.value[i]).toBeCloseTo(meanOf(column), 13);
      expect(derivative.standardError![i]).toBeCloseTo(deviationOf(column) / 5, 13);
    });
  });

  it('has no noise for exact and insensitive derivatives', () => {
    const exact = vectorOf(studyOf({ kind: 'exact', values: Float64Array.from([1, 2, 3]) })).derivatives.p0!;
    expect(exact).toEqual({ value: [1, 2, 3], standardError: [0, 0, 0] });
    expect(vectorOf(studyOf({ kind: 'insensitive' })).derivatives.p0).toEqual({ value: [0, 0, 0], standardError: [0, 0, 0] });
  });

  it('of moments has the error that the given noise implies, and none where it is not given', () => {
    const covariance = { data: Float64Array.from([4, 1, 1, 9]), rows: 2, columns: 2 };
    const noise = { data: Float64Array.from([25, 0, 0, 100]), rows: 2, columns: 2 };
    const mean = Float64Array.from([5, 6]);
    const derivatives = {
      p0: { kind: 'mean' as const, mean, realisations: 25, noise },
      p1: { kind: 'mean' as const, mean, realisations: null, noise },
      p2: { kind: 'mean' as const, mean, realisations: 25, noise: null },
    };
    const run = momentsRun('run', columnsOf('base', 2), { covariance, realisations: 50, derivatives });
    const study = memoryStudy({ parameters: Object.keys(derivatives).map((name) => parameter(name)), combinations: [combination('base', ['base'])], runs: [run] });
    const vector = vectorOf(study);
    expect(vector.standardDeviation).toEqual([2, 3]);
    expect(vector.mean).toBeNull();
    expect(vector.derivatives.p0).toEqual({ value: [5, 6], standardError: [1, 2] });
    expect(vector.derivatives.p1!.standardError).toBeNull();
    expect(vector.derivatives.p2!.standardError).toBeNull();
  });

  it('gives each block its own entries, wherever they stand', () => {
    const columns = ['a', 'b', 'a'].map((block, i) => ({ ...columnsOf('base', 3)[i]!, block, label: `the ${block}`, coordinate: block === 'b' ? null : columnsOf('base', 3)[i]!.coordinate }));
    const base = studyOf({ kind: 'exact', values: Float64Array.from([1, 2, 3]) });
    const vectors = vectorResults({ ...base }, suitesOf({ ...base, runs: [{ ...base.runs[0]!, columns }] })).base!;
    expect(vectors.a!.derivatives.p0!.value).toEqual([1, 3]);
    expect(vectors.a!.values).toEqual([1, 3]);
    expect(vectors.b).toMatchObject({ coordinate: null, unit: '', values: [1], label: 'the b' });
  });
});

describe('the standard error of a derivative', () => {
  const settings: readonly (readonly [string, readonly number[], readonly number[]])[] = [
    ['matched', range(12), range(12)],
    ['unmatched', range(12), range(20, 50)],
    ['partly overlapping', range(12), range(12, 4)],
    ['unequal and overlapping', range(8), range(20)],
  ];

  it.each(settings)('is the scatter of the derivative over many studies: %s', (_, lower, upper) => {
    const studies = 400;
    const values: number[] = [];
    const variances: number[] = [];
    const at = (seeds: readonly number[], k: number, side: number) =>
      seededRealisations(seeds.map((seed) => seed + 1000 * k), 1, () => side, { shared: 0.8, own: 0.6, salt: side });
    for (let k = 1; k <= studies; k += 1) {
      const nodes = { kind: 'nodes' as const, nodes: [{ at: -1, realisations: at(lower, k, -1) }, { at: 1, realisations: at(upper, k, 1) }] };
      const study = memoryStudy({
        parameters: [parameter('p0')],
        combinations: [combination('base', ['base'])],
        runs: [ensembleRun('run', columnsOf('base', 1), realisations(normalRows(5, 1, 1), 1, range(5)), { p0: nodes })],
      });
      const derivative = vectorOf(study).derivatives.p0!;
      values.push(derivative.value[0]!);
      variances.push(derivative.standardError![0]! ** 2);
    }
    const ratio = deviationOf(values) ** 2 / meanOf(variances);
    // Chi-square of 399 degrees: 1 -+ 3.29 sqrt(2/399) = 23 %, one in a thousand. Lists of unequal length share the factor of the
    // shorter, N/(N - 1) for 8 in place of 20: up to 9 % too large.
    expect(ratio).toBeGreaterThan(1 - 0.24 - 0.09);
    expect(ratio).toBeLessThan(1 + 0.24);
    expect(Math.abs(meanOf(values) - 1)).toBeLessThan((4 * deviationOf(values)) / Math.sqrt(studies));
  });
});

describe('how a derivative was made', () => {
  const noise = (own: number, salt: number) => ({ shared: 1, own, salt });
  const runWith = (derivative: EnsembleDerivative): Run => studyOf(derivative).runs[0]!;
  const nodes = (own: number, seeds: readonly number[] = range(4000)): EnsembleDerivative => ({
    kind: 'nodes',
    nodes: [-1, 1].map((at) => ({ at, realisations: seededRealisations(seeds, size, (i) => at * i, noise(own, at)) })),
  });

  it('tells the correlation of the nodes, and by how much matching cuts the noise', () => {
    const result = derivativeResult(runDerivative(runWith(nodes(0.5)), 'p0', 0));
    // Shared variance 1, own 0.25: correlation 0.8; unmatched 2 * 1.25/4, matched 2 * 0.25/4: a factor of 5. 4000 realisations: 2 to 3 %.
    expect(result.nodeCorrelation).toBeCloseTo(0.8, 1);
    expect(Math.abs(result.noiseReduction! / 5 - 1)).toBeLessThan(0.1);
    expect(result).toMatchObject({ kind: 'nodes', matching: 'by seed', realisations: 4000 });
    expect(result.nodes).toEqual([
      { at: -1, weight: -0.5, realisations: 4000, source: 'memory.npy' },
      { at: 1, weight: 0.5, realisations: 4000, source: 'memory.npy' },
    ]);
  });

  it('has no reduction to speak of where noise cancels altogether', () => {
    const { nodeCorrelation, noiseReduction } = derivativeResult(runDerivative(runWith(nodes(0, range(20))), 'p0', 0));
    expect(nodeCorrelation).toBeCloseTo(1, 12);
    // What is left is the rounding of sums that cancel.
    expect(noiseReduction === null || noiseReduction > 1e12).toBe(true);
  });

  it('has no evidence without nodes', () => {
    expect(derivativeResult(runDerivative(runWith({ kind: 'insensitive' }), 'p0', 0))).toEqual({
      kind: 'insensitive',
      nodes: [],
      matching: 'does not apply',
      realisations: null,
      nodeCorrelation: null,
      noiseReduction: null,
    });
  });
});
