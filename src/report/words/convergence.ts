import type { PhrasingContent } from 'mdast';
import type { Estimate, Results } from '../../results/schema.js';
import { list, listed, paragraph, say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel } from './labels.js';
import { prose } from './prose.js';
import { counted } from './values.js';
import type { SentenceMaker } from './sentence-maker.js';
import type { Named } from './tally.js';
import { quotable, tallyStatuses, targetErrors, targetGains } from './tally.js';

/** More would hide the list's point; the table has all. */
const most = 8;

export const convergenceLead: SentenceMaker = (results) => {
  const errors = targetErrors(results);
  const gains = targetGains(results);
  const statuses = [...errors, ...gains].map(({ estimate }) => estimate.status);
  const open = [
    ...errors.filter(({ estimate }) => !quotable(estimate)).map((one) => item(results, 'error on', one)),
    ...gains.filter(({ estimate }) => !quotable(estimate)).map((one) => item(results, 'gain on', one)),
  ];
  const lead = say`Of ${counted(errors.length, 'error')} and ${counted(gains.length, 'gain')} on target parameters, ${listed(tallyStatuses(statuses))}.`;
  if (open.length === 0) return [paragraph(...say`${lead} Each may be quoted, in its corrected form.`)];
  const rest = open.length > most ? [say`and ${String(open.length - most)} more, in the tables below.`] : [];
  return [paragraph(...say`${lead} Not to be quoted:`), list([...open.slice(0, most), ...rest]), ...blame(results)];
};

function item(results: Results, what: string, { parameter, combination, estimate }: Named<Estimate>): PhrasingContent[] {
  return say`the ${what} ${parameterLabel(results, parameter)} from ${combinationLabel(results, combination)}. ${prose(estimate.why)}`;
}

/** Which simulations would help. */
function blame(results: Results) {
  const open = [...targetErrors(results), ...targetGains(results)].map(({ estimate }) => estimate).filter((one) => !quotable(one));
  const known = open.filter(({ parts }) => parts.derivatives !== null && parts.covariance !== null);
  const derivatives = known.filter(({ parts }) => parts.derivatives! > parts.covariance!).length;
  const needed = Math.max(0, ...open.map(({ derivativeRealisationsNeeded }) => derivativeRealisationsNeeded ?? 0));
  const more = needed > 0 ? `At least ${String(needed)} derivative realisations are needed before each of them has a value. ` : '';
  if (known.length === 0) return more === '' ? [] : [paragraph(...say`${more.trim()}`)];
  const words =
    derivatives === known.length
      ? 'In each of them with a value, the derivatives are noisier than the covariance: more derivative realisations will help, more fiducial ones will not.'
      : derivatives === 0
        ? 'In each of them with a value, the covariance is noisier than the derivatives: more fiducial realisations will help, more derivative ones will not.'
        : `In ${String(derivatives)} of ${String(known.length)} with a value the derivatives are noisier, in the others the covariance: both kinds of realisation are short.`;
  return [paragraph(...say`${more}${words}`)];
}
