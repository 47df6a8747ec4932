import { describe, expect, it } from 'vitest';
import { inflationFactors, matchingPower } from '../../src/forecast/inflation.js';
import { precisionFactor } from '../../src/forecast/precision.js';
import { derivativeWeights, firstDerivativeWeights } from '../../src/forecast/stencil.js';
import { ellipseDeltaChiSquare, z95OneSided, z95TwoSided } from '../../src/forecast/thresholds.js';
import { digits, readData } from './read-data.js';

interface Stencil {
  readonly nodes: readonly string[];
  readonly derivative: number;
  readonly weights: readonly string[];
}

function fraction(text: string): number {
  const [above = '', below = '1'] = text.split('/');
  return Number(above) / Number(below);
}

describe('finite-difference weights', () => {
  // Source: Fornberg 1988, Math. Comp. 51, 699, tables 1 and 3; all rows again in exact rationals.
  const { tables } = readData('finite-differences') as { readonly tables: readonly Stencil[] };

  it.each(tables)('of derivative $derivative on $nodes', ({ nodes, derivative, weights }) => {
    const computed = derivativeWeights(nodes.map(fraction), 0, derivative);
    const largest = Math.max(...weights.map((weight) => Math.abs(fraction(weight))));
    weights.forEach((weight, j) => {
      // A few units in the last place of the largest weight; high derivatives on many nodes cancel a digit or two.
      expect(Math.abs(computed[j]! - fraction(weight)) / largest).toBeLessThan(1e-13);
    });
  });

  it('two symmetric nodes give the central difference exactly', () => {
    expect([...firstDerivativeWeights([0.25, 0.75], 0.5)]).toEqual([-2, 2]);
  });
});

interface Factors {
  readonly n_s: number;
  readonly n_d: number;
  readonly n_p: number;
  readonly hartlap: string;
  readonly dodelsonSchneider: string;
  readonly percival2014_m1: string;
  readonly percival2022_m: string;
  readonly taylorJoachimi: string;
}

describe('factors of an estimated covariance', () => {
  // Source: the papers named in inflation.ts and precision.ts, formulas from memory; values in exact rationals.
  const { rows } = readData('covariance-factors') as { readonly rows: readonly Factors[] };

  it.each(rows)('N_s = $n_s, D = $n_d, p = $n_p', (row) => {
    const { n_s: realisations, n_d: entries, n_p: parameters } = row;
    expect(digits(precisionFactor(realisations, entries), Number(row.hartlap))).toBeGreaterThan(15);
    const factors = inflationFactors(realisations, entries, parameters)!;
    expect(digits(factors.taylorJoachimi, Number(row.taylorJoachimi))).toBeGreaterThan(15);
    expect(digits(factors.dodelsonSchneider, Number(row.dodelsonSchneider))).toBeGreaterThan(14.5);
    expect(digits(factors.percival2014, Number(row.percival2014_m1))).toBeGreaterThan(14.5);
    expect(digits(matchingPower(realisations, entries, parameters), Number(row.percival2022_m))).toBeGreaterThan(14.5);
  });
});

describe('thresholds', () => {
  it('are the quantiles of the normal law', () => {
    // Source: 40-digit arithmetic.
    expect(z95TwoSided).toBe(1.95996398454005424);
    expect(z95OneSided).toBe(1.64485362695147271);
  });

  it('of ellipses are -2 ln(1 - P), which tables round to 2.30 and 6.18', () => {
    const [one, two] = ellipseDeltaChiSquare.map(({ deltaChiSquare }) => deltaChiSquare);
    // P within one and two standard deviations of a normal law, 40-digit arithmetic.
    expect(digits(one!, -2 * Math.log(1 - 0.682689492137085897))).toBeGreaterThan(14);
    expect(digits(two!, -2 * Math.log(1 - 0.954499736103641585))).toBeGreaterThan(13);
    expect([one!.toFixed(2), two!.toFixed(2)]).toEqual(['2.30', '6.18']);
  });
});
