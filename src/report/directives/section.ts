import type { Heading, Nodes } from 'mdast';
import { toString } from 'mdast-util-to-string';
import { slug } from '../slug.js';
import type { DirectiveKind } from './directive.js';
import { TemplateError } from './template-error.js';

/** `::section{name=data-checks}`: another template, in this place. */
export const section: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required' },
  render: ({ name }, directive, scope) => {
    const page = scope.pages.get(name!);
    if (page === undefined) throw new TemplateError(scope.page, directive, `there is no template "${name!}.md"`);
    if (scope.page !== 'report') throw new TemplateError(scope.page, directive, 'only report.md can hold sections');
    const nodes = scope.expand(page.children, { ...scope, page: name! });
    const first = nodes[0];
    if (first?.type !== 'heading' || first.depth !== 2) throw new TemplateError(name!, page, 'a section begins with a heading of level 2 (##)');
    return nodes.map((node): Nodes => (node.type === 'heading' ? identified(node, node === first ? '' : `${slug(toString(first))}-`) : node));
  },
};

/** A heading with a stable address: its words, below its section. One with data of its own keeps it: `each` gave it an address, or a user wrote it. */
function identified(heading: Heading, prefix: string): Heading {
  if (heading.data !== undefined) return heading;
  return { ...heading, data: { hProperties: { id: `${prefix}${slug(toString(heading))}` } } };
}
