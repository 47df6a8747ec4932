import { inverse, Matrix as Dense } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { whole } from '../../src/forecast/combined.js';
import { partFisher, whitenedDerivatives } from '../../src/forecast/fisher.js';
import type { CovarianceNoise } from '../../src/forecast/influence.js';
import { covarianceVariance, precisionTimesDerivatives, project } from '../../src/forecast/influence.js';
import type { Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../fixtures/memory-study.js';
import { allRows, combinedOf, cosine, deviationOf, distance, meanOf, normalRows, partsOf, range } from './seeded-study.js';

const rounding = 1e-11;

/** Exact derivatives: the covariance is all that scatters. Baseline the leading entries, joint all of them. */
function exactStudy(size: number, baseline: number, parameters: number, rows: Float64Array): Study {
  return memoryStudy({
    parameters: range(parameters).map((a) => parameter(`p${String(a)}`)),
    combinations: [combination('base', ['base']), combination('joint', ['base', 'added'])],
    runs: [
      ensembleRun(
        'run',
        [...columnsOf('base', baseline), ...columnsOf('added', size - baseline)],
        realisations(rows, size),
        Object.fromEntries(range(parameters).map((a) => [`p${String(a)}`, { kind: 'exact', values: responses(size, a) }])),
      ),
    ],
    scan: { coordinate: 'x', keep: 'below', at: [] },
  });
}

function responses(size: number, parameterIndex: number): Float64Array {
  return Float64Array.from({ length: size }, (_, i) => cosine(i, parameterIndex));
}

describe('the projections of the fiducial realisations', () => {
  const size = 7;
  const count = 40;
  const study = exactStudy(size, 4, 2, normalRows(count, size, 1));
  const part = partsOf(study, 'joint')[0]!;
  const whitened = whitenedDerivatives(part);

  it('of the data that made the covariance have mean 0 and sum of squares (N - 1) M^T S^-1 M', () => {
    const [u] = project(part, [precisionTimesDerivatives(part, whitened, size)]);
    const column = (a: number): number[] => range(count).map((i) => u![2 * i + a]!);
    const fisher = partFisher(part).at(-1)!;
    for (const a of [0, 1]) {
      expect(Math.abs(meanOf(column(a)))).toBeLessThan(rounding);
      for (const b of [0, 1]) {
        const sum = column(a).reduce((total, value, i) => total + value * column(b)[i]!, 0);
        expect(sum / (count - 1)).toBeCloseTo(fisher.raw.data[2 * a + b]! / fisher.precision, 10);
      }
    }
  });

  it('are M^T S^-1 (x - mean), with a dense inverse', () => {
    const rows = new Dense(range(count).map((k) => Array.from(allRowsOf(study).subarray(k * size, (k + 1) * size)))).center('column');
    const precision = inverse(rows.transpose().mmul(rows).div(count - 1));
    const response = new Dense([Array.from(responses(size, 0)), Array.from(responses(size, 1))]);
    const expected = rows.mmul(precision).mmul(response.transpose()).to1DArray();
    const [u] = project(part, [precisionTimesDerivatives(part, whitened, size)]);
    expect(distance(u!, expected)).toBeLessThan(rounding);
  });

  it('of a cut know its entries alone', () => {
    // Entries stand along x: both probes to x = 2 are the leading four.
    const keep = ['base', 'added'].map((probe) => ({ probe, ranges: [{ coordinate: 'x', min: null, max: 2 }], blocks: null }));
    const short = partsOf({ ...study, combinations: [combination('base', ['base', 'added'], { keep })] }, 'base')[0]!;
    const [alone] = project(short, [precisionTimesDerivatives(short, whitenedDerivatives(short), 4)]);
    const [cut] = project(part, [precisionTimesDerivatives(part, whitened, 4)]);
    expect(distance(cut!, alone!)).toBeLessThan(rounding);
  });

  function allRowsOf(of: Study): Float64Array {
    const { data } = of.runs[0]!;
    if (data.kind === 'moments') throw new Error('the study has realisations');
    return allRows(data.fiducial);
  }
});

describe('the influence of a realisation', () => {
  it('is the derivative of log sigma by its weight: a finite difference agrees', () => {
    const size = 5;
    const count = 60;
    const parameters = 2;
    const rows = normalRows(count, size, 2);
    const combined = combinedOf(exactStudy(size, 3, parameters, rows), 'joint');
    const noise = whole(combined).noise.get('box')! as CovarianceNoise & { kind: 'measured' };
    const dense = new Dense(range(count).map((k) => Array.from(rows.subarray(k * size, (k + 1) * size))));
    // Realisation i counts 1 + e times: S = sum w (x - m)(x - m)^T/(N - 1), with the sum of weights kept at N.
    const logSigma = (changed: number, by: number): number => {
      const weights = range(count).map((k) => (1 + (k === changed ? by : 0)) / (1 + by / count));
      const centre = new Dense([range(size).map((j) => weights.reduce((sum, w, k) => sum + (w * dense.get(k, j)) / count, 0))]);
      const centred = dense.clone().subRowVector(centre);
      const scatter = centred.transpose().mmul(centred.clone().mulColumnVector(weights)).div(count - 1);
      const response = new Dense([Array.from(responses(size, 0)), Array.from(responses(size, 1))]);
      const fisher = response.mmul(inverse(scatter)).mmul(response.transpose());
      return Math.log(inverse(fisher).get(0, 0)) / 2;
    };
    const spread = Math.sqrt(count / (count - 1 - size + parameters));
    for (const i of [0, 7, 33]) {
      const step = 1e-5;
      const slope = (logSigma(i, step) - logSigma(i, -step)) / (2 * step);
      // Influences are taken over N where S has the divisor N - 1: the two differ by that factor. A central difference of 1e-5 has 9 digits.
      expect((noise.values[i * noise.quantities]! / spread) * (count / (count - 1))).toBeCloseTo(slope, 8);
    }
  });

  it('is the same from few entries whatever else the run holds', () => {
    const size = 6;
    const rows = normalRows(50, size, 3);
    const inside = combinedOf(exactStudy(size, 4, 2, rows), 'base');
    const cut = Float64Array.from(range(50).flatMap((k) => Array.from(rows.subarray(k * size, k * size + 4))));
    const alone = combinedOf({ ...exactStudy(4, 4, 2, cut), combinations: [combination('base', ['base'])] }, 'base');
    const values = (of: typeof inside): Float64Array => (whole(of).noise.get('box') as CovarianceNoise & { kind: 'measured' }).values;
    expect(distance(values(inside), values(alone))).toBeLessThan(rounding);
  });
});

interface Draws {
  readonly error: readonly number[];
  readonly fixed: readonly number[];
  readonly ratio: readonly number[];
  readonly errorVariance: number;
  readonly fixedVariance: number;
  readonly ratioVariance: number;
}

/** Log errors, and the log ratio of nested combinations, over many seeded studies, with the mean of their own variances. */
function draw(size: number, baseline: number, parameters: number, count: number, studies: number): Draws {
  const error: number[] = [];
  const fixed: number[] = [];
  const ratio: number[] = [];
  const variances: [number, number, number][] = [];
  for (let k = 0; k < studies; k += 1) {
    const study = exactStudy(size, baseline, parameters, normalRows(count, size, 5000 + 17 * k));
    const joint = whole(combinedOf(study, 'joint'));
    const base = whole(combinedOf(study, 'base'));
    error.push(joint.corrected!.logs[0]!);
    fixed.push(joint.corrected!.logs[1]!);
    ratio.push(base.corrected!.logs[0]! - joint.corrected!.logs[0]!);
    const own = joint.noise.get('box')!;
    const other = base.noise.get('box')!;
    variances.push([
      covarianceVariance(own, 0, null),
      covarianceVariance(own, 1, null),
      covarianceVariance(other, 0, { noise: own, quantity: 0 }),
    ]);
  }
  const mean = (place: 0 | 1 | 2): number => meanOf(variances.map((one) => one[place]));
  return { error, fixed, ratio, errorVariance: mean(0), fixedVariance: mean(1), ratioVariance: mean(2) };
}

/**
 * Bounds on s^2/sigma^2 of n draws, but for one test in a thousand: 1 -+ 3.29 sqrt(2/(n - 1)), the normal approximation of the
 * chi-square law; `slack` is what the first order is allowed to be off.
 */
function expectVariance(values: readonly number[], expected: number, slack: number): void {
  const width = 3.29 * Math.sqrt(2 / (values.length - 1));
  const ratio = deviationOf(values) ** 2 / expected;
  expect(ratio).toBeGreaterThan(1 - width - slack);
  expect(ratio).toBeLessThan(1 + width + slack);
}

describe('the standard error from the covariance alone, over Gaussian studies', () => {
  const studies = 300;
  // var log chi^2_nu = psi'(nu/2): 1/(2 nu) is its first order, off by 1/nu. The ratio of nested errors has no such law in
  // the contract: what its first order may be off is measured here, and must not be more.
  const cases: readonly (readonly [number, number, number, number, number])[] = [
    [12, 6, 2, 120, 0.05],
    [40, 20, 3, 80, 0.1],
  ];

  it.each(cases)('is the scatter of log sigma and of the log ratio: D = %i, baseline %i, p = %i, N_s = %i', (size, baseline, parameters, count, slack) => {
    const draws = draw(size, baseline, parameters, count, studies);
    expectVariance(draws.error, draws.errorVariance, slack);
    expectVariance(draws.fixed, draws.fixedVariance, slack);
    expectVariance(draws.ratio, draws.ratioVariance, slack);
    const degrees = count - 1 - size + parameters;
    expectVariance(draws.error, 1 / (2 * degrees), slack);
    expectVariance(draws.fixed, 1 / (2 * (degrees - parameters + 1)), slack);
  });
});

describe('the noise of a covariance without realisations', () => {
  const size = 8;
  const count = 20_000;
  const rows = normalRows(count, size, 9);
  const measured = exactStudy(size, 5, 2, rows);
  const { covariance } = partsOf(measured, 'joint')[0]!.covariance;

  function momentsStudy(given: number | null): Study {
    const derivatives = Object.fromEntries(range(2).map((a) => [`p${String(a)}`, { kind: 'exact' as const, values: responses(size, a) }]));
    const run = momentsRun('run', measured.runs[0]!.columns, { covariance, realisations: given, derivatives });
    return { ...measured, runs: [run] };
  }

  it('is that of the rows, for many Gaussian rows', () => {
    const moments = momentsStudy(count);
    const noise = (study: Study, name: string): CovarianceNoise => whole(combinedOf(study, name)).noise.get('box')!;
    for (const q of range(4)) {
      const given = covarianceVariance(noise(moments, 'joint'), q, null);
      const found = covarianceVariance(noise(measured, 'joint'), q, null);
      // The mean of (z . x)^4 over 20 000 Gaussian rows scatters by sqrt(96/20 000)/2 = 3.5 %: four of them.
      expect(Math.abs(found / given - 1)).toBeLessThan(0.14);
      const ratioGiven = covarianceVariance(noise(moments, 'base'), q, { noise: noise(moments, 'joint'), quantity: q });
      const ratioFound = covarianceVariance(noise(measured, 'base'), q, { noise: noise(measured, 'joint'), quantity: q });
      expect(Math.abs(ratioFound / ratioGiven - 1)).toBeLessThan(0.14);
    }
  });

  it('is 1/(2 nu) for Gaussian moments, up to 1/N_s', () => {
    for (const given of [20, 50, 1000]) {
      const noise = whole(combinedOf(momentsStudy(given), 'joint')).noise.get('box')!;
      for (const [q, free] of [[0, 2], [1, 1], [2, 2]] as const) {
        const law = 1 / (2 * (given - 1 - size + free));
        expect(Math.abs(covarianceVariance(noise, q, null) / law - 1)).toBeLessThan(1.001 / given);
      }
    }
  });

  it('is none where no number of realisations is given', () => {
    const joint = whole(combinedOf(momentsStudy(null), 'joint'));
    const noise = joint.noise.get('box')!;
    expect(noise).toEqual({ kind: 'known' });
    expect(covarianceVariance(noise, 0, null)).toBe(0);
    const other = whole(combinedOf(momentsStudy(50), 'base')).noise.get('box')!;
    expect(covarianceVariance(noise, 0, { noise: other, quantity: 0 })).toBe(covarianceVariance(other, 0, null));
  });
});
