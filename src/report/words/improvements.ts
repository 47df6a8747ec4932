import type { PhrasingContent } from 'mdast';
import { thinSpace } from '../../results/rounding.js';
import type { Improvement, Results } from '../../results/schema.js';
import { list, listed, paragraph, say } from '../markdown/nodes.js';
import { sham } from '../tables/improvements.js';
import { parameterLabel, targets } from './labels.js';
import type { CombinationSentenceMaker, SentenceMaker } from './sentence-maker.js';
import { tallyStatuses, targetGains } from './tally.js';
import { prose } from './prose.js';
import { correctedInWords, counted, noNumber, raw } from './values.js';

export const improvementLead: SentenceMaker = (results) => {
  const all = targetGains(results);
  if (all.length === 0) return [paragraph(...say`There is only the baseline: nothing to compare.`)];
  const shown = all.filter(({ estimate }) => estimate.interval95 !== null && estimate.interval95[0] > 1).length;
  const statuses = all.map(({ estimate }) => estimate.status);
  return [
    paragraph(
      ...say`Of ${counted(all.length, 'gain')} on target parameters, ${shown === 0 ? 'none is' : shown === 1 ? '1 is' : `${String(shown)} are`} above 1 at 95${thinSpace}% confidence once the noise in the derivatives is taken out. Of their sizes, ${listed(tallyStatuses(statuses))}.`,
    ),
  ];
};

/** What one combination adds to the baseline, a sentence for each target parameter. */
export const gainsOf: CombinationSentenceMaker = (results, combination) => {
  const gains = results.improvements[combination];
  if (gains === undefined) return [];
  const items = targets(results).flatMap((name) => {
    const gain = gains[name]?.marginalised;
    return gain === undefined ? [] : [gainItem(results, name, gain)];
  });
  return [list(items)];
};

function gainItem(results: Results, name: string, gain: Improvement): PhrasingContent[] {
  const alone =
    gain.sham === null
      ? `what noise alone would show is not known (${(gain.shamWhy ?? 'no reason given').replace(/\.$/, '')})`
      : `noise in the added derivatives alone would have shown ${sham(gain)}`;
  return say`${parameterLabel(results, name)}: raw gain ${raw(gain)}; ${alone}. Corrected: ${correctedOrWhy(gain)}. ${meaning(gain)} ${settled(gain)}`;
}

function correctedOrWhy(gain: Improvement): string {
  return gain.corrected === null ? noNumber(gain.status) : correctedInWords(gain);
}

/** What the number says for the decision at hand: is there a gain? */
function meaning({ corrected: value, interval95 }: Improvement): string {
  if (value === null || interval95 === null) return 'Nothing can be said about a gain.';
  if (interval95[0] > 1) return 'There is a gain.';
  if (interval95[1] < 1) return 'There is no gain: the error grows.';
  return 'A gain is not shown: 1 is within the 95\u202f% interval.';
}

function settled({ status, why }: Improvement): string {
  switch (status) {
    case 'settled':
      return 'Its size is settled.';
    case 'correctable':
      return `Its size is settled once corrected. ${prose(why)}`;
    case 'unsettled':
      return `Its size is not settled. ${prose(why)}`;
    case 'undetermined':
    case 'not assessable':
      return prose(why);
  }
}
