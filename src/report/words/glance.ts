import type { PhrasingContent } from 'mdast';
import { asGiven, percent, thinSpace } from '../../results/rounding.js';
import type { ClaimResult, Improvement, Results } from '../../results/schema.js';
import { cleanInline } from '../markdown/clean.js';
import { list, marked, paragraph, say, strong } from '../markdown/nodes.js';
import { wouldDecide } from '../tables/budget.js';
import { estimateOf, rawOf } from '../tables/claims.js';
import { sham } from '../tables/improvements.js';
import { combinationLabel, parameterLabel, parameterOf, unitAfter } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';
import type { Named } from './tally.js';
import { ofAll, tallyStatuses, tallyVerdicts, targetGains } from './tally.js';
import { prose } from './prose.js';
import { atOneSigma, capital, correctedInWords, counted, raw } from './values.js';

/** The conclusion of the whole report, in one or two sentences. */
export const glance: SentenceMaker = (results) => {
  const verdicts = results.claims.map(({ verdict }) => verdict);
  const gains = targetGains(results);
  const first =
    verdicts.length > 0
      ? say`${ofAll('claims', 'claim', tallyVerdicts(verdicts), verdicts.length)}, once the noise in the derivatives is taken out.`
      : gains.length > 0
        ? say`The study states no claims. ${ofAll('gains on target parameters', 'gain on a target parameter', tallyStatuses(gains.map(({ estimate }) => estimate.status)), gains.length)}.`
        : say`The study states no claims, and has nothing to compare its baseline with.`;
  return [paragraph(strong(...first))];
};

/** One sentence a claim: the verdict, the claim, what it rests on. */
export const verdictList: SentenceMaker = (results) =>
  results.claims.length === 0 ? [] : [list(results.claims.map((claim) => claimItem(results, claim)))];

function claimItem(results: Results, claim: ClaimResult): PhrasingContent[] {
  const verdict = strong(marked(`${capital(claim.verdict)}.`, 'sign', claim.verdict.replaceAll(' ', '-')));
  return say`${verdict} “${cleanInline(claim.text)}” ${evidence(results, claim)}`;
}

function evidence(results: Results, claim: ClaimResult): PhrasingContent[] {
  const unit = claim.quantity === 'size' ? unitAfter(parameterOf(results, claim.parameter).unit) : [];
  const what = claim.quantity === 'gain' ? 'gain' : 'error';
  const before = say`Raw ${what} ${rawOf(claim)}${unit}, `;
  if (claim.estimate === null) return say`${before}corrected: cannot tell. ${prose(claim.why)}`;
  const numbers = say`${before}corrected ${atOneSigma(estimateOf(claim))}${unit}`;
  const decide = wouldDecide(results, claim.id);
  switch (claim.verdict) {
    case 'supported':
      return say`${numbers}: ${side(claim, true)}, at 95${thinSpace}% confidence.`;
    case 'contradicted':
      return say`${numbers}: ${side(claim, false)}, at 95${thinSpace}% confidence.`;
    case 'too close to call':
      return say`${numbers}: well known, but too near ${bound(claim)} to say which side it is on.${decide}`;
    case 'not settled':
      return say`${numbers}: cannot tell yet. ${prose(claim.why)}${decide === '' ? ' More simulations can decide.' : decide}`;
    case 'not assessable':
      return say`${numbers}: cannot tell. ${prose(claim.why)}`;
  }
}

function bound({ threshold }: ClaimResult): string {
  return typeof threshold === 'number' ? `the claimed ${asGiven(threshold)}` : `the claimed ${asGiven(threshold[0])} to ${asGiven(threshold[1])}`;
}

function side(claim: ClaimResult, kept: boolean): string {
  switch (claim.test) {
    case 'at least':
      return `${kept ? 'above' : 'below'} ${bound(claim)}`;
    case 'at most':
      return `${kept ? 'below' : 'above'} ${bound(claim)}`;
    case 'between':
      return `${kept ? 'within' : 'outside'} ${bound(claim)}`;
  }
}

/** The gain that its noise flatters most. */
export const flattery: SentenceMaker = (results) => {
  const both = targetGains(results).filter(({ estimate }) => estimate.raw !== null && estimate.corrected !== null);
  const excess = ({ estimate }: Named<Improvement>): number => estimate.raw! / estimate.corrected!;
  const most = both.reduce<Named<Improvement> | null>((best, one) => (best === null || excess(one) > excess(best) ? one : best), null);
  if (most === null) return [];
  const { estimate, parameter, combination } = most;
  const tolerance = results.study.tolerance;
  if (excess(most) <= 1 + tolerance) {
    return [paragraph(...say`No raw gain on a target parameter exceeds its corrected value by more than the tolerance of ${percent(tolerance)}.`)];
  }
  const alone = estimate.sham === null ? [] : say`, where the noise of the added derivatives alone would have shown ${sham(estimate)}`;
  const where = say`the gain on ${parameterLabel(results, parameter)} from ${combinationLabel(results, combination)}`;
  return [
    paragraph(...say`Noise in the derivatives looks like information. It flatters most ${where}: raw ${raw(estimate)}${alone}; corrected ${correctedInWords(estimate)}.`),
  ];
};

/** How many claims hold, for the contents. */
export function claimState({ claims }: Results): string {
  const held = claims.filter(({ verdict }) => verdict === 'supported').length;
  return claims.length === 0 ? 'no claims' : `${String(held)} of ${counted(claims.length, 'claim')} supported`;
}
