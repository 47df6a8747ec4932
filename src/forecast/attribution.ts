import type { Small } from '../linalg/small.js';
import { eigen, unitDiagonal } from '../linalg/small.js';
import type { Combined } from './combined.js';
import { quantityOf, restricted, whole } from './combined.js';
import { solve } from './log-errors.js';

/** Where the marginalised gain of one parameter comes from, as natural logarithms that add up. */
export interface Shares {
  readonly total: number;
  /** log of the fixed gain: a sharper response. */
  readonly response: number;
  /** log of the baseline's dilution over the combination's: degeneracies that break. */
  readonly degeneracy: number;
}

/**
 * log(marginalised gain) = log(fixed gain) + log(dilution_baseline/dilution_combination), dilution = marginalised/fixed.
 * Exact, on the corrected values; null where one of the four errors does not exist.
 */
export function gainShares(baseline: Combined, combination: Combined, parameter: number): Shares | null {
  const value = (combined: Combined, kind: 'marginalised' | 'fixed'): number | null => {
    const quantity = quantityOf(combined, parameter, kind);
    const { corrected } = whole(combined);
    return quantity === null || corrected === null ? null : (corrected.logs[quantity] ?? null);
  };
  const before = { marginalised: value(baseline, 'marginalised'), fixed: value(baseline, 'fixed') };
  const after = { marginalised: value(combination, 'marginalised'), fixed: value(combination, 'fixed') };
  if (before.marginalised === null || before.fixed === null || after.marginalised === null || after.fixed === null) return null;
  const total = before.marginalised - after.marginalised;
  const response = before.fixed - after.fixed;
  return { total, response, degeneracy: total - response };
}

/**
 * The marginalised error of a parameter with one other parameter fixed, for each other one; null where it does not exist.
 * Fixing a parameter deletes its row and column of F (priors included).
 */
export function errorsWithOneFixed(combined: Combined, parameter: number): ReadonlyMap<number, number | null> {
  const { corrected } = whole(combined);
  const others = combined.active.filter((other) => other !== parameter);
  if (corrected === null || !combined.active.includes(parameter)) return new Map(others.map((other) => [other, null]));
  return new Map(
    others.map((fixed) => {
      const kept = combined.active.filter((a) => a !== fixed);
      const places = kept.map((a) => combined.active.indexOf(a));
      const { logs } = solve(restricted(corrected.fisher, places));
      const log = logs[2 * kept.indexOf(parameter)] ?? null;
      return [fixed, log === null ? null : Math.exp(log)];
    }),
  );
}

/** A direction in parameter space: its error and its components, both in units of the errors that the parameters are measured in. */
export interface Direction {
  readonly error: number;
  readonly components: readonly number[];
}

/**
 * Directions from best to worst determined: eigenvectors of the covariance in units of the given errors (the baseline's
 * marginalised ones, so that an error of 1 is the baseline's own along an axis). null where there is no covariance.
 */
export function directions(combined: Combined, units: readonly number[]): readonly Direction[] | null {
  const { corrected } = whole(combined);
  if (corrected?.inversion.kind !== 'inverse') return null;
  const { data, size } = corrected.inversion.inverse;
  const scaled: Small = { size, data: data.map((value, k) => value / (units[Math.floor(k / size)]! * units[k % size]!)) };
  const { values, vectors } = eigen(scaled);
  return Array.from(values, (value, k) => ({
    error: Math.sqrt(Math.max(0, value)),
    components: signed(Array.from({ length: size }, (_, i) => vectors.data[i * size + k]!)),
  }));
}

/** An eigenvector has no sign: the largest component is made positive. */
function signed(components: readonly number[]): readonly number[] {
  const largest = components.reduce((best, value) => (Math.abs(value) > Math.abs(best) ? value : best), 0);
  return components.map((value) => (largest < 0 ? -value : value));
}

/** Area of the joint region of two parameters: sqrt(det C_2x2), up to the constant that all share; null where it does not exist. */
export function pairArea(combined: Combined, a: number, b: number): number | null {
  const { corrected } = whole(combined);
  if (corrected?.inversion.kind !== 'inverse') return null;
  const places = [combined.active.indexOf(a), combined.active.indexOf(b)];
  if (places.some((place) => place < 0)) return null;
  const pair = restricted(corrected.inversion.inverse, places);
  const unit = unitDiagonal(pair);
  if (unit === null) return null;
  const correlation = unit.scaled.data[1]!;
  return unit.scale[0]! * unit.scale[1]! * Math.sqrt(Math.max(0, 1 - correlation * correlation));
}
