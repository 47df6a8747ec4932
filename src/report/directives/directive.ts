import type { Nodes, Root, RootContentMap } from 'mdast';
import type {} from 'remark-directive';
import type { Results } from '../../results/schema.js';
import type { Figure } from '../../figures/figure.js';
import type { Numbering } from '../numbering.js';
import { TemplateError } from './template-error.js';

export type Directive = RootContentMap['containerDirective'] | RootContentMap['leafDirective'] | RootContentMap['textDirective'];

/** Where a directive stands, and what it may use. */
export interface Scope {
  readonly results: Results;
  /** The template it is in. */
  readonly page: string;
  /** The combination that an `each` around it is at. */
  readonly combination: string | null;
  readonly pages: ReadonlyMap<string, Root>;
  /** All figures, by the name of their maker. */
  readonly figures: ReadonlyMap<string, readonly Figure[]>;
  readonly numbering: Numbering;
  /** Directives inside directives. */
  readonly expand: (nodes: readonly Nodes[], scope: Scope) => Nodes[];
}

/** One kind of directive. Adding one is adding a file, and a line in all.ts. */
export interface DirectiveKind {
  readonly form: Directive['type'];
  readonly attributes: Readonly<Record<string, 'required' | 'optional'>>;
  readonly render: (attributes: Readonly<Record<string, string>>, directive: Directive, scope: Scope) => Nodes[];
}

/** The attributes of a directive, checked against its kind. */
export function attributesOf(directive: Directive, kind: DirectiveKind, page: string): Readonly<Record<string, string>> {
  const given = Object.fromEntries(Object.entries(directive.attributes ?? {}).map(([key, value]) => [key, value ?? '']));
  for (const key of Object.keys(given)) {
    if (!Object.hasOwn(kind.attributes, key)) {
      const known = Object.keys(kind.attributes).join(', ');
      throw new TemplateError(page, directive, `"${directive.name}" has no attribute "${key}"${known === '' ? '' : `; it has ${known}`}`);
    }
  }
  for (const [key, need] of Object.entries(kind.attributes)) {
    if (need === 'required' && given[key] === undefined) throw new TemplateError(page, directive, `"${directive.name}" needs the attribute "${key}"`);
  }
  return given;
}
