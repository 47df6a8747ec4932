import { describe, expect, it } from 'vitest';
import { cancellation } from '../../../src/forecast/checks/cancellation.js';
import type { Check, CheckInput } from '../../../src/forecast/checks/check.js';
import { gaussianity } from '../../../src/forecast/checks/gaussianity.js';
import { truncation } from '../../../src/forecast/checks/truncation.js';
import { forecast } from '../../../src/forecast/forecast.js';
import type { CheckResult } from '../../../src/results/schema.js';
import type { GaussianModel } from '../../fixtures/gaussian-study.js';
import { gaussianStudy } from '../../fixtures/gaussian-study.js';

const model: GaussianModel = {
  entries: [4, 4],
  parameters: 2,
  fiducials: 400,
  derivatives: 40,
  derivativeNoise: 0.1,
  response: (entry, parameter) => Math.cos((entry + 1) * (0.4 + parameter)),
  rho: 0.2,
  commonNoise: 0,
};

function judged(check: Check, measured: CheckInput['measured']): readonly CheckResult[] {
  return check({ study: gaussianStudy(model, 1), suites: [], combined: [], measured });
}

describe('the distances of the realisations', () => {
  const levels = (lognormal: number, seeds: number): readonly string[] =>
    Array.from({ length: seeds }, (_, k) => {
      const study = gaussianStudy({ ...model, lognormal }, 700 + k);
      const { gaussianity: found } = forecast(study, { name: 'test', version: '0' });
      return judged(gaussianity, { gaussianity: found })[0]!.level;
    });

  it('raise few false alarms on Gaussian data', () => {
    // Three tests at about 2.5 %, 0.1 % and 5 % each: 8 % of 60 studies, and the binomial bound of one in a thousand above it.
    expect(levels(0, 60).filter((level) => level === 'warning').length).toBeLessThanOrEqual(0.08 * 60 + 3.09 * Math.sqrt(60 * 0.08 * 0.92));
  });

  it('see lognormal tails in every study', () => {
    expect(new Set(levels(0.8, 10))).toEqual(new Set(['warning']));
  });

  it('name the realisation that is an outlier, and say how many chance allows', () => {
    const study = gaussianStudy(model, 3);
    const run = study.runs[0]!;
    if (run.data.kind !== 'ensemble') throw new Error('no ensemble');
    const { rows } = run.data.fiducial;
    const data = Float64Array.from(rows.read(0, rows.rows));
    for (let i = 0; i < 8; i += 1) data[17 * 8 + i] = 12;
    const far = { ...run, data: { ...run.data, fiducial: { ...run.data.fiducial, rows: { ...rows, read: (start: number, count: number) => data.slice(start * 8, (start + count) * 8) } } } };
    const { gaussianity: found } = forecast({ ...study, runs: [far] }, { name: 'test', version: '0' });
    expect(found![0]!.outliers.map(({ realisation }) => realisation)).toContain('#17');
    expect(judged(gaussianity, { gaussianity: found })[0]!.message).toMatch(/Outlying: #17.*\(Gaussian data would show one in one study of twenty\)/);
  });
});

describe('the truncation of a derivative', () => {
  const test = { run: 'r', parameter: 'p0', standardError: 0.01, realisations: 50 } as const;

  it('matters where it is measured and large', () => {
    expect(judged(truncation, { derivativeTests: [{ ...test, kind: 'step size', share: 0.08 }] })[0]).toMatchObject({ level: 'warning' });
    expect(judged(truncation, { derivativeTests: [{ ...test, kind: 'step size', share: 0.04 }] })[0]).toMatchObject({ level: 'ok' });
    expect(judged(truncation, { derivativeTests: [{ ...test, kind: 'step size', share: 0.08, standardError: 0.05 }] })[0]).toMatchObject({ level: 'ok' });
    expect(judged(truncation, { derivativeTests: [{ ...test, kind: 'curvature', share: -0.2 }] })[0]).toMatchObject({ level: 'note' });
  });

  it('is given with its own error and a real minus sign', () => {
    expect(judged(truncation, { derivativeTests: [{ ...test, kind: 'one-sided', share: -0.031 }] })[0]!.message).toBe(
      'A one-sided difference from the fiducial would differ from the central one by \u22123.1 % \u00b1 1.0 % of the response.',
    );
  });
});

describe('errors that rest on cancellations', () => {
  const values = (first: number, without: number) => ({ marginalised: [first, first, without], fixed: [first, first, first] });
  const measured = (without: number) => ({
    smallestDirections: { joint: { condition: 5e7, removed: [0, 1, 2], errors: { p0: values(1, without), p1: values(1, 1) } } },
  });

  it('are warned of by name', () => {
    expect(judged(cancellation, measured(1.3))).toEqual([
      {
        id: 'cancellation-joint',
        level: 'warning',
        message: 'The correlation matrix of the data has condition number 5.0e7; without its 2 smallest directions the errors move: p0 by 30 %. They rest on cancellations that must be real to count.',
        where: 'combination joint',
      },
    ]);
    expect(judged(cancellation, measured(1.05))[0]!.level).toBe('ok');
  });

  it('are not sought where no direction of the data is small', () => {
    const { smallestDirections } = measured(1.3);
    const even = { joint: { ...smallestDirections.joint, condition: 1.8 } };
    expect(judged(cancellation, { smallestDirections: even })[0]).toMatchObject({ level: 'ok' });
  });
});
