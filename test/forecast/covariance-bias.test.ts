import { describe, expect, it } from 'vitest';
import { whole } from '../../src/forecast/combined.js';
import { variances } from '../../src/forecast/assess.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { combinedOf, deviationOf, meanOf, normalRows, range } from './seeded-study.js';

// For Gaussian data and exact derivatives sigma_hat^2/sigma^2 is chi^2_nu/(N_s - D - 2) with nu = N_s - 1 - D + p, so that the
// mean of log sigma_hat is off by (p + 1)/(2 (N_s - D - 2)) - 1/(2 nu) to first order: unbiased for F, not for an error.

interface Setting {
  readonly entries: number;
  readonly parameters: number;
  readonly fiducials: number;
}

/** Scores (log sigma_hat - log sigma)/SE of the first parameter, whose responses are independent normal numbers. */
function scores({ entries, parameters, fiducials }: Setting, studies: number) {
  const names = range(parameters).map((a) => `p${String(a)}`);
  const responses = names.map((_, a) => normalRows(1, entries, 900 + a));
  const of = (covariance: Float64Array) =>
    whole(
      combinedOf(
        memoryStudy({
          parameters: names.map((name) => parameter(name)),
          combinations: [combination('base', ['base'])],
          runs: [
            ensembleRun(
              'run',
              columnsOf('base', entries),
              realisations(covariance, entries),
              Object.fromEntries(names.map((name, a) => [name, { kind: 'exact', values: responses[a]! }])),
            ),
          ],
          scan: { coordinate: 'x', keep: 'below', at: [] },
        }),
        'base',
      ),
    );
  const logs: number[] = [];
  const errors: number[] = [];
  const biases: number[] = [];
  for (let k = 0; k < studies; k += 1) {
    const at = of(normalRows(fiducials, entries, 40_000 + 7 * k));
    logs.push(at.corrected!.logs[0]!);
    const { varianceCovariance, bias } = variances({ at, q: 0 }, null);
    errors.push(Math.sqrt(varianceCovariance!));
    biases.push(bias);
  }
  return { logs, errors, biases, truth: trueLog(responses) };
}

/** log sqrt((M M^T)^-1)_00 for unit noise, by elimination of the other responses from the first. */
function trueLog(responses: readonly Float64Array[]): number {
  const rows = responses.map((row) => Float64Array.from(row));
  const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i]!, 0);
  const basis: Float64Array[] = [];
  for (const row of [...rows.slice(1), rows[0]!]) {
    // Gram-Schmidt, twice for the digits.
    for (const one of [...basis, ...basis]) {
      const share = dot(row, one) / dot(one, one);
      for (let i = 0; i < row.length; i += 1) row[i] = row[i]! - share * one[i]!;
    }
    basis.push(row);
  }
  return -Math.log(dot(rows[0]!, rows[0]!)) / 2;
}

const studies = 200;
const few: Setting = { entries: 20, parameters: 2, fiducials: 200 };
const many: Setting = { entries: 40, parameters: 25, fiducials: 250 };

describe('an error from an estimated covariance and exact derivatives', () => {
  it.each([few, many])('scatters as its standard error says: %o', (setting) => {
    const { logs, errors } = scores(setting, studies);
    const ratio = deviationOf(logs) / meanOf(errors);
    // 1 -+ 3.29/sqrt(2 * 199): one in a thousand.
    expect(Math.abs(ratio - 1)).toBeLessThan(0.165);
  });

  it('has intervals that cover 63 to 80 % with few parameters', () => {
    expect(coverage(few)).toBeGreaterThan(0.63 - bound);
    expect(coverage(few)).toBeLessThan(0.8 + bound);
  });

  it('is off by (p + 1)/(2 (N_s - D - 2)) - 1/(2 nu) in the logarithm', () => {
    const { logs, truth } = scores(many, studies);
    const { entries, parameters, fiducials } = many;
    const law = (parameters + 1) / (2 * (fiducials - entries - 2)) - 1 / (2 * (fiducials - 1 - entries + parameters));
    expect(Math.abs(meanOf(logs) - truth - law)).toBeLessThan((4 * deviationOf(logs)) / Math.sqrt(studies) + law / 20);
  });

  it('has a stated bias that is the true one', () => {
    const { biases } = scores(many, 20);
    const { entries, parameters, fiducials } = many;
    const law = (parameters + 1) / (2 * (fiducials - entries - 2)) - 1 / (2 * (fiducials - 1 - entries + parameters));
    // The law is that of the mean; a single study takes the variance from its own influences, which scatter by some per cent.
    expect(meanOf(biases) / law).toBeGreaterThan(0.95);
    expect(meanOf(biases) / law).toBeLessThan(1.05);
  });

  it('has intervals that cover 63 to 80 % with many parameters', () => {
    expect(coverage(many)).toBeGreaterThan(0.63 - bound);
    expect(coverage(many)).toBeLessThan(0.8 + bound);
  });

  /** 3.09 standard errors of a share of 63 % of 200 studies. */
  const bound = 3.09 * Math.sqrt((0.63 * 0.37) / studies);

  function coverage(setting: Setting): number {
    const { logs, errors, biases, truth } = scores(setting, studies);
    return logs.filter((log, k) => Math.abs(log - truth) <= Math.hypot(errors[k]!, biases[k]!)).length / studies;
  }
});
