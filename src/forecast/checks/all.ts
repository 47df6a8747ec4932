import type { CheckResult } from '../../results/schema.js';
import type { Check, CheckInput } from './check.js';
import { beyondPrior } from './beyond-prior.js';
import { cancellation } from './cancellation.js';
import { fiducialCount } from './fiducial-count.js';
import { gaussianity } from './gaussianity.js';
import { matching } from './matching.js';
import { nearlyDependent } from './nearly-dependent.js';
import { oneSided } from './one-sided.js';
import { repeatedRealisations } from './repeated-realisations.js';
import { sharedDerivatives } from './shared-derivatives.js';
import { sharedFiducials } from './shared-fiducials.js';
import { silentParameters } from './silent-parameters.js';
import { truncation } from './truncation.js';

const checks: readonly Check[] = [
  fiducialCount,
  sharedFiducials,
  repeatedRealisations,
  nearlyDependent,
  gaussianity,
  cancellation,
  matching,
  sharedDerivatives,
  oneSided,
  truncation,
  silentParameters,
  beyondPrior,
];

/** Every check, in the order of the report. */
export function runChecks(input: CheckInput): CheckResult[] {
  return checks.flatMap((check) => check(input));
}
