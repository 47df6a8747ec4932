import { describe, expect, it } from 'vitest';
import { forecast } from '../../src/forecast/forecast.js';
import { loadStudy } from '../../src/study/load.js';
import { writeStudy } from '../fixtures/study-folder.js';
import { digits, readData } from './read-data.js';

interface Regression {
  readonly name: string;
  readonly what: string;
  readonly noiseVariance: number;
  /** Design matrix, or Jacobian at the certified estimates, [n, p]. */
  readonly rows: readonly (readonly number[])[];
  readonly standardDeviations: readonly number[];
  /** Of the Fisher matrix scaled to unit diagonal. */
  readonly condition: number | null;
}

// Source: NIST/ITL Statistical Reference Datasets (StRD). With Gaussian noise of known variance s^2 the Fisher matrix of a regression is
// J^T J/s^2, so that the marginalised error of a parameter is exactly the certified standard deviation of its estimate.
const { sets } = readData('nist-regression') as { readonly sets: readonly Regression[] };

/** The regression as a study on disk: a covariance without realisations, exact derivatives, one per column. */
function studyFolder({ name, noiseVariance, rows }: Regression): string {
  const size = rows.length;
  const parameters = rows[0]!.map((_, k) => `b${String(k)}`);
  const covariance = Array.from({ length: size * size }, (_, k) => (k % (size + 1) === 0 ? noiseVariance : 0));
  return writeStudy(
    new Map<string, string | { shape: number[]; values: number[] }>([
      [
        'study.yaml',
        `format: 1\ntitle: ${name}\nparameters:\n${parameters.map((one) => `  - {name: ${one}, fiducial: 0}\n`).join('')}combinations:\n  - {name: fit, probes: [response]}\nbaseline: fit\n`,
      ],
      [
        'runs/fit/run.yaml',
        `format: 1\nkind: moments\nvector:\n  - {probe: response, block: all, size: ${String(size)}}\ncovariance: covariance.npy\nderivatives:\n${parameters.map((one) => `  ${one}: {exact: ${one}.npy}\n`).join('')}`,
      ],
      ['runs/fit/covariance.npy', { shape: [size, size], values: covariance }],
      ...parameters.map((one, k): [string, { shape: number[]; values: number[] }] => [
        `runs/fit/${one}.npy`,
        { shape: [size], values: rows.map((row) => row[k]!) },
      ]),
    ]),
  );
}

describe('marginalised errors are the certified standard deviations', () => {
  it.each(sets)('$name, $what', async (set) => {
    const study = await loadStudy(studyFolder(set));
    const { errors, condition } = forecast(study, { name: 'test', version: '0' }).combinations.fit!;
    const scaled = condition.corrected!;
    if (set.condition !== null) expect(scaled / set.condition).toBeCloseTo(1, 1);
    set.standardDeviations.forEach((certified, k) => {
      const { corrected, raw, status } = errors[`b${String(k)}`]!.marginalised;
      // Forming and inverting F loses the digits of its scaled condition number (backward error of Cholesky, Higham 2002, theorem 10.3, from
      // memory; ten times for the sums behind F); NIST prints 15 digits of the linear sets and 11 of the nonlinear ones.
      const printed = set.condition === null ? 9.5 : 14;
      expect(digits(corrected!, certified)).toBeGreaterThan(Math.min(printed, 15 - Math.log10(scaled)));
      expect(raw).toBe(corrected);
      expect(status).toBe('settled');
    });
  });

  it('a Fisher matrix of condition 1e14 and more has no inverse that could be trusted', async () => {
    // Powers of x up to 12 on 0..12: the scaled condition is near 1e15.
    const rows = Array.from({ length: 13 }, (_, x) => Array.from({ length: 13 }, (_unused, k) => (x + 1) ** k));
    const set = { name: 'Powers', what: '', noiseVariance: 1, rows, standardDeviations: [], condition: null };
    const { errors } = forecast(await loadStudy(studyFolder(set)), { name: 'test', version: '0' }).combinations.fit!;
    expect(errors.b3!.marginalised).toMatchObject({ corrected: null, status: 'undetermined' });
    expect(errors.b3!.marginalised.why).toContain('condition');
    expect(errors.b3!.fixed.status).toBe('settled');
  });
});
