import type { Nodes } from 'mdast';
import { directiveKinds } from './all.js';
import type { Directive, Scope } from './directive.js';
import { attributesOf } from './directive.js';
import { named, TemplateError } from './template-error.js';

/** A template's nodes with every directive replaced by what it stands for. */
export function expand(nodes: readonly Nodes[], scope: Scope): Nodes[] {
  return nodes.flatMap((node): Nodes[] => {
    if (node.type === 'containerDirective' || node.type === 'leafDirective' || node.type === 'textDirective') return expandDirective(node, scope);
    const bare: Nodes = { ...node };
    delete bare.position;
    return ['children' in bare ? ({ ...bare, children: expand(bare.children, scope) } as Nodes) : bare];
  });
}

function expandDirective(directive: Directive, scope: Scope): Nodes[] {
  const kind = named(directiveKinds, directive.name, 'directive', scope.page, directive);
  if (kind.form !== directive.type) {
    throw new TemplateError(scope.page, directive, `"${directive.name}" is written ${written[kind.form]}`);
  }
  return kind.render(attributesOf(directive, kind, scope.page), directive, scope);
}

const written: Readonly<Record<Directive['type'], string>> = {
  containerDirective: 'with three colons, and three below what it holds',
  leafDirective: 'with two colons, on a line of its own',
  textDirective: 'with one colon, within a line',
};
