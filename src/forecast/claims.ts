import type { ClaimResult, Estimate, Verdict } from '../results/schema.js';
import type { Claim, ClaimTest, Study } from '../study/study.js';
import type { Assessed } from './assess.js';
import { errorOf, ratioOf } from './assess.js';
import { z95OneSided, z95TwoSided } from './thresholds.js';

/** The table that defines the verdicts; the report prints it. Source: methods, section 8. */
export const verdictRules: readonly { readonly verdict: Verdict; readonly rule: string }[] = [
  { verdict: 'supported', rule: 'The corrected value is on the claimed side of the threshold, one-sided at 95 % with its whole standard error.' },
  { verdict: 'contradicted', rule: 'The corrected value is on the other side, likewise at 95 %.' },
  { verdict: 'too close to call', rule: 'The value is well determined (settled or correctable) and simply near the threshold.' },
  { verdict: 'not settled', rule: 'The value is undetermined or unsettled: more simulations can decide.' },
  { verdict: 'not assessable', rule: 'The derivatives came without realisations, so no uncertainty can be given.' },
];

/** Tests every claim of the study on the corrected value. */
export function testClaims(study: Study, assessed: ReadonlyMap<string, Assessed>): ClaimResult[] {
  return study.claims.map((claim) => testClaim(study, claim, assessed));
}

function testClaim(study: Study, claim: Claim, assessed: ReadonlyMap<string, Assessed>): ClaimResult {
  const parameter = study.parameters.findIndex(({ name }) => name === claim.parameter);
  const by = assessed.get(claim.combination)!;
  const estimate =
    claim.quantity === 'gain'
      ? ratioOf(study, assessed.get(claim.against)!, by, parameter, claim.error)
      : errorOf(study, by, parameter, claim.error);
  const verdict = verdictOf(estimate, claim.test);
  return {
    id: claim.id,
    text: claim.text,
    parameter: claim.parameter,
    combination: claim.combination,
    against: claim.quantity === 'gain' ? claim.against : null,
    error: claim.error,
    quantity: claim.quantity,
    test: claim.test.kind,
    threshold: claim.test.kind === 'between' ? [claim.test.low, claim.test.high] : claim.test.threshold,
    verdict,
    raw: estimate.raw,
    estimate: estimate.corrected,
    relativeStandardError: estimate.relativeStandardError,
    parts: estimate.parts,
    interval: estimate.interval,
    interval95: estimate.interval95,
    status: estimate.status,
    why: estimate.why,
  };
}

/**
 * One-sided tests at 95 % in the logarithm. A claim of a range is supported where both its ends pass, and contradicted where
 * either fails, at 97.5 % each, so that together they are wrong one time in twenty at most. A bias of known sign counts in full against the
 * verdict that it favours, and never for one.
 */
export function verdictOf(estimate: Pick<Estimate, 'corrected' | 'parts' | 'status'>, test: ClaimTest): Verdict {
  if (estimate.status === 'not assessable') return 'not assessable';
  const { corrected, parts } = estimate;
  if (corrected === null || parts.derivatives === null || parts.covariance === null) return 'not settled';
  const log = Math.log(corrected);
  const error = Math.hypot(parts.derivatives, parts.covariance);
  const bias = parts.bias ?? 0;
  const sides = sidesOf(test).map(({ direction, threshold }) => ({
    distance: direction * (log - Math.log(threshold)),
    flattery: direction * bias,
  }));
  const against = test.kind === 'between' ? z95TwoSided : z95OneSided;
  if (sides.every(({ distance, flattery }) => distance >= z95OneSided * error + Math.max(0, flattery))) return 'supported';
  if (sides.some(({ distance, flattery }) => distance < -against * error - Math.max(0, -flattery))) return 'contradicted';
  return estimate.status === 'unsettled' ? 'not settled' : 'too close to call';
}

function sidesOf(test: ClaimTest): readonly { readonly direction: 1 | -1; readonly threshold: number }[] {
  switch (test.kind) {
    case 'at least':
      return [{ direction: 1, threshold: test.threshold }];
    case 'at most':
      return [{ direction: -1, threshold: test.threshold }];
    case 'between':
      return [
        { direction: 1, threshold: test.low },
        { direction: -1, threshold: test.high },
      ];
  }
}
