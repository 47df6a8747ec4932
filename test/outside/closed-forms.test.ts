import { describe, expect, it } from 'vitest';
import { forecast } from '../../src/forecast/forecast.js';
import type { Replicates } from '../../src/forecast/jackknife.js';
import { jackknifeVariance } from '../../src/forecast/jackknife.js';
import type { CombinationResult } from '../../src/results/schema.js';
import type { Parameter } from '../../src/study/study.js';
import { columnsOf, combination, memoryStudy, momentsRun, parameter } from '../fixtures/memory-study.js';
import { digits, readData } from './read-data.js';

// Source: closed forms, each with the paper or textbook that it is from beside it in data/closed-forms.json; exact rationals or 50 digits.
interface ClosedForm {
  readonly id: string;
  readonly example: Readonly<Record<string, unknown>>;
}

const forms = readData('closed-forms') as readonly ClosedForm[];

// eslint-disable-next-line @typescript-eslint/no-unnecessary-type-parameters -- the caller names the shape of its own example
function exampleOf<T>(id: string): T {
  return forms.find((form) => form.id === id)!.example as T;
}

/** "7/88" or "0.25" or 9 as a number. */
function value(text: string | number): number {
  const [above = '', below = '1'] = String(text).split('/');
  return Number(above) / Number(below);
}

/** A forecast with known covariance [n][n] and exact derivatives by name. */
function solved(
  covariance: readonly (readonly number[])[],
  derivatives: Readonly<Record<string, readonly number[]>>,
  changes: Readonly<Record<string, Partial<Parameter>>> = {},
): CombinationResult {
  const size = covariance.length;
  const study = memoryStudy({
    parameters: Object.keys(derivatives).map((name) => parameter(name, changes[name])),
    combinations: [combination('all', ['data'])],
    runs: [
      momentsRun('run', columnsOf('data', size), {
        covariance: { data: Float64Array.from(covariance.flat()), rows: size, columns: size },
        realisations: null,
        derivatives: Object.fromEntries(
          Object.entries(derivatives).map(([name, values]) => [name, { kind: 'exact', values: Float64Array.from(values) }]),
        ),
      }),
    ],
  });
  return forecast(study, { name: 'test', version: '0' }).combinations.all!;
}

function white(size: number, sigma: number): number[][] {
  return Array.from({ length: size }, (_, i) => Array.from({ length: size }, (_unused, j) => (i === j ? sigma ** 2 : 0)));
}

function expectDigits(actual: number | null, exact: string | number, least = 13): void {
  expect(digits(actual!, value(exact))).toBeGreaterThan(least);
}

it('a straight line in white noise', () => {
  const { x, sigma, sigma_a, sigma_b, corr, conditional_a, conditional_b } = exampleOf<{
    x: number[];
    sigma: number;
    sigma_a: string;
    sigma_b: string;
    corr: string;
    conditional_a: string;
    conditional_b: string;
  }>('a_straight_line');
  const { errors, correlation } = solved(white(x.length, sigma), { a: x.map(() => 1), b: x });
  expectDigits(errors.a!.marginalised.corrected, sigma_a);
  expectDigits(errors.b!.marginalised.corrected, sigma_b);
  expectDigits(errors.a!.fixed.corrected, conditional_a);
  expectDigits(errors.b!.fixed.corrected, conditional_b);
  expectDigits(correlation.corrected![0]![1]!, corr);
});

it('the mean, and a trend, in AR(1) noise, whose inverse is known', () => {
  const { n, rho, s2, sigma_mean, twoParameter } = exampleOf<{
    n: number;
    rho: number;
    s2: number;
    sigma_mean: string;
    twoParameter: { sigma: string[]; fisher: string[][] };
  }>('b_ar1_mean');
  const covariance = Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_unused, j) => s2 * rho ** Math.abs(i - j)));
  const ones = Array.from({ length: n }, () => 1);
  expectDigits(solved(covariance, { mean: ones }).errors.mean!.marginalised.corrected, sigma_mean);
  const { errors, fisher } = solved(covariance, { mean: ones, trend: ones.map((_, t) => t) });
  expectDigits(errors.mean!.marginalised.corrected, twoParameter.sigma[0]!);
  expectDigits(errors.trend!.marginalised.corrected, twoParameter.sigma[1]!);
  twoParameter.fisher.flat().forEach((exact, k) => {
    expectDigits(fisher.raw[Math.floor(k / 2)]![k % 2]!, exact);
  });
});

