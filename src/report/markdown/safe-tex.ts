import type { InlineCode, PhrasingContentMap } from 'mdast';
import { mathTree } from '../html/math-tree.js';
import { inlineMath } from './nodes.js';

/** TeX from a user as a formula; as source where it is not sound TeX or asks for what is not trusted. Both outputs show the same. */
export function safeTex(tex: string): PhrasingContentMap['inlineMath'] | InlineCode {
  const oneLine = tex.replace(/\s+/g, ' ').trim();
  // A dollar would end the formula on code hosts, whatever the fence.
  const sound = oneLine !== '' && !oneLine.includes('$') && mathTree(oneLine, false) !== null;
  return sound ? inlineMath(oneLine) : { type: 'inlineCode', value: tex };
}
