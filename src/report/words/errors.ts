import type { PhrasingContent } from 'mdast';
import { asGiven } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { list, listed, paragraph, say } from '../markdown/nodes.js';
import { combinationLabel, nuisances, parameterLabel, parameterOf, targets, unitAfter } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';
import { ofAll, quotable, tallyStatuses, targetErrors } from './tally.js';
import { correctedInWords } from './values.js';

export const errorLead: SentenceMaker = (results) => {
  const all = targetErrors(results);
  const hidden = nuisances(results).map((name) => parameterLabel(results, name));
  const over = hidden.length === 0 ? [] : say` All are marginalised over ${listed(hidden)} as well.`;
  const statuses = tallyStatuses(all.map(({ estimate }) => estimate.status));
  return [
    paragraph(
      ...say`${ofAll('errors on target parameters', 'error on a target parameter', statuses, all.length)}.${over} The smallest that can be quoted:`,
    ),
    list(targets(results).map((name) => smallest(results, name))),
  ];
};

function smallest(results: Results, name: string): PhrasingContent[] {
  const found = targetErrors(results).filter(({ parameter, estimate }) => parameter === name && quotable(estimate) && estimate.corrected !== null);
  const best = found.sort((a, b) => a.estimate.corrected! - b.estimate.corrected!)[0];
  const label = parameterLabel(results, name);
  const { reference, unit, prior } = parameterOf(results, name);
  const beside = [
    ...(prior === null ? [] : [say`its prior alone is ${asGiven(prior)}`]),
    ...(reference === null ? [] : [say`${reference.label} has ${asGiven(reference.error)}`]),
  ];
  const compare = beside.length === 0 ? [] : say` (${beside.flatMap((one, i) => (i === 0 ? one : say`; ${one}`))})`;
  if (best === undefined) return say`${label}: cannot tell; no combination gives a settled error.${compare}`;
  return say`${label}: ${correctedInWords(best.estimate)}${unitAfter(unit)} from ${combinationLabel(results, best.combination)}${compare}.`;
}
