import type { Estimate } from '../results/schema.js';
import { judge } from './status.js';
import { z68, z95TwoSided } from './thresholds.js';

/** An error or a ratio of errors before it is judged; all in logarithms. */
export interface Measured {
  readonly assessable: boolean;
  readonly logRaw: number | null;
  readonly logCorrected: number | null;
  readonly varianceDerivatives: number | null;
  readonly varianceCovariance: number | null;
  /** Mean deviation of the log that the inverse of a noisy covariance leaves (inversion-bias). */
  readonly bias: number;
  readonly noisy: boolean;
  readonly logLimit: number | null;
  readonly logSplit: number | null;
  readonly reason: string;
  readonly derivativeRealisationsNeeded: number | null;
}

/**
 * The estimate with its standard error, intervals and status. Total = derivative part, covariance part and what the precision factor
 * leaves in an error, in quadrature: the first two come from different realisations, or nearly so, and none alone covers.
 * Intervals are exp(log corrected -+ z SE).
 */
export function estimateOf(measured: Measured, tolerance: number): Estimate {
  const { logCorrected, logRaw, varianceDerivatives, varianceCovariance } = measured;
  const known = logCorrected !== null && varianceDerivatives !== null && varianceCovariance !== null;
  const standardError = known ? Math.sqrt(varianceDerivatives + varianceCovariance + measured.bias ** 2) : null;
  const views = measured.noisy
    ? [
        { name: 'limit of the fitted curve', log: measured.logLimit },
        { name: 'split estimate', log: measured.logSplit },
      ]
    : [];
  const { status, why } = judge({ ...measured, standardError, views, tolerance });
  const corrected = exp(logCorrected);
  return {
    raw: exp(logRaw),
    corrected,
    standardError: corrected === null || standardError === null ? null : corrected * standardError,
    relativeStandardError: standardError,
    parts: {
      derivatives: known ? Math.sqrt(varianceDerivatives) : null,
      covariance: known ? Math.sqrt(varianceCovariance) : null,
      bias: known ? measured.bias : null,
    },
    interval: intervalOf(logCorrected, standardError, z68),
    interval95: intervalOf(logCorrected, standardError, z95TwoSided),
    limit: measured.noisy ? exp(measured.logLimit) : corrected,
    split: measured.noisy ? exp(measured.logSplit) : corrected,
    status,
    why,
    derivativeRealisationsNeeded: status === 'undetermined' ? measured.derivativeRealisationsNeeded : null,
  };
}

function exp(log: number | null): number | null {
  return log === null ? null : Math.exp(log);
}

function intervalOf(log: number | null, standardError: number | null, z: number): [number, number] | null {
  if (log === null || standardError === null) return null;
  return [Math.exp(log - z * standardError), Math.exp(log + z * standardError)];
}
