import { asGiven, roundTo, significant, withInterval } from '../../results/rounding.js';
import type { PhrasingContent } from 'mdast';
import type { ClaimResult, Results } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { cleanInline } from '../markdown/clean.js';
import { combinationLabel, parameterLabel, parameterOf, unitAfter } from '../words/labels.js';
import { noNumber, sign } from '../words/values.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** Every claim with the numbers behind its verdict. */
export const claims: TableMaker = (results) => ({
  id: 'claims',
  caption: say`The claims, tested one-sided at 95 % on the corrected value with its whole uncertainty.`,
  columns: [words('Claim'), words('Verdict'), words('Tested'), numbers('Raw'), numbers('Corrected (95 % interval)')],
  rows: results.claims.map((claim) => [
    cleanInline(claim.text),
    sign(claim.verdict),
    tested(results, claim),
    rawOf(claim),
    claim.estimate === null ? noNumber(claim.status) : withInterval(claim.estimate, errorOf(claim), claim.interval95),
  ]),
});

/** "marginalised error on σ_8 from All three, gain at least 1.9" */
function tested(results: Results, claim: ClaimResult): PhrasingContent[] {
  const whose = say`${claim.error} error on ${parameterLabel(results, claim.parameter)} from ${combinationLabel(results, claim.combination)}`;
  const unit = claim.quantity === 'size' ? unitAfter(parameterOf(results, claim.parameter).unit) : [];
  return claim.quantity === 'gain' ? say`gain ${thresholdOf(claim)}: ${whose}` : say`${thresholdOf(claim)}${unit}: ${whose}`;
}

function thresholdOf({ test, threshold }: ClaimResult): string {
  if (typeof threshold === 'number') return `${test} ${asGiven(threshold)}`;
  return `between ${asGiven(threshold[0])} and ${asGiven(threshold[1])}`;
}

/** The standard error in the unit of the estimate: it sets the digits. */
function errorOf(claim: ClaimResult): number | null {
  return claim.estimate === null || claim.relativeStandardError === null ? null : claim.estimate * claim.relativeStandardError;
}

export function rawOf(claim: ClaimResult): string {
  if (claim.raw === null) return 'does not exist';
  return claim.estimate === null ? significant(claim.raw, 2) : roundTo(claim.raw, errorOf(claim));
}

export function estimateOf(claim: ClaimResult): string {
  return claim.estimate === null ? noNumber(claim.status) : withInterval(claim.estimate, errorOf(claim), claim.interval);
}
