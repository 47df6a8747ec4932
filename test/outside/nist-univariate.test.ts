import { describe, expect, it } from 'vitest';
import { momentsOf } from '../../src/linalg/gram.js';
import { memoryRows } from '../fixtures/memory-study.js';
import { digits, readData } from './read-data.js';

interface Univariate {
  readonly name: string;
  readonly values: readonly number[];
  readonly mean: number;
  readonly standardDeviation: number;
}

// Source: NIST/ITL Statistical Reference Datasets (StRD), univariate summary statistics.
const { sets } = readData('nist-univariate') as { readonly sets: readonly Univariate[] };

/** Best that any reader of doubles can do, since the data are rounded: exact rationals on the rounded data. */
const reachable: Readonly<Record<string, number>> = { NumAcc3: 9.4, NumAcc4: 8.2 };

describe.each(sets)('$name', ({ name, values, mean, standardDeviation }) => {
  const least = Math.min(14, (reachable[name] ?? 15.2) - 0.1);

  it('has its certified mean and standard deviation', () => {
    const moments = momentsOf(memoryRows(Float64Array.from(values), 1));
    expect(digits(moments.mean[0]!, mean)).toBeGreaterThan(14);
    expect(digits(Math.sqrt(moments.covariance.data[0]!), standardDeviation)).toBeGreaterThan(least);
  });

  it('has them beside another column, too, and wherever the chunks end', () => {
    const repeated = Float64Array.from(values.flatMap((value, k) => [Math.sin(k), value]));
    const { covariance } = momentsOf(memoryRows(repeated, 2));
    expect(digits(Math.sqrt(covariance.data[3]!), standardDeviation)).toBeGreaterThan(least);
  });
});

it('NumAcc4 defeats the sum of squares less the square of the sum, so that these checks can fail', () => {
  const { values } = sets.find(({ name }) => name === 'NumAcc4')!;
  const sum = values.reduce((total, value) => total + value, 0);
  const squares = values.reduce((total, value) => total + value * value, 0);
  const naive = (squares - (sum * sum) / values.length) / (values.length - 1);
  expect(naive < 0 || digits(Math.sqrt(naive), 0.1) < 1).toBe(true);
});

interface Iris {
  readonly rows: readonly (readonly (number | string)[])[];
  readonly reference: Readonly<Record<string, { readonly n: number; readonly covariance: readonly (readonly string[])[] }>>;
}

// Source: Fisher 1936, Annals of Eugenics 7, 179; covariances in exact rationals.
const iris = readData('iris') as Iris;

it.each(Object.keys(iris.reference))('the covariance of Iris %s is the exact one', (species) => {
  const { n, covariance } = iris.reference[species]!;
  const rows = iris.rows.filter((row) => row[4] === species).map((row) => row.slice(0, 4).map(Number));
  expect(rows).toHaveLength(n);
  const moments = momentsOf(memoryRows(Float64Array.from(rows.flat()), 4));
  covariance.forEach((line, i) => {
    line.forEach((exact, j) => {
      expect(digits(moments.covariance.data[i * 4 + j]!, Number(exact))).toBeGreaterThan(13);
    });
  });
});
