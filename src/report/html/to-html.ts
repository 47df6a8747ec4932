import type { Root as Html } from 'hast';
import type { Root } from 'mdast';
import remarkRehype from 'remark-rehype';
import { unified } from 'unified';

/** Footnotes are the sources: a section at the end. Ids get their prefix here, once. */
const converter = unified()
  .use(remarkRehype, {
    clobberPrefix: 'source-',
    footnoteLabel: 'Sources',
    footnoteLabelProperties: {},
    footnoteBackLabel: (reference: number, again: number) => `Back to source mark ${String(reference + 1)}${again > 1 ? `, place ${String(again)}` : ''}`,
  })
  .freeze();

export function toHtml(tree: Root): Html {
  return converter.runSync(tree);
}