it('a Gaussian line profile in white noise', () => {
  const { A, x0, w, sigma, sigma_A, sigma_x0, sigma_w, cov_A_w } = exampleOf<{
    A: number;
    x0: number;
    w: number;
    sigma: number;
    sigma_A: string;
    sigma_x0: string;
    sigma_w: string;
    cov_A_w: string;
  }>('c_gaussian_peak_1d');
  const x = Array.from({ length: 161 }, (_, k) => -40 + 0.5 * k);
  const shape = x.map((at) => Math.exp(-((at - x0) ** 2) / (2 * w * w)));
  const { errors, covariance } = solved(white(x.length, sigma), {
    A: shape,
    x0: shape.map((s, k) => (A * s * (x[k]! - x0)) / w ** 2),
    w: shape.map((s, k) => (A * s * (x[k]! - x0) ** 2) / w ** 3),
  });
  // The closed forms are integrals; the sum over pixels of a quarter of the width agrees with them to 50 digits.
  expectDigits(errors.A!.marginalised.corrected, sigma_A, 12);
  expectDigits(errors.x0!.marginalised.corrected, sigma_x0, 12);
  expectDigits(errors.w!.marginalised.corrected, sigma_w, 12);
  expectDigits(covariance.corrected![0]![2]!, cov_A_w, 12);
});

it('a complex tone in white noise (Rife & Boorstyn 1974)', () => {
  const { N, b, s2, n0, T, omega, theta, sigma_omega, sigma_b, sigma_theta } = exampleOf<Record<'N' | 'b' | 's2' | 'n0' | 'T' | 'omega' | 'theta', number> & Record<'sigma_omega' | 'sigma_b' | 'sigma_theta', string>>('d_complex_tone');
  const times = Array.from({ length: N }, (_, k) => (n0 + k) * T);
  const phase = times.map((t) => omega * t + theta);
  const pair = (re: (k: number) => number, im: (k: number) => number): number[] => [...times.map((_, k) => re(k)), ...times.map((_, k) => im(k))];
  const { errors } = solved(white(2 * N, Math.sqrt(s2)), {
    omega: pair((k) => -b * times[k]! * Math.sin(phase[k]!), (k) => b * times[k]! * Math.cos(phase[k]!)),
    b: pair((k) => Math.cos(phase[k]!), (k) => Math.sin(phase[k]!)),
    theta: pair((k) => -b * Math.sin(phase[k]!), (k) => b * Math.cos(phase[k]!)),
  });
  expectDigits(errors.omega!.marginalised.corrected, sigma_omega);
  expectDigits(errors.b!.marginalised.corrected, sigma_b);
  expectDigits(errors.theta!.marginalised.corrected, sigma_theta);
});

describe('two tracers whose noise is shared: the ratio becomes exact as the correlation goes to one', () => {
  const { i, ii } = exampleOf<{
    i: { alpha: number; beta: number; rows: { rho: string; sigma_alpha: string; sigma_beta: number; unmarginalised_sigma_alpha: string }[] };
    ii: { alpha: number; beta: number; n2: number; rows: { s2: string; sigma_alpha: string; var_beta: string }[] };
  }>('e_two_tracer_ratio');

  it.each(i.rows)('correlation $rho', ({ rho, sigma_alpha, sigma_beta, unmarginalised_sigma_alpha }) => {
    const { errors } = solved([[1, Number(rho)], [Number(rho), 1]], { alpha: [i.beta, 0], beta: [i.alpha, 1] });
    // 1 - rho itself loses digits at rho = 0.9999.
    expectDigits(errors.alpha!.marginalised.corrected, sigma_alpha, 11);
    expectDigits(errors.beta!.marginalised.corrected, sigma_beta, 11);
    expectDigits(errors.alpha!.fixed.corrected, unmarginalised_sigma_alpha, 11);
  });

  it.each(i.rows)('gain 1/sqrt(1 - rho^2) by a tracer that only knows the noise, correlation $rho', ({ rho: text }) => {
    // The second tracer does not respond: what it gives, it gives by predicting the first one's noise. Partitioned inverse, exact.
    const rho = Number(text);
    const study = memoryStudy({
      parameters: [parameter('alpha')],
      combinations: [combination('one', ['first']), combination('both', ['first', 'second'])],
      runs: [
        momentsRun('run', [...columnsOf('first', 1), ...columnsOf('second', 1)], {
          covariance: { data: Float64Array.of(1, rho, rho, 1), rows: 2, columns: 2 },
          realisations: null,
          derivatives: { alpha: { kind: 'exact', values: Float64Array.of(i.beta, 0) } },
        }),
      ],
    });
    const { improvements, attribution } = forecast(study, { name: 'test', version: '0' });
    const gain = 1 / Math.sqrt(1 - rho * rho);
    expectDigits(improvements.both!.alpha!.marginalised.corrected, gain, 11);
    expectDigits(attribution!.both!.throughNoise.alpha!.gain, gain, 11);
    expect(attribution!.both!.ties[0]!.correlations[0]).toBeCloseTo(rho, 11);
    expect(attribution!.both!.ties[0]!.predicted[0]!.share).toBeCloseTo(rho * rho, 11);
  });

  it.each(ii.rows)('common variance $s2', ({ s2, sigma_alpha, var_beta }) => {
    const v = [ii.alpha, 1];
    const covariance = v.map((a, k) => v.map((b, l) => Number(s2) * a * b + (k === l ? ii.n2 : 0)));
    const { errors } = solved(covariance, { alpha: [ii.beta, 0], beta: [ii.alpha, 1] });
    // A common variance of 1e6 over a noise of 0.25 costs seven digits.
    expectDigits(errors.alpha!.marginalised.corrected, sigma_alpha, 8);
    expect(digits(errors.beta!.marginalised.corrected! ** 2, value(var_beta))).toBeGreaterThan(8);
  });
});

