import { toString } from 'mdast-util-to-string';
import type { Definition, Nodes, Paragraph, PhrasingContent, RootContent } from 'mdast';
import { visit } from 'unist-util-visit';
import { mathTree } from '../html/math-tree.js';
import { displayMath, text } from './nodes.js';
import { parseNotes } from './parse.js';
import { safeTex } from './safe-tex.js';

/** More is cut, with a word: a note is a note, and parsing is not linear for every text. */
const longestNote = 20_000;
const longestLine = 2_000;

/** Quotes and lists one inside the other; deeper ones take the parser minutes and then its stack. */
const deepest = /^(?:[ \t]*(?:>|[-*+](?=[ \t])|\d{1,9}[.)](?=[ \t]))[ \t]?){12,}/m;

/**
 * A user's note as Markdown that is safe in both outputs: no HTML, no images, links only to http, https and mailto, TeX that
 * is sound, headings below `depth`, footnotes under names of their own.
 */
export function cleanNotes(source: string, depth: number, name: string): RootContent[] {
  if (deepest.test(source)) return [{ type: 'code', lang: null, value: source.slice(0, longestNote) }];
  const cut = source.length > longestNote;
  const root = parseNotes(cut ? source.slice(0, longestNote) : source);
  const context: Context = { source, definitions: definitionsOf(root), prefix: `note-${name}-`, depth, lastDepth: depth };
  const blocks = root.children.flatMap((node) => clean(node, context)) as RootContent[];
  const word = `The note is cut here: it is longer than ${String(longestNote)} characters.`;
  return cut ? [...blocks, { type: 'paragraph', children: [{ type: 'emphasis', children: [text(word)] }] }] : blocks;
}

/** One line of a user's text: a title, a label, a claim. Inline Markdown with $math$; anything larger is plain text. */
export function cleanInline(source: string): PhrasingContent[] {
  const line = source.replace(/\s+/g, ' ').trim().slice(0, longestLine);
  if (deepest.test(line)) return [text(line)];
  const root = parseNotes(line);
  const [only, ...others] = root.children;
  if (only?.type !== 'paragraph' || others.length > 0) return [text(line)];
  const context: Context = { source: '', definitions: new Map(), prefix: 'note-', depth: 6, lastDepth: 6 };
  return only.children.flatMap((node) => clean(node, context)) as PhrasingContent[];
}

interface Context {
  readonly source: string;
  readonly definitions: ReadonlyMap<string, Definition>;
  readonly prefix: string;
  readonly depth: number;
  lastDepth: number;
}

function definitionsOf(root: Nodes): ReadonlyMap<string, Definition> {
  const found = new Map<string, Definition>();
  visit(root, 'definition', (node) => {
    if (!found.has(node.identifier)) found.set(node.identifier, node);
  });
  return found;
}

/** A node as it may be shown: itself, something in its place, or nothing. What is not named here is not shown. */
function clean(node: Nodes, context: Context): Nodes[] {
  switch (node.type) {
    case 'text':
    case 'inlineCode':
    case 'break':
    case 'thematicBreak':
      return [strip(node)];
    case 'code':
      return node.lang === 'math' ? [cleanDisplay(node.value)] : [{ type: 'code', lang: null, value: node.value }];
    case 'inlineMath':
      return [safeTex(node.value)];
    case 'math':
      return [cleanDisplay(node.value)];
    case 'image':
    case 'imageReference':
      return node.alt === null || node.alt === undefined || node.alt === '' ? [] : [text(node.alt)];
    case 'html':
    case 'definition':
    case 'yaml':
    case 'root':
    case 'frame':
    case 'containerDirective':
    case 'leafDirective':
    case 'textDirective':
      return [];
    case 'link':
      return linked(node.url, inside(node.children, context));
    case 'linkReference': {
      const definition = context.definitions.get(node.identifier);
      return definition === undefined ? inside(node.children, context) : linked(definition.url, inside(node.children, context));
    }
    case 'heading': {
      // One level at a time, so that the outline has no holes.
      context.lastDepth = Math.min(6, context.depth + node.depth, context.lastDepth + 1);
      // Data that is there, and empty: no address is made from a user's words.
      return [{ type: 'heading', depth: context.lastDepth as 1, data: {}, children: inside(node.children, context) as PhrasingContent[] }];
    }
    case 'footnoteReference':
    case 'footnoteDefinition':
      return [footnote(node, context)];
    case 'paragraph':
      return [displayOf(node, context.source) ?? { type: 'paragraph', children: inside(node.children, context) as PhrasingContent[] }];
    case 'blockquote':
    case 'list':
    case 'listItem':
    case 'emphasis':
    case 'strong':
    case 'delete':
    case 'table':
    case 'tableRow':
    case 'tableCell':
      return [{ ...strip(node), children: inside(node.children, context) } as Nodes];
  }
}

function inside(children: readonly Nodes[], context: Context): Nodes[] {
  return children.flatMap((child) => clean(child, context));
}

function footnote(node: Extract<Nodes, { type: 'footnoteReference' | 'footnoteDefinition' }>, context: Context): Nodes {
  const identifier = `${context.prefix}${node.identifier}`.toLowerCase();
  const named = { identifier, label: identifier };
  if (node.type === 'footnoteReference') return { type: 'footnoteReference', ...named };
  return { type: 'footnoteDefinition', ...named, children: inside(node.children, context) as never };
}

/** `$$…$$` on a line of its own is a displayed formula to those who write it; the parser takes it for one in a line. */
function displayOf(node: Paragraph, source: string): Nodes | null {
  const [only, ...others] = node.children;
  const offset = only?.position?.start.offset;
  if (only?.type !== 'inlineMath' || others.length > 0 || offset === undefined) return null;
  return source.startsWith('$$', offset) ? cleanDisplay(only.value) : null;
}

/** Without positions: they would be places in another file. */
function strip<T extends Nodes>(node: T): T {
  const bare = { ...node };
  delete bare.position;
  return bare;
}

function cleanDisplay(tex: string): Nodes {
  const sound = !tex.includes('$') && mathTree(tex, true) !== null;
  return sound ? displayMath(tex) : { type: 'code', lang: null, value: tex };
}

/** The link, or its text alone where it leads anywhere but to the web or a mailbox. */
function linked(url: string, children: Nodes[]): Nodes[] {
  if (!/^(?:https?:\/\/|mailto:)[^\s<>"'`\\\u0000-\u0020]+$/i.test(url)) return children;
  const shown = children.map((child) => toString(child)).join('') === '' ? [text(url)] : children;
  return [{ type: 'link', url, title: null, children: shown as PhrasingContent[] }];
}
