import type { CheckResult } from '../../results/schema.js';
import type { Check, CheckInput } from './check.js';
import { fiducialCount } from './fiducial-count.js';
import { matching } from './matching.js';
import { oneSided } from './one-sided.js';
import { repeatedRealisations } from './repeated-realisations.js';
import { sharedFiducials } from './shared-fiducials.js';
import { silentParameters } from './silent-parameters.js';

const checks: readonly Check[] = [
  fiducialCount,
  sharedFiducials,
  repeatedRealisations,
  matching,
  oneSided,
  silentParameters,
];

/** Every check, in the order of the report. */
export function runChecks(input: CheckInput): CheckResult[] {
  return checks.flatMap((check) => check(input));
}
