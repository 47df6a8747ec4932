import type { Nodes } from 'mdast';
import type { Figure } from '../../figures/figure.js';
import type { Frame } from '../markdown/nodes.js';
import { paragraph, say, strong, text } from '../markdown/nodes.js';
import { numbered } from '../numbering.js';
import type { DirectiveKind, Scope } from './directive.js';
import { named, TemplateError } from './template-error.js';

/** `::figure{name=gains}`: every figure of that name; `only=gains-marginalised` picks one, `not=` leaves one out. */
export const figure: DirectiveKind = {
  form: 'leafDirective',
  attributes: { name: 'required', only: 'optional', not: 'optional' },
  render: ({ name, only, not }, directive, scope) => {
    const all = named(Object.fromEntries(scope.figures), name!, 'figure', scope.page, directive);
    const chosen = all.filter((one) => (only === undefined || one.name === only) && one.name !== not);
    if (only !== undefined && all.length > 0 && chosen.length === 0) {
      const names = all.map((one) => one.name).join(', ');
      throw new TemplateError(scope.page, directive, `the figure "${name!}" has no "${only}"; it has ${names}`);
    }
    return chosen.map((one): Nodes => frame(one, scope, (what) => new TemplateError(scope.page, directive, what)));
  },
};

function frame(one: Figure, scope: Scope, fail: (what: string) => Error): Frame {
  const id = `fig-${one.name}`;
  const label = numbered(scope.numbering, 'Figure', id, fail);
  return {
    type: 'frame',
    data: { hName: 'figure', hProperties: { id, className: ['plot'] } },
    children: [
      paragraph({ type: 'image', url: `figures/${one.name}.svg`, alt: one.alternative, title: null }),
      { ...paragraph(...say`${label} ${strong(text(sentenceEnd(one.title)))} ${one.caption}`), data: { hName: 'figcaption' } },
    ],
  };
}

function sentenceEnd(words: string): string {
  return /[.?!]$/.test(words) ? words : `${words}.`;
}
