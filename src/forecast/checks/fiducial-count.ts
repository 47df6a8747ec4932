import { wishartDegrees } from '../precision.js';
import { fewFiducialsPerEntry } from '../thresholds.js';
import type { Check } from './check.js';

/** Whether each covariance rests on enough realisations: N_s against D. Fewer than D + 3 are refused before this. */
export const fiducialCount: Check = ({ combined }) =>
  combined.flatMap(({ combination, parts, active }) =>
    parts.map((part) => {
      const entries = part.entries.length;
      const { realisations } = part.covariance;
      const id = `fiducial-count-${combination.name}-${part.suite.name}`;
      const where = `combination ${combination.name}, suite ${part.suite.name}`;
      if (realisations === null) {
        return {
          id,
          level: 'note',
          message: `The covariance of ${String(entries)} entries was given without a number of realisations: no precision factor is applied, and its noise is not in the intervals.`,
          where,
        } as const;
      }
      const share = 1 / Math.sqrt(2 * wishartDegrees(realisations, entries, active.length));
      const size = `${String(realisations)} fiducial realisations for ${String(entries)} entries`;
      const effect = `for Gaussian data the covariance alone leaves each marginalised error uncertain by ${(100 * share).toFixed(1)} %`;
      return realisations < fewFiducialsPerEntry * entries
        ? ({ id, level: 'warning', message: `${size}: fewer than twice as many; ${effect}.`, where } as const)
        : ({ id, level: 'ok', message: `${size}: ${effect}.`, where } as const);
    }),
  );
