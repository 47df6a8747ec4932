import { inverse, Matrix as Dense } from 'ml-matrix';
import { forecast } from '../../src/forecast/forecast.js';
import { z95OneSided } from '../../src/forecast/thresholds.js';
import type { Estimate, Improvement, Results } from '../../src/results/schema.js';
import type { GaussianModel } from '../fixtures/gaussian-study.js';
import { gaussianStudy, trueFisher } from '../fixtures/gaussian-study.js';

/** What one seeded study said about the first parameter, beside the truth. One parameter a study: trials are independent. */
export interface Trial {
  readonly results: Results;
  readonly error: Estimate;
  readonly gain: Improvement;
  readonly trueError: number;
  readonly trueGain: number;
}

/** Runs `count` studies of a model from consecutive seeds. */
export function runTrials(model: GaussianModel, count: number, firstSeed: number): readonly Trial[] {
  const base = marginalised(trueFisher(model, model.entries[0]));
  const joint = marginalised(trueFisher(model, model.entries[0] + model.entries[1]));
  return Array.from({ length: count }, (_, k) => {
    const results = forecast(gaussianStudy(model, firstSeed + k), { name: 'trial', version: '0' });
    return {
      results,
      error: results.combinations.joint!.errors.p0!.marginalised,
      gain: results.improvements.joint!.p0!.marginalised,
      trueError: joint,
      trueGain: base / joint,
    };
  });
}

function marginalised(fisher: number[][]): number {
  return Math.sqrt(inverse(new Dense(fisher)).get(0, 0));
}

/** Whether the 68.3 % interval holds the truth. */
export function covers({ interval }: Estimate, truth: number): boolean {
  return interval !== null && interval[0] <= truth && truth <= interval[1];
}

export function within({ corrected }: Estimate, truth: number, tolerance: number): boolean {
  return corrected !== null && Math.abs(Math.log(corrected / truth)) <= Math.log(1 + tolerance);
}

/** A claim exactly at the truth is false by a hair: it may be supported at most 5 % of the time. */
export function falselySupported({ gain, trueGain }: Trial): boolean {
  const { corrected, relativeStandardError } = gain;
  if (corrected === null || relativeStandardError === null) return false;
  return Math.log(corrected / trueGain) >= z95OneSided * relativeStandardError;
}

export function reliable({ status }: Estimate): boolean {
  return status === 'settled' || status === 'correctable';
}

/**
 * Bounds that a count of `n` independent trials stays in, but for one test in a thousand, if its probability lies between
 * `low` and `high`: normal approximation of the binomial law, z = 3.09 (Abramowitz & Stegun 1964, table 26.1, from memory).
 */
export function binomialBounds(n: number, low: number, high: number): readonly [number, number] {
  const z = 3.09;
  return [n * low - z * Math.sqrt(n * low * (1 - low)), n * high + z * Math.sqrt(n * high * (1 - high))];
}
