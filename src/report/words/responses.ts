import type { PhrasingContent } from 'mdast';
import type { Results } from '../../results/schema.js';
import { list, paragraph, say } from '../markdown/nodes.js';
import { blocksOf, clearEntries } from '../tables/responses.js';
import { parameterLabel, targets } from './labels.js';
import type { SentenceMaker } from './sentence-maker.js';

export const responseLead: SentenceMaker = (results) => [
  paragraph(
    ...say`Where the response to a parameter does not stand out of its own noise, the plain forecast counts noise as information. The derivative is more than twice its standard error away from zero, for`,
  ),
  list(targets(results).map((name) => responseItem(results, name))),
];

function responseItem(results: Results, name: string): PhrasingContent[] {
  let clear = 0;
  let all = 0;
  for (const { vector } of blocksOf(results)) {
    const derivative = vector.derivatives[name];
    const kind = results.runs[vector.run]?.derivatives[name]?.kind;
    if (derivative === undefined || derivative.standardError === null || kind === 'exact' || kind === 'insensitive') continue;
    clear += clearEntries(derivative.value, derivative.standardError);
    all += derivative.value.length;
  }
  const label = parameterLabel(results, name);
  return all === 0 ? say`${label}: cannot tell, no derivative has a noise that is known.` : say`${label}: in ${String(clear)} of ${String(all)} entries.`;
}
