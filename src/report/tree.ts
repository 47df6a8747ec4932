import type { Nodes, Root, RootContent } from 'mdast';
import type { Figure } from '../figures/figure.js';
import type { Results } from '../results/schema.js';
import type { Scope } from './directives/directive.js';
import { expand } from './directives/expand.js';
import { TemplateError } from './directives/template-error.js';
import { parseNotes, parseTemplate } from './markdown/parse.js';
import { newNumbering, resolveReferences } from './numbering.js';

/** The template that all others are part of, and the one that holds the sources. */
const whole = 'report';
const sources = 'sources';

/** The whole report as one tree of Markdown: both outputs are written from it. */
export function reportTree(results: Results, figures: ReadonlyMap<string, readonly Figure[]>, templates: ReadonlyMap<string, string>): Root {
  const cited = templates.get(sources) ?? '';
  // A footnote is one only where its text is in the same source: so each page is read with the sources behind it.
  const pages = new Map([...templates].filter(([name]) => name !== sources).map(([name, page]) => [name, withoutSources(parseTemplate(`${page}\n\n${cited}`))]));
  const root = pages.get(whole);
  if (root === undefined) throw new TemplateError(whole, null, 'the template is missing');
  const numbering = newNumbering();
  const scope: Scope = { results, page: whole, combination: null, pages, figures, numbering, expand };
  const nodes = expand(root.children, scope);
  resolveReferences(numbering);
  return { type: 'root', children: withSources(nodes, parseNotes(cited)) as RootContent[] };
}

function withoutSources(root: Root): Root {
  return { ...root, children: root.children.filter((node) => node.type !== 'footnoteDefinition') };
}

/** The sources that are cited, in the order of the file. A citation without a source is a template's mistake. */
function withSources(nodes: readonly Nodes[], definitions: Root): Nodes[] {
  const cited = new Set(citations(nodes));
  const found = definitions.children.filter((node) => node.type === 'footnoteDefinition');
  const own = nodes.flatMap((node) => (node.type === 'footnoteDefinition' ? [node.identifier] : []));
  for (const identifier of cited) {
    if (![...found.map((one) => one.identifier), ...own].includes(identifier)) {
      throw new TemplateError(sources, null, `there is no source "${identifier}"`);
    }
  }
  return [...nodes, ...found.filter(({ identifier }) => cited.has(identifier))];
}

function citations(nodes: readonly Nodes[]): string[] {
  return nodes.flatMap((node) => {
    if (node.type === 'footnoteReference') return [node.identifier];
    return 'children' in node ? citations(node.children) : [];
  });
}
