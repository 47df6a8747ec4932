import type { Estimate } from '../results/schema.js';
import type { Study } from '../study/study.js';
import type { AtCut, Combined } from './combined.js';
import { quantityOf, whole } from './combined.js';
import type { Convergence } from './convergence.js';
import { convergenceOf } from './convergence.js';
import type { Measured } from './estimate.js';
import { estimateOf } from './estimate.js';
import { covarianceVariance } from './influence.js';
import { jackknifeVariance } from './jackknife.js';
import type { LogErrors, Solved } from './log-errors.js';
import { realisationsNeeded } from './needed.js';
import { splitLogs } from './split.js';

export type ErrorKind = 'marginalised' | 'fixed';
export const errorKinds: readonly ErrorKind[] = ['marginalised', 'fixed'];

/** A combination with the other two views of its errors. */
export interface Assessed {
  readonly combined: Combined;
  readonly convergence: Convergence | null;
  readonly limits: LogErrors;
  readonly splits: LogErrors;
  /** Whether any derivative has noise. */
  readonly noisy: boolean;
  /** Lower bound on the realisations that an undetermined matrix needs. */
  readonly needed: number | null;
}

/** Adds the views of `methods`, section 5, to a combination. */
export function assess(study: Study, combined: Combined): Assessed {
  const noisy = combined.parts.some((part) => part.strands.length > 0);
  const convergence = convergenceOf(combined);
  const nothing = combined.active.flatMap(() => [null, null]);
  return {
    combined,
    convergence,
    limits: convergence === null ? nothing : convergence.fits.map((fit) => fit?.logLimit ?? null),
    splits: noisy && combined.assessable ? splitLogs(combined, `${study.digest} ${combined.combination.name}`) : nothing,
    noisy,
    needed: realisationsNeeded(combined),
  };
}

/** A combination of which only values and uncertainties are wanted, not statuses. */
export function withoutViews(combined: Combined): Assessed {
  const nothing = combined.active.flatMap(() => [null, null]);
  return { combined, convergence: null, limits: nothing, splits: nothing, noisy: false, needed: null };
}

/** The error of one parameter in one combination. */
export function errorOf(study: Study, assessed: Assessed, parameter: number, kind: ErrorKind): Estimate {
  const { combined } = assessed;
  const q = quantityOf(combined, parameter, kind);
  const at = whole(combined);
  return estimateOf(
    {
      ...variances(q === null ? null : { at, q }, null),
      assessable: combined.assessable,
      logRaw: valueOf(at.raw, q),
      logCorrected: valueOf(at.corrected, q),
      noisy: assessed.noisy,
      logLimit: q === null ? null : (assessed.limits[q] ?? null),
      logSplit: q === null ? null : (assessed.splits[q] ?? null),
      reason: reasonFor(assessed, q, kind),
      derivativeRealisationsNeeded: q === null ? null : assessed.needed,
    },
    study.tolerance,
  );
}

/** The error of one combination over that of another: above 1, the second is better. */
export function ratioOf(study: Study, of: Assessed, by: Assessed, parameter: number, kind: ErrorKind): Estimate {
  const q = quantityOf(of.combined, parameter, kind);
  const r = quantityOf(by.combined, parameter, kind);
  const left = whole(of.combined);
  const right = whole(by.combined);
  const view = (logs: LogErrors, others: LogErrors): number | null =>
    difference(q === null ? null : (logs[q] ?? null), r === null ? null : (others[r] ?? null));
  const missing = valueOf(right.corrected, r) === null ? by : of;
  return estimateOf(
    {
      ...variances(q === null ? null : { at: left, q }, r === null ? null : { at: right, q: r }),
      assessable: of.combined.assessable && by.combined.assessable,
      logRaw: difference(valueOf(left.raw, q), valueOf(right.raw, r)),
      logCorrected: difference(valueOf(left.corrected, q), valueOf(right.corrected, r)),
      noisy: of.noisy || by.noisy,
      logLimit: view(viewOf(of, 'limits'), viewOf(by, 'limits')),
      logSplit: view(viewOf(of, 'splits'), viewOf(by, 'splits')),
      reason: `${missing.combined.combination.name}: ${reasonFor(missing, missing === by ? r : q, kind)}`,
      derivativeRealisationsNeeded: larger(of.needed, by.needed),
    },
    study.tolerance,
  );
}

