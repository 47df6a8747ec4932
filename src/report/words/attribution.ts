import type { PhrasingContent } from 'mdast';
import { significant } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { list, paragraph, say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel, targets } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';

/** One gain of a target parameter with its two parts, as factors. */
export interface Parts {
  readonly combination: string;
  readonly parameter: string;
  readonly gain: number;
  readonly response: number;
  readonly degeneracy: number;
}

/** Every gain that can be taken apart. */
export function partsOf(results: Results): readonly Parts[] {
  return targets(results).flatMap((parameter) =>
    Object.entries(results.attribution ?? {}).flatMap(([combination, { parameters }]) => {
      const shares = parameters[parameter]?.shares ?? null;
      if (shares === null) return [];
      return [
        { combination, parameter, gain: Math.exp(shares.total), response: Math.exp(shares.response), degeneracy: Math.exp(shares.degeneracy) },
      ];
    }),
  );
}

/** Gains this small have no parts worth naming: they would be called 1.0. */
const smallestGain = 1.05;

export const attributionLead: SentenceMaker = (results) => {
  const parts = partsOf(results).filter(({ gain }) => gain >= smallestGain);
  if (parts.length === 0) return [paragraph(...say`No corrected gain on a target parameter is above ${significant(smallestGain, 3)}, so there is nothing to take apart.`)];
  const broken = parts.filter(({ degeneracy, response }) => degeneracy > response).length;
  return [
    paragraph(
      ...say`Of ${String(parts.length)} corrected gains above ${significant(smallestGain, 3)}, ${String(broken)} come more from degeneracies that break than from a sharper response. Such a gain depends on what else is marginalised over, and on the priors.`,
    ),
    list(parts.map((one): PhrasingContent[] => say`${parameterLabel(results, one.parameter)}, ${combinationLabel(results, one.combination)}: ${significant(one.gain, 3)} is ${significant(one.response, 3)} from a sharper response times ${significant(one.degeneracy, 3)} from broken degeneracies.${closing(results, one)}`)),
  ];
};

/** Which other parameter, once known, closes most of the gap between baseline and combination. */
function closing(results: Results, { combination, parameter, gain, degeneracy }: Parts): PhrasingContent[] {
  if (degeneracy < smallestGain) return [];
  const known = (results.attribution?.[combination]?.parameters[parameter]?.oneFixed ?? []).flatMap(({ parameter: other, baseline, combination: here }) =>
    baseline === null || here === null ? [] : [{ other, gain: baseline / here }],
  );
  const least = [...known].sort((a, b) => a.gain - b.gain)[0];
  if (least === undefined || least.gain > 0.9 * gain) return [];
  return say` With ${parameterLabel(results, least.other)} known it would be ${significant(least.gain, 3)}.`;
}


/** The largest canonical correlation of each combination. */
const correlations: SentenceMaker = (results) => {
  const all = Object.entries(results.attribution ?? {}).flatMap(([combination, { ties }]) => {
    const largest = Math.max(...ties.map((tie) => tie.correlations[0] ?? 0));
    return ties.length === 0 ? [] : [{ combination, largest }];
  });
  if (all.length === 0) return [];
  return [
    paragraph(...say`The largest canonical correlation between the noise of the baseline's entries and that of the added ones:`),
    list(all.map(({ combination, largest }): PhrasingContent[] => say`${combinationLabel(results, combination)}: ${significant(largest, 2)}.`)),
  ];
};

const predicted: SentenceMaker = (results) => {
  const found = Object.entries(results.attribution ?? {}).flatMap(([combination, { throughNoise: gains }]) =>
    targets(results).flatMap((parameter) => {
      const one = gains[parameter];
      if (one === undefined || one.gain === null || one.relativeStandardError === null) return [];
      const certain = Math.log(one.gain) > 2 * one.relativeStandardError;
      return certain && one.gain >= smallestGain ? [{ combination, parameter, gain: one.gain }] : [];
    }),
  );
  if (found.length === 0) {
    return [
      paragraph(
        ...say`With the added responses set to zero and their covariance kept, no gain above ${significant(smallestGain, 3)} is left: next to nothing comes from predicting the baseline's noise.`,
      ),
    ];
  }
  const largest = found.reduce((best, one) => (one.gain > best.gain ? one : best));
  return [
    paragraph(
      ...say`With the added responses set to zero and their covariance kept, up to ${significant(largest.gain, 3)} is left (${parameterLabel(results, largest.parameter)}, ${combinationLabel(results, largest.combination)}): the added data help by predicting the baseline's noise. Whether that is there in real data rests on the noise being modelled right.`,
    ),
  ];
};

/** What the added entries give by predicting the baseline's noise, with no response of their own, and how far the two are tied. */
export const throughNoise: SentenceMaker = (results) => [...predicted(results), ...correlations(results)];

/** For the contents. */
export function attributionState(results: Results): string {
  const parts = partsOf(results).filter(({ gain }) => gain >= smallestGain);
  const broken = parts.filter(({ degeneracy, response }) => degeneracy > response).length;
  return parts.length === 0 ? 'no gain to take apart' : `${String(broken)} of ${String(parts.length)} mostly degeneracies`;
}
