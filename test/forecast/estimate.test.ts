import { describe, expect, it } from 'vitest';
import type { Measured } from '../../src/forecast/estimate.js';
import { estimateOf } from '../../src/forecast/estimate.js';
import { z95TwoSided } from '../../src/forecast/thresholds.js';

const measured: Measured = {
  assessable: true,
  logRaw: Math.log(1.9),
  logCorrected: Math.log(2),
  varianceDerivatives: 0.03 ** 2,
  varianceCovariance: 0.04 ** 2,
  bias: 0,
  noisy: true,
  logLimit: Math.log(2.05),
  logSplit: Math.log(2.1),
  reason: 'The reason.',
  derivativeRealisationsNeeded: 77,
};

describe('an estimate', () => {
  it('has both parts in quadrature, and intervals in the logarithm', () => {
    const estimate = estimateOf(measured, 0.25);
    expect(estimate.relativeStandardError).toBeCloseTo(0.05, 14);
    expect(estimate.standardError).toBeCloseTo(0.1, 14);
    expect(estimate.parts.derivatives).toBeCloseTo(0.03, 14);
    expect(estimate.parts.covariance).toBeCloseTo(0.04, 14);
    expect(estimate.interval![0]).toBeCloseTo(2 * Math.exp(-0.05), 14);
    expect(estimate.interval![1]).toBeCloseTo(2 * Math.exp(0.05), 14);
    expect(estimate.interval95![0]).toBeCloseTo(2 * Math.exp(-0.05 * z95TwoSided), 14);
    expect(estimate.interval95![1]).toBeCloseTo(2 * Math.exp(0.05 * z95TwoSided), 14);
    expect([estimate.raw, estimate.corrected, estimate.limit, estimate.split]).toEqual([1.9, 2, 2.05, 2.1].map((value) => expect.closeTo(value, 14) as number));
    expect(estimate.status).toBe('settled');
    expect(estimate.derivativeRealisationsNeeded).toBeNull();
  });

  it('counts a bias of known size as a third part, whatever its sign', () => {
    for (const bias of [0.12, -0.12]) {
      const estimate = estimateOf({ ...measured, bias }, 0.25);
      expect(estimate.relativeStandardError).toBeCloseTo(0.13, 14);
      expect(estimate.parts.bias).toBe(bias);
    }
  });

  it('without noise has one view only: its value', () => {
    const estimate = estimateOf({ ...measured, noisy: false, logLimit: null, logSplit: null, varianceDerivatives: 0 }, 0.25);
    expect(estimate.limit).toBe(estimate.corrected);
    expect(estimate.split).toBe(estimate.corrected);
    expect(estimate.parts).toEqual({ derivatives: 0, covariance: expect.closeTo(0.04, 14) as number, bias: 0 });
    expect(estimate.status).toBe('settled');
  });

  it('with noise and without a view is unsettled', () => {
    expect(estimateOf({ ...measured, logLimit: null }, 0.25)).toMatchObject({ limit: null, status: 'unsettled' });
    expect(estimateOf({ ...measured, logSplit: null }, 0.25)).toMatchObject({ split: null, status: 'unsettled' });
  });

  it('without a corrected value keeps the raw one and says how many realisations are needed', () => {
    expect(estimateOf({ ...measured, logCorrected: null }, 0.25)).toEqual({
      raw: expect.closeTo(1.9, 14) as number,
      corrected: null,
      standardError: null,
      relativeStandardError: null,
      parts: { derivatives: null, covariance: null, bias: null },
      interval: null,
      interval95: null,
      limit: expect.closeTo(2.05, 14) as number,
      split: expect.closeTo(2.1, 14) as number,
      status: 'undetermined',
      why: 'The reason.',
      derivativeRealisationsNeeded: 77,
    });
  });

  it('of data that were not assessable has no number of realisations', () => {
    const estimate = estimateOf({ ...measured, assessable: false, logCorrected: null }, 0.25);
    expect([estimate.status, estimate.derivativeRealisationsNeeded]).toEqual(['not assessable', null]);
  });

  it('that is known exactly has an interval of no width', () => {
    const estimate = estimateOf({ ...measured, varianceDerivatives: 0, varianceCovariance: 0 }, 0.25);
    expect(estimate.interval).toEqual([estimate.corrected, estimate.corrected]);
    expect(estimate.standardError).toBe(0);
  });
});