/** A combination without noise has one view only: its value. */
function viewOf(assessed: Assessed, view: 'limits' | 'splits'): LogErrors {
  return assessed.noisy ? assessed[view] : (whole(assessed.combined).corrected?.logs ?? assessed[view]);
}

export function valueOf(solved: Solved | null, quantity: number | null): number | null {
  return solved === null || quantity === null ? null : (solved.logs[quantity] ?? null);
}

export function difference(a: number | null, b: number | null): number | null {
  return a === null || b === null ? null : a - b;
}

function larger(a: number | null, b: number | null): number | null {
  if (a === null || b === null) return a ?? b;
  return Math.max(a, b);
}

/** One quantity of one combination at one cut. */
export interface Quantity {
  readonly at: AtCut;
  readonly q: number;
}

/** Variances of a log error, or of the difference of two, over the suites that either rests on, and its bias. */
export function variances(
  of: Quantity | null,
  less: Quantity | null,
): Pick<Measured, 'varianceDerivatives' | 'varianceCovariance' | 'bias'> {
  if (of === null) return { varianceDerivatives: null, varianceCovariance: null, bias: 0 };
  const suites = new Set([...of.at.replicates.keys(), ...(less?.at.replicates.keys() ?? [])]);
  let derivatives = 0;
  let covariance = 0;
  for (const suite of suites) {
    const pair = [side(of, suite), side(less, suite)].filter((one) => one !== null);
    const [first, second] = pair;
    if (first === undefined) continue;
    derivatives += jackknifeVariance(first.replicates, first.quantity, second ?? null);
    covariance += covarianceVariance(first.noise, first.quantity, second ?? null);
  }
  const bias = biasOf(of) - (less === null ? 0 : biasOf(less));
  return { varianceDerivatives: derivatives, varianceCovariance: covariance, bias };
}

/** Mean of the log error's deviation that the inverse of a noisy covariance leaves; 0 where the error does not exist. */
function biasOf({ at, q }: Quantity): number {
  let variance = 0;
  for (const noise of at.noise.values()) variance += covarianceVariance(noise, q, null);
  return (at.inversionBias[q] ?? variance) - variance;
}

function side(quantity: Quantity | null, suite: string) {
  const replicates = quantity?.at.replicates.get(suite);
  const noise = quantity?.at.noise.get(suite);
  if (quantity === null || replicates === undefined || noise === undefined) return null;
  return { replicates, noise, quantity: quantity.q };
}

/** Why a corrected value does not exist. */
function reasonFor(assessed: Assessed, quantity: number | null, kind: ErrorKind): string {
  const { corrected } = whole(assessed.combined);
  if (quantity === null) return 'Nothing here responds to this parameter, and it has no prior.';
  if (corrected === null) return 'The derivatives came without realisations: their noise cannot be measured.';
  const { inversion } = corrected;
  if (kind === 'marginalised' && inversion.kind === 'ill conditioned') {
    return `The Fisher matrix has condition ${inversion.condition.toExponential(1)} after scaling to unit diagonal, beyond 1e14: no digit of its inverse would be right.`;
  }
  if (!assessed.noisy) return 'The Fisher matrix is not positive definite: a parameter, or a sum of parameters, is not constrained.';
  const more =
    assessed.needed === null ? 'how many more cannot be said' : `at least ${String(assessed.needed)} are needed`;
  return `Too few derivative realisations to tell: with their noise removed the Fisher matrix is not positive definite; ${more}.`;
}
