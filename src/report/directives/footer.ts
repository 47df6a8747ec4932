import type { BlockContent } from 'mdast';
import type { Frame } from '../markdown/nodes.js';
import type { DirectiveKind } from './directive.js';

/** `:::footer`: the end of the page. */
export const footer: DirectiveKind = {
  form: 'containerDirective',
  attributes: {},
  render: (_, directive, scope) => {
    const frame: Frame = {
      type: 'frame',
      data: { hName: 'footer' },
      children: scope.expand(directive.children, scope) as BlockContent[],
    };
    return [frame];
  },
};
