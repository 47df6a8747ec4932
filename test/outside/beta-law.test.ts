import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { betaUpperTail, logGamma } from '../../src/forecast/beta-law.js';

interface Table {
  readonly beta: readonly { readonly a: string; readonly b: string; readonly cdf: string; readonly quantile: string }[];
  readonly mahalanobisBeta: {
    readonly rows: readonly { readonly n: number; readonly p: number; readonly cdf: string; readonly d2_inSample: string }[];
  };
}

// Source: 40-digit arithmetic; the Mahalanobis rows follow Gnanadesikan & Kettenring 1972.
const table = JSON.parse(readFileSync(new URL('./data/beta-law.json', import.meta.url), 'utf8')) as Table;

it.each(table.beta)('the Beta($a, $b) law has probability $cdf below $quantile', ({ a, b, cdf, quantile }) => {
  // The table prints 18 digits; where the density is steep the rounding of the quantile to a double alone costs some.
  expect(betaUpperTail(Number(quantile), Number(a), Number(b))).toBeCloseTo(1 - Number(cdf), 12);
});

it.each(table.mahalanobisBeta.rows)('a squared distance $d2_inSample has probability $cdf below it for N = $n, D = $p', (row) => {
  const { n, p, cdf, d2_inSample: square } = row;
  expect(betaUpperTail((n / (n - 1) ** 2) * Number(square), p / 2, (n - p - 1) / 2)).toBeCloseTo(1 - Number(cdf), 12);
});

it('the Gamma function of whole and half numbers is their closed form', () => {
  // Gamma(n) = (n - 1)!, Gamma(1/2) = sqrt(pi).
  expect(logGamma(1)).toBeCloseTo(0, 13);
  expect(logGamma(11) / Math.log(3_628_800)).toBeCloseTo(1, 14);
  expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.PI) / 2, 13);
});

it('keeps far tails: a Beta(1, b) tail is (1 - x)^b', () => {
  expect(Math.log(betaUpperTail(0.9, 1, 250)) / (250 * Math.log(0.1))).toBeCloseTo(1, 12);
});
