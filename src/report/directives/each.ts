import type { Heading, Nodes } from 'mdast';
import { text } from '../markdown/nodes.js';
import { slug } from '../slug.js';
import type { DirectiveKind } from './directive.js';
import { TemplateError } from './template-error.js';

/** `:::each{of=combinations}`: what is inside, once for each combination; `of=additions` leaves out the baseline. */
export const each: DirectiveKind = {
  form: 'containerDirective',
  attributes: { of: 'required' },
  render: ({ of }, directive, scope) => {
    const { combinations, study } = scope.results;
    const names = Object.keys(combinations);
    if (of !== 'combinations' && of !== 'additions') {
      throw new TemplateError(scope.page, directive, `"each" goes over combinations or additions, not over "${of!}"`);
    }
    const chosen = of === 'combinations' ? names : names.filter((name) => name !== study.baseline);
    return chosen.flatMap((combination) =>
      scope.expand(directive.children as readonly Nodes[], { ...scope, combination }).map((node) => addressed(node, scope.page, combination)),
    );
  },
};

/** Labels may be alike, names are not: so the address of a heading holds the name. */
function addressed(node: Nodes, page: string, combination: string): Nodes {
  if (node.type !== 'heading' || node.depth !== 3) return node;
  const heading: Heading = { ...node, data: { hProperties: { id: `${slug(page)}-${combination}` } } };
  return heading.children.length === 0 ? { ...heading, children: [text(combination)] } : heading;
}