describe('a Gaussian prior', () => {
  const { rows, conditional_b } = exampleOf<{
    rows: { prior_sigma_a: string | null; sigma: string[]; corr: string }[];
    conditional_b: string;
  }>('f_gaussian_prior');
  const x = Array.from({ length: 11 }, (_, k) => 10 + k);

  it.each(rows)('of $prior_sigma_a', ({ prior_sigma_a, sigma, corr }) => {
    const prior = prior_sigma_a === null ? null : value(prior_sigma_a);
    const { errors, correlation } = solved(white(11, 0.5), { a: x.map(() => 1), b: x }, { a: { prior } });
    expectDigits(errors.a!.marginalised.corrected, sigma[0]!, 12);
    expectDigits(errors.b!.marginalised.corrected, sigma[1]!, 12);
    expectDigits(correlation.corrected![0]![1]!, corr, 11);
    expectDigits(errors.b!.fixed.corrected, conditional_b);
  });
});

describe('the Hilbert matrix', () => {
  const sizes = exampleOf<readonly { n: number; inverseDiagonal: number[]; condition: string }[]>('g_hilbert_fisher');

  it.each(sizes)('of $n parameters: marginalised errors are roots of whole numbers', ({ n, inverseDiagonal, condition }) => {
    // The identity as response and the inverse Hilbert matrix as covariance would be circular: a prior brings the matrix in.
    const hilbert = Float64Array.from({ length: n * n }, (_, k) => 1 / (Math.floor(k / n) + (k % n) + 1));
    const names = Array.from({ length: n }, (_, k) => `p${String(k)}`);
    const study = memoryStudy({
      parameters: names.map((name) => parameter(name)),
      prior: { data: hilbert, rows: n, columns: n },
      combinations: [combination('all', ['data'])],
      runs: [
        momentsRun('run', columnsOf('data', 1), {
          covariance: { data: Float64Array.of(1), rows: 1, columns: 1 },
          realisations: null,
          derivatives: Object.fromEntries(names.map((name) => [name, { kind: 'insensitive' }])),
        }),
      ],
    });
    const { errors } = forecast(study, { name: 'test', version: '0' }).combinations.all!;
    inverseDiagonal.forEach((exact, k) => {
      expect(digits(errors[`p${String(k)}`]!.marginalised.corrected!, Math.sqrt(exact))).toBeGreaterThan(15 - Math.log10(Number(condition)));
    });
  });
});

it('an amplitude of Poisson counts', () => {
  const { T, A, sigma_A } = exampleOf<{ T: number[]; A: number; sigma_A: string }>('l_poisson_amplitude');
  const covariance = T.map((t, i) => T.map((_, j) => (i === j ? A * t : 0)));
  expectDigits(solved(covariance, { A: T }).errors.A!.marginalised.corrected, sigma_A);
});

it('the jackknife of a mean and of a ratio of sums', () => {
  const { y, mean, ratioSumYoverSumX } = exampleOf<{ y: number[]; mean: { varJ: string }; ratioSumYoverSumX: { looValues: string[]; varJ: string } }>('j_jackknife');
  const n = y.length;
  const replicates = (values: readonly number[]): Replicates => ({ values: Float64Array.from(values), weights: new Float64Array(n).fill((n - 1) / n), quantities: 1 });
  const total = y.reduce((sum, one) => sum + one, 0);
  expectDigits(jackknifeVariance(replicates(y.map((one) => (total - one) / (n - 1))), 0, null), mean.varJ);
  expectDigits(jackknifeVariance(replicates(ratioSumYoverSumX.looValues.map(value)), 0, null), ratioSumYoverSumX.varJ, 12);
});
