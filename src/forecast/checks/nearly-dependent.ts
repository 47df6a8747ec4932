import { chosen } from '../part.js';
import type { Check } from './check.js';

/**
 * Share of an entry's variance that the entries before it leave open, below which rounding of single-precision files shows.
 * Common practice, no source: 1e-8 leaves half of the digits of double precision and none of single precision.
 */
const smallestShare = 1e-8;

/** Entries that are almost a sum of others, as bins of a normalised histogram in single precision are: what they add is rounding. */
export const nearlyDependent: Check = ({ combined }) =>
  combined.flatMap(({ combination, parts }) =>
    parts.flatMap((part) => {
      const covariance = chosen(part.covariance.covariance, part.picks);
      const size = part.entries.length;
      const shares = part.entries.map((_, i) => part.factor.data[i * (size + 1)]! ** 2 / covariance.data[i * (size + 1)]!);
      const least = Math.min(...shares);
      if (least >= smallestShare) return [];
      const { run, index, column } = part.entries[shares.indexOf(least)]!;
      return [
        {
          id: `nearly-dependent-${combination.name}-${part.suite.name}`,
          level: 'warning',
          message: `Column ${String(index)} of run ${run.name} (${column.probe}, ${column.block}) is a sum of entries before it but for ${least.toExponential(1)} of its variance: what it adds is rounding. Leave it out (bins that add up to a constant are the usual cause).`,
          where: `combination ${combination.name}, suite ${part.suite.name}`,
        } as const,
      ];
    }),
  );
