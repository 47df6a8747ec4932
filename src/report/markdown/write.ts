import type { Root } from 'mdast';
import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import remarkStringify from 'remark-stringify';
import { unified } from 'unified';
import type { Frame } from './nodes.js';

/** The tree as GitHub-flavoured Markdown with $math$, a line feed at the end. */
export function writeMarkdown(tree: Root): string {
  return unified()
    .use(remarkGfm, { tablePipeAlign: false, singleTilde: false })
    .use(remarkMath)
    .use(remarkStringify, {
      bullet: '-',
      emphasis: '_',
      rule: '-',
      fences: true,
      handlers: {
        frame: (node: Frame, _parent, state, info) => state.containerFlow(node, info),
        inlineMath: (node: { value: string }, _parent, state) => `$${state.stack.includes('tableCell') ? withoutPipes(node.value) : node.value}$`,
      },
    })
    .stringify(tree);
}

/** A bar in a formula would end a table's cell; TeX has names for bars that look the same. */
function withoutPipes(tex: string): string {
  return tex.replaceAll('\\|', '\\Vert ').replaceAll('|', '\\vert ');
}
