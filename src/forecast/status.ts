import type { Status } from '../results/schema.js';
import { z95TwoSided } from './thresholds.js';

/** What a status is decided from. Logarithms throughout: differences of logs are relative differences. */
export interface Evidence {
  /** False where derivatives came without realisations. */
  readonly assessable: boolean;
  readonly logRaw: number | null;
  readonly logCorrected: number | null;
  /** Of the log, both parts in quadrature. */
  readonly standardError: number | null;
  /** The other two views, or null where there is no noise to view; a view that could not be had is 'missing'. */
  readonly views: readonly View[];
  readonly tolerance: number;
  /** Why there is no corrected value; used when there is none. */
  readonly reason: string;
}

interface View {
  readonly name: string;
  readonly log: number | null;
}

export interface Judgement {
  readonly status: Status;
  readonly why: string;
}

/** The table that defines the statuses; the report prints it. Source: methods, section 5. */
export const statusRules: readonly { readonly status: Status; readonly rule: string }[] = [
  {
    status: 'settled',
    rule: 'The corrected value is within the tolerance of the truth at 95 % confidence, the raw value differs from it by less than the tolerance, and the three views agree within the tolerance.',
  },
  { status: 'correctable', rule: 'As settled, but the raw value is off by more than the tolerance: quote the corrected one.' },
  { status: 'unsettled', rule: 'There is a value, but its uncertainty or the disagreement of the views exceeds the tolerance.' },
  { status: 'undetermined', rule: 'There is no value: the corrected Fisher matrix is not positive definite, or it is too close to singular for double precision.' },
  { status: 'not assessable', rule: 'The derivatives came without realisations, so their noise cannot be measured.' },
];

/** The status of one error or ratio, with the reason in a sentence. */
export function judge(evidence: Evidence): Judgement {
  const { logCorrected, logRaw, standardError, tolerance } = evidence;
  if (!evidence.assessable) {
    return { status: 'not assessable', why: 'The derivatives came without realisations: their noise cannot be measured.' };
  }
  if (logCorrected === null || standardError === null) return { status: 'undetermined', why: evidence.reason };
  const allowed = Math.log(1 + tolerance);
  const uncertainty = z95TwoSided * standardError;
  if (uncertainty > allowed) {
    return {
      status: 'unsettled',
      why: `The 95 % uncertainty is ${percent(Math.expm1(uncertainty))}, more than the tolerance of ${percent(tolerance)}.`,
    };
  }
  const astray = evidence.views.find(({ log }) => log === null || Math.abs(log - logCorrected) > allowed);
  if (astray !== undefined) return { status: 'unsettled', why: disagreement(astray, logCorrected, tolerance) };
  if (logRaw !== null && Math.abs(logRaw - logCorrected) <= allowed) {
    return {
      status: 'settled',
      why: `The 95 % uncertainty is ${percent(Math.expm1(uncertainty))} and the raw value is off by ${percent(relative(logRaw, logCorrected))}: both within the tolerance of ${percent(tolerance)}.`,
    };
  }
  const off = logRaw === null ? 'does not exist' : `is off by ${percent(relative(logRaw, logCorrected))}`;
  return { status: 'correctable', why: `The raw value ${off}; the corrected value is known to ${percent(Math.expm1(uncertainty))} at 95 %.` };
}

function disagreement(view: View, logCorrected: number, tolerance: number): string {
  if (view.log === null) return `The ${view.name} could not be had, so that the views cannot be compared.`;
  return `The ${view.name} differs from the corrected value by ${percent(relative(view.log, logCorrected))}, more than the tolerance of ${percent(tolerance)}.`;
}

function relative(a: number, b: number): number {
  return Math.expm1(Math.abs(a - b));
}

/** Two digits are enough for a percentage in a sentence. */
function percent(share: number): string {
  const value = 100 * share;
  if (value >= 1000) return 'more than 1000 %';
  if (value > 0 && value < 0.1) return 'less than 0.1 %';
  return `${value < 9.95 ? value.toFixed(1) : value.toFixed(0)} %`;
}
