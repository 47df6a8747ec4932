import type { Results } from '../results/schema.js';
import type { Combined } from './combined.js';
import { entryShape } from './entry-shape.js';
import { distancesOf, kurtosisScore } from './mahalanobis.js';
import type { Part } from './part.js';
import { z95TwoSided } from './thresholds.js';

type Gaussianity = NonNullable<Results['gaussianity']>[number];

/** Share of realisations that Gaussian data has beyond the distance that is counted. */
const counted = 0.01;
/** Chance that Gaussian data shows any outlier at all: one study in twenty. */
const falseAlarm = 0.05;

/** One entry for each suite: over the part that has the most entries there. */
export function gaussianityOf(combined: readonly Combined[]): Gaussianity[] {
  const parts = combined.flatMap((one) => one.parts.map((part) => ({ part, combination: one.combination.name })));
  const suites = [...new Set(parts.map(({ part }) => part.suite.name))];
  return suites.flatMap((suite) => {
    const own = parts.filter(({ part }) => part.suite.name === suite);
    const largest = own.reduce((best, one) => (one.part.entries.length > best.part.entries.length ? one : best));
    return describe(largest.part, largest.combination);
  });
}

function describe(part: Part, combination: string): readonly Gaussianity[] {
  const distances = distancesOf(part);
  const shape = shapeOf(part);
  if (distances === null || shape === null) return [];
  const count = distances.squares.length;
  const entries = part.entries.length;
  const names = new Map([...part.suite.fiducialSeeds].map(([key, number]) => [number, String(key)]));
  const tails = Array.from(distances.tails);
  return [
    {
      suite: part.suite.name,
      combination,
      entries,
      realisations: count,
      kurtosisScore: kurtosisScore(distances, entries),
      beyond: { share: counted, count: tails.filter((tail) => tail < counted).length, expected: counted * count },
      outliers: tails
        .map((tail, row) => ({ tail, row }))
        .filter(({ tail }) => tail < falseAlarm / count)
        .sort((a, b) => a.tail - b.tail)
        .map(({ tail, row }) => ({
          realisation: names.get(distances.seeds[row]!) ?? String(row),
          square: distances.squares[row]!,
          tail,
        })),
      entryShape: shape,
    },
  ];
}

function shapeOf(part: Part): Gaussianity['entryShape'] | null {
  const shape = entryShape(part);
  if (shape === null) return null;
  const { skewness, kurtosis, realisations } = shape;
  const worst = (values: Float64Array, error: number) => {
    let place = 0;
    values.forEach((value, i) => {
      if (Math.abs(value) > Math.abs(values[place]!)) place = i;
    });
    return { entry: entryName(part, place), value: values[place]!, score: values[place]! / error };
  };
  const errors = { skewness: Math.sqrt(6 / realisations), kurtosis: Math.sqrt(24 / realisations) };
  const limit = scoreLimit(2 * skewness.length);
  let beyond = 0;
  skewness.forEach((value, i) => {
    if (Math.abs(value) > limit * errors.skewness || Math.abs(kurtosis[i]!) > limit * errors.kurtosis) beyond += 1;
  });
  return { skewness: worst(skewness, errors.skewness), kurtosis: worst(kurtosis, errors.kurtosis), beyond };
}

/**
 * Score that the largest of `tests` normal scores exceeds in one study in twenty: the two-sided normal quantile of
 * 0.05/tests (Bonferroni), from the tail expansion z = sqrt(-2 ln q - ln(-2 ln q) - ln 2 pi), q the one-sided tail, improved by one
 * step on ln of Mills' ratio. Good to 1 % for q < 0.025, which is all that a limit needs. Source: de Haan & Ferreira 2006 (from memory).
 */
export function scoreLimit(tests: number): number {
  const tail = falseAlarm / (2 * tests);
  if (tests <= 1) return z95TwoSided;
  const target = -2 * Math.log(tail) - Math.log(2 * Math.PI);
  let z = Math.sqrt(target);
  // ln q = -z^2/2 - ln z - ln(2 pi)/2 + ln(1 - 1/z^2 + 3/z^4): solved by substitution.
  for (let k = 0; k < 50; k += 1) z = Math.sqrt(target - 2 * Math.log(z) + 2 * Math.log(1 - 1 / z ** 2 + 3 / z ** 4));
  return z;
}

function entryName(part: Part, place: number): string {
  const { column } = part.entries[place]!;
  const at = column.coordinate === null ? '' : ` at ${column.coordinate.name} = ${String(column.coordinate.value)}`;
  return `${column.probe}, ${column.block}${at}`;
}
