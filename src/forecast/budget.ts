import { z95OneSided, z95TwoSided } from './thresholds.js';

/** What a budget is made from: one error or ratio as it stands, in logarithms. */
export interface Standing {
  readonly logRaw: number | null;
  readonly logCorrected: number | null;
  readonly varianceDerivatives: number;
  readonly varianceCovariance: number;
  /** Derivative realisations now, of the parameter that has the fewest; null where derivatives are exact. */
  readonly derivativeRealisations: number | null;
  /** nu = N_s - 1 - D + p now, and N_s; null where the covariance is known. */
  readonly fiducials: { readonly realisations: number; readonly degrees: number } | null;
}

/** Realisations to reach a goal; null where no number of that kind alone reaches it. */
export interface Budget {
  /** More derivative realisations only. */
  readonly derivatives: number | null;
  /** More fiducial realisations only. */
  readonly fiducials: number | null;
  /** Both, each part taking half of the allowed variance (or less, where it is below that already). */
  readonly both: { readonly derivatives: number; readonly fiducials: number } | null;
}

/**
 * Realisations for which the standard error of a log is at most `allowed`, by the program's own scaling laws:
 * derivative part V_d N/N' (a signal-dominated U-statistic; one dominated by noise falls faster, so that this asks for more rather
 * than fewer), covariance part V_c nu/nu'.
 * Tested by simulation: predicted from N/4, checked at N (test/calibration/budget.test.ts).
 */
export function budgetFor(standing: Standing, allowed: number): Budget {
  const { varianceDerivatives: vd, varianceCovariance: vc } = standing;
  const goal = allowed * allowed;
  const derivatives = (share: number): number | null => {
    const now = standing.derivativeRealisations;
    if (now === null) return vd <= share ? 0 : null;
    return share > 0 ? Math.max(now, Math.ceil((now * vd) / share)) : null;
  };
  const fiducials = (share: number): number | null => {
    if (standing.fiducials === null) return vc <= share ? 0 : null;
    const { realisations, degrees } = standing.fiducials;
    return share > 0 ? realisations + Math.max(0, Math.ceil((degrees * vc) / share - degrees)) : null;
  };
  const half = goal / 2;
  const shareD = vc < half ? goal - vc : half;
  const shareC = vd < half ? goal - vd : half;
  const bothD = derivatives(shareD);
  const bothC = fiducials(shareC);
  return {
    derivatives: derivatives(goal - vc),
    fiducials: fiducials(goal - vd),
    both: bothD === null || bothC === null ? null : { derivatives: bothD, fiducials: bothC },
  };
}

/** The standard error at which a value is within the tolerance of the truth at 95 %: log(1 + tol)/1.96. */
export function settledError(tolerance: number): number {
  return Math.log(1 + tolerance) / z95TwoSided;
}

/**
 * Derivative realisations for which the raw value is within the tolerance of the corrected one, so that it is settled and not only correctable:
 * the bias falls as 1/N. null where there is no bias to speak of, or no value.
 */
export function rawBudget(standing: Standing, tolerance: number): number | null {
  const { logRaw, logCorrected, derivativeRealisations: now } = standing;
  if (logRaw === null || logCorrected === null || now === null) return null;
  return Math.max(now, Math.ceil((now * Math.abs(logRaw - logCorrected)) / Math.log(1 + tolerance)));
}

/** The standard error at which a claim would be decided if the value stayed where it is: |log value - log threshold|/1.645. */
export function decidingError(logValue: number, logThreshold: number): number {
  return Math.abs(logValue - logThreshold) / z95OneSided;
}
