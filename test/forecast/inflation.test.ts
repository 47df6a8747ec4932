import { describe, expect, it } from 'vitest';
import { inflationFactors } from '../../src/forecast/inflation.js';
import { precisionFactor, wishartDegrees } from '../../src/forecast/precision.js';
import { deviationOf, meanOf, normalRows, range } from './seeded-study.js';

describe('factors on a variance', () => {
  it('are those by hand for 30 realisations, 5 entries and 2 parameters', () => {
    // Exact rationals: A = 1/252, B = 23/504, so 1 + 3 B = 191/168 and m1 = (191/168)/(1 + A + 3 B); m = 4 + (29 + 3 B)/(1 + 3 B).
    const scatter = 191 / 168;
    const factors = inflationFactors(30, 5, 2)!;
    expect(factors.taylorJoachimi).toBeCloseTo(29 / 26, 14);
    expect(factors.dodelsonSchneider).toBeCloseTo(scatter, 14);
    expect(factors.percival2014).toBeCloseTo(573 / 575, 14);
    expect(factors.percival2022).toBeCloseTo(29 / ((29 + 69 / 504) / scatter), 14);
  });

  it('all tend to 1 for many realisations, and grow with entries', () => {
    const many = inflationFactors(1e7, 20, 3)!;
    for (const factor of Object.values(many)) expect(factor).toBeCloseTo(1, 5);
    const few = inflationFactors(100, 20, 3)!;
    const longer = inflationFactors(100, 60, 3)!;
    expect(longer.dodelsonSchneider).toBeGreaterThan(few.dodelsonSchneider);
    expect(longer.taylorJoachimi).toBeGreaterThan(few.taylorJoachimi);
    expect(longer.percival2022!).toBeGreaterThan(few.percival2022!);
  });

  it('are 1 where entries are as many as parameters and analysis cannot choose', () => {
    const factors = inflationFactors(50, 4, 4)!;
    expect([factors.taylorJoachimi, factors.dodelsonSchneider]).toEqual([1, 1]);
  });

  it('do not exist up to D + 4 realisations', () => {
    expect(inflationFactors(14, 10, 2)).toBeNull();
    expect(inflationFactors(15, 10, 2)).not.toBeNull();
  });
});

describe('the precision factor', () => {
  it('is (N - D - 2)/(N - 1), and 1 for a known covariance', () => {
    expect(precisionFactor(101, 19)).toBeCloseTo(0.8, 15);
    expect(precisionFactor(null, 19)).toBe(1);
    expect(precisionFactor(50, 0)).toBeCloseTo(48 / 49, 15);
  });

  it('makes the mean of an inverse variance that of one over the variance', () => {
    const draws = 4000;
    const count = 12;
    const inverses = range(draws).map((k) => 1 / deviationOf(Array.from(normalRows(count, 1, 70_000 + k))) ** 2);
    // Four standard errors of the mean.
    expect(Math.abs(precisionFactor(count, 1) * meanOf(inverses) - 1)).toBeLessThan((4 * deviationOf(inverses)) / Math.sqrt(draws));
  });

  it('goes with N - 1 degrees of freedom for one entry and one parameter', () => {
    expect(wishartDegrees(50, 1, 1)).toBe(49);
    expect(wishartDegrees(50, 10, 3)).toBe(42);
  });
});
