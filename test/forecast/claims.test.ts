import { describe, expect, it } from 'vitest';
import { verdictOf, verdictRules } from '../../src/forecast/claims.js';
import type { Measured } from '../../src/forecast/estimate.js';
import { estimateOf } from '../../src/forecast/estimate.js';
import { z95OneSided } from '../../src/forecast/thresholds.js';
import type { Estimate } from '../../src/results/schema.js';
import { verdictSchema } from '../../src/results/schema.js';
import type { Claim, ClaimTest } from '../../src/study/study.js';
import { gaussianStudy } from '../fixtures/gaussian-study.js';
import { gainClaim } from '../fixtures/memory-study.js';
import { cosine, forecastOf } from './seeded-study.js';

const tolerance = 0.1;

function estimate(value: number, standardError: number, changes: Partial<Measured> = {}): Estimate {
  const log = Math.log(value);
  const measured: Measured = {
    assessable: true,
    logRaw: log,
    logCorrected: log,
    varianceDerivatives: standardError ** 2,
    varianceCovariance: 0,
    bias: 0,
    noisy: false,
    logLimit: null,
    logSplit: null,
    reason: '',
    derivativeRealisationsNeeded: null,
    ...changes,
  };
  return estimateOf(measured, tolerance);
}

const atLeast = (threshold: number): ClaimTest => ({ kind: 'at least', threshold });
const atMost = (threshold: number): ClaimTest => ({ kind: 'at most', threshold });
const between = (low: number, high: number): ClaimTest => ({ kind: 'between', low, high });

describe('a verdict', () => {
  const precise = estimate(2, 0.02);
  const vague = estimate(2, 0.2);

  it('follows the side of the threshold where the value is far from it', () => {
    expect(verdictOf(precise, atLeast(1.8))).toBe('supported');
    expect(verdictOf(precise, atLeast(2.2))).toBe('contradicted');
    expect(verdictOf(precise, atMost(2.2))).toBe('supported');
    expect(verdictOf(precise, atMost(1.8))).toBe('contradicted');
    expect(verdictOf(precise, between(1.8, 2.2))).toBe('supported');
    expect(verdictOf(precise, between(2.2, 3))).toBe('contradicted');
    expect(verdictOf(precise, between(1, 1.8))).toBe('contradicted');
  });

  it('near the threshold is too close to call where the value is well determined, else not settled', () => {
    for (const test of [atLeast(1.99), atLeast(2.01), atMost(1.99), atMost(2.01), between(1.99, 3), between(1, 2.01), between(1.99, 2.01)]) {
      expect(verdictOf(precise, test)).toBe('too close to call');
      expect(verdictOf(vague, test)).toBe('not settled');
    }
  });

  it('can decide what is unsettled, where the threshold is far enough', () => {
    expect(vague.status).toBe('unsettled');
    expect(verdictOf(vague, atLeast(1.1))).toBe('supported');
    expect(verdictOf(vague, atMost(1.1))).toBe('contradicted');
  });

  it('is drawn at 1.645 standard errors of the logarithm', () => {
    const edge = Math.exp(z95OneSided * 0.02);
    expect(verdictOf(precise, atLeast((2 / edge) * (1 - 1e-12)))).toBe('supported');
    expect(verdictOf(precise, atLeast((2 / edge) * (1 + 1e-12)))).toBe('too close to call');
    expect(verdictOf(precise, atLeast(2 * edge * (1 - 1e-12)))).toBe('too close to call');
    expect(verdictOf(precise, atLeast(2 * edge * (1 + 1e-12)))).toBe('contradicted');
    expect(verdictOf(precise, atMost(2 * edge * (1 + 1e-12)))).toBe('supported');
    expect(verdictOf(precise, between(2 / edge / 1.001, 2 * edge * 1.001))).toBe('supported');
  });

  it('is not swayed by a bias that favours it, and never helped by one', () => {
    const flattered = estimate(2, 0.02, { bias: 0.05 });
    const edge = Math.exp(z95OneSided * 0.02 + 0.05);
    expect(verdictOf(flattered, atLeast((2 / edge) * (1 - 1e-12)))).toBe('supported');
    expect(verdictOf(flattered, atLeast((2 / edge) * (1 + 1e-12)))).not.toBe('supported');
    const modest = estimate(2, 0.02, { bias: -0.05 });
    expect(verdictOf(modest, atLeast((2 / Math.exp(z95OneSided * 0.02)) * (1 + 1e-12)))).not.toBe('supported');
    expect(verdictOf(modest, atLeast(2 * Math.exp(z95OneSided * 0.02) * (1 + 1e-12)))).not.toBe('contradicted');
  });

  it('of a value known exactly holds at the threshold itself', () => {
    const exact = estimate(2, 0);
    expect(verdictOf(exact, atLeast(2))).toBe('supported');
    expect(verdictOf(exact, atMost(2))).toBe('supported');
    expect(verdictOf(exact, atLeast(2.0000001))).toBe('contradicted');
  });

  it('is not settled without a value, not assessable without realisations', () => {
    expect(verdictOf(estimate(2, 0.02, { logCorrected: null }), atLeast(1))).toBe('not settled');
    expect(verdictOf(estimate(2, 0.02, { assessable: false, logCorrected: null }), atLeast(1))).toBe('not assessable');
  });

  it('has one rule for each word, in the order of the schema', () => {
    expect(verdictRules.map(({ verdict }) => verdict)).toEqual(verdictSchema.options);
  });
});

describe('the claims of a study', () => {
  const size: Claim = { ...gainClaim('p1', 'joint', 'base', 1), id: 'size', quantity: 'size', error: 'fixed', test: atMost(100) };
  const range: Claim = { ...gainClaim('p0', 'joint', 'base', 1), id: 'range', test: between(1000, 2000) };
  const study = gaussianStudy(
    {
      entries: [5, 5],
      parameters: 2,
      fiducials: 300,
      derivatives: 100,
      derivativeNoise: 0.2,
      response: cosine,
      rho: 0,
      commonNoise: 0,
      claims: [gainClaim('p0', 'joint', 'base', 1.001), size, range, gainClaim('p0', 'base', 'joint', 1)],
    },
    1,
  );
  const results = forecastOf(study);

  it('carry the estimate they were tested on', () => {
    const [gain, error, outside, backwards] = results.claims;
    const improvement = results.improvements.joint!.p0!.marginalised;
    expect(gain).toMatchObject({
      id: 'p0-joint',
      against: 'base',
      quantity: 'gain',
      test: 'at least',
      threshold: 1.001,
      verdict: 'supported',
      raw: improvement.raw,
      estimate: improvement.corrected,
      relativeStandardError: improvement.relativeStandardError,
      interval: improvement.interval,
      interval95: improvement.interval95,
      status: improvement.status,
      why: improvement.why,
    });
    expect(error).toMatchObject({ against: null, quantity: 'size', estimate: results.combinations.joint!.errors.p1!.fixed.corrected, verdict: 'supported' });
    expect(outside).toMatchObject({ threshold: [1000, 2000], verdict: 'contradicted' });
    expect(backwards!.estimate).toBeCloseTo(1 / improvement.corrected!, 14);
    expect(backwards!.relativeStandardError).toBeCloseTo(improvement.relativeStandardError!, 14);
    expect(backwards!.verdict).toBe('contradicted');
  });
});
