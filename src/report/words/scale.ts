import type { PhrasingContent } from 'mdast';
import { list, paragraph, say } from '../markdown/nodes.js';
import { atCut, cutLabel } from '../tables/scan.js';
import { combinationLabel, parameterLabel, parameterOf, targets, unitAfter } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';

export const scaleLead: SentenceMaker = (results) => {
  const scans = Object.entries(results.scan);
  const first = scans[0]?.[1];
  if (first === undefined) return [paragraph(...say`No combination has a coordinate to cut along, so there is nothing to show.`)];
  const items = scans.map(([combination, found]): PhrasingContent[] => {
    const last = found.at.length - 1;
    const ends = targets(results).flatMap((name): PhrasingContent[][] => {
      const values = found.errors[name]?.marginalised;
      if (values === undefined) return [];
      const unit = unitAfter(parameterOf(results, name).unit);
      return [say`${parameterLabel(results, name)} from ${atCut(values, 0)} to ${atCut(values, last)}${unit}`];
    });
    const from = cutLabel(found, found.at[0]!);
    const to = cutLabel(found, found.at[last]!);
    return say`${combinationLabel(results, combination)}, ${from} to ${to}: ${ends.flatMap((one, i) => (i === 0 ? one : say`; ${one}`))}.`;
  });
  return [paragraph(...say`As the cut in ${first.coordinate} lets more data in, the corrected marginalised errors go, with`), list(items)];
};
