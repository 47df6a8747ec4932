import { describe, expect, it } from 'vitest';
import { quantityOf, whole } from '../../src/forecast/combined.js';
import { jackknifeVariance } from '../../src/forecast/jackknife.js';
import type { Study } from '../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { combinedOf, cosine, deviationOf, meanOf, normalRows, range, seededRealisations, withoutSeed } from './seeded-study.js';

const size = 5;

/** Two parameters with seeds of their own in suite one; a second suite that knows the first of them only. */
function studyOf(first: readonly number[], second: readonly number[]): Study {
  const noise = (salt: number) => ({ shared: 0.3, own: 0.2, salt });
  const per = (seeds: readonly number[], a: number, columns: number) =>
    ({ kind: 'per realisation', realisations: seededRealisations(seeds, columns, (i) => cosine(i, a), noise(a)) }) as const;
  const far = normalRows(80, 2, 5);
  return memoryStudy({
    parameters: [parameter('p0'), parameter('p1'), parameter('p2', { prior: 0.1 }), parameter('p3')],
    combinations: [combination('base', ['a']), combination('joint', ['a', 'b'])],
    runs: [
      ensembleRun('one', columnsOf('a', size), realisations(normalRows(90, size, 4), size), { p0: per(first, 0, size), p1: per(second, 1, size), p2: { kind: 'insensitive' }, p3: { kind: 'insensitive' } }, 'x'),
      ensembleRun('two', columnsOf('b', 2), realisations(far, 2), { p0: per(range(12, 700), 0, 2), p1: { kind: 'insensitive' }, p2: { kind: 'insensitive' }, p3: { kind: 'insensitive' } }, 'y'),
    ],
    scan: { coordinate: 'x', keep: 'below', at: [] },
  });
}

const study = studyOf(range(14), range(9, 7));
const joint = combinedOf(study, 'joint');

describe('a combination', () => {
  it('has the parameters that respond or have a prior', () => {
    expect(joint.active).toEqual([0, 1, 2]);
    expect(quantityOf(joint, 1, 'marginalised')).toBe(2);
    expect(quantityOf(joint, 2, 'fixed')).toBe(5);
    expect(quantityOf(joint, 3, 'fixed')).toBeNull();
    expect(whole(joint).entries).toBe(7);
  });

  it('has replicates that are the log errors without each realisation, by suite', () => {
    for (const [suite, seeds] of [['x', range(16)], ['y', range(12, 700)]] as const) {
      const replicates = whole(joint).replicates.get(suite)!;
      const numbers = joint.parts.find((part) => part.suite.name === suite)!.suite.derivativeSeeds;
      for (const seed of seeds) {
        const without = whole(combinedOf(withoutSeed(study, seed), 'joint')).corrected!.logs;
        without.forEach((log, q) => {
          expect(replicates.values[numbers.get(seed)! * replicates.quantities + q]).toBeCloseTo(log!, 11);
        });
      }
    }
  });

  it('weighs a realisation by (n - 1)/n, n of the shortest list that has it', () => {
    const { weights } = whole(joint).replicates.get('x')!;
    const numbers = joint.parts[0]!.suite.derivativeSeeds;
    // p0 has seeds 0 to 13, p1 7 to 15.
    expect([3, 7, 13, 15].map((seed) => weights[numbers.get(seed)!])).toEqual([13 / 14, 8 / 9, 8 / 9, 8 / 9]);
    expect(Array.from(whole(joint).replicates.get('y')!.weights)).toEqual(new Array<number>(12).fill(11 / 12));
  });

  it('has no replicates that count for a suite without noise, and none for a suite it does not use', () => {
    expect([...whole(combinedOf(study, 'base')).replicates.keys()]).toEqual(['x']);
  });
});

describe('the jackknife of a log error', () => {
  it('is its scatter over studies, where noise is small', () => {
    const studies = 150;
    const made = range(studies, 1).map((k) => combinedOf(studyOf(range(14, 1000 * k), range(9, 1000 * k + 7)), 'base'));
    [0, 1, 2, 3].forEach((q) => {
      const logs = made.map((one) => whole(one).corrected!.logs[q]!);
      const variances = made.map((one) => jackknifeVariance(whole(one).replicates.get('x')!, q, null));
      // The covariance is the same in all. Chi-square of 149: 1 -+ 3.29 sqrt(2/149) = 38 %; the jackknife is a few percent too large (Efron & Stein).
      const ratio = deviationOf(logs) ** 2 / meanOf(variances);
      expect(ratio).toBeGreaterThan(0.55);
      expect(ratio).toBeLessThan(1.38);
    });
  });
});
