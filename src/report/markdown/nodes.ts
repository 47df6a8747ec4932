import type { BlockContent, FootnoteReference, List, Paragraph, Parent, PhrasingContent, PhrasingContentMap, RootContentMap, Strong, Text } from 'mdast';
import type {} from 'remark-math';
import type {} from 'remark-rehype';

/** A numbered figure or table with its caption: a `figure` in HTML, its children one after the other in Markdown. */
export interface Frame extends Parent {
  type: 'frame';
  children: BlockContent[];
}

declare module 'mdast' {
  interface RootContentMap {
    frame: Frame;
  }
  interface BlockContentMap {
    frame: Frame;
  }
}

export function text(value: string): Text {
  return { type: 'text', value };
}

/** Text that is an element with a class in HTML and plain in Markdown. */
export function marked(value: string, ...className: readonly string[]): Text {
  return { type: 'text', value, data: { hName: 'span', hProperties: { className: [...className] } } };
}

/** A reference to a place in this report: a link in HTML, plain text in Markdown, where such places have no address. */
export function pointer(value: string, id: string): Text {
  return { type: 'text', value, data: { hName: 'a', hProperties: { href: `#${id}` } } };
}

export function strong(...children: PhrasingContent[]): Strong {
  return { type: 'strong', children };
}

export function paragraph(...children: PhrasingContent[]): Paragraph {
  return { type: 'paragraph', children };
}

export function list(items: readonly (readonly PhrasingContent[])[], ordered = false): List {
  const children = items.map((item) => ({ type: 'listItem' as const, spread: false, children: [paragraph(...item)] }));
  return { type: 'list', ordered, spread: false, children };
}

/** A source, by its label in templates/sources.md. */
export function cite(identifier: string): FootnoteReference {
  return { type: 'footnoteReference', identifier, label: identifier };
}

/** TeX that is known to be sound; what users wrote goes through `safeTex`. */
export function inlineMath(value: string): PhrasingContentMap['inlineMath'] {
  const data = { hName: 'code', hProperties: { className: ['language-math', 'math-inline'] }, hChildren: [text(value)] };
  return { type: 'inlineMath', value, data };
}

export function displayMath(value: string): RootContentMap['math'] {
  const code = { type: 'element' as const, tagName: 'code', properties: { className: ['language-math', 'math-display'] }, children: [text(value)] };
  return { type: 'math', value, data: { hName: 'pre', hChildren: [code] } };
}

/** Joins text and nodes into one run: say`Adding ${label}: the error shrinks by ${'1.9'}.` */
export function say(words: TemplateStringsArray, ...parts: readonly Said[]): PhrasingContent[] {
  const run: PhrasingContent[] = [];
  const add = (node: PhrasingContent): void => {
    const last = run.at(-1);
    if (node.type === 'text' && node.data === undefined && last?.type === 'text' && last.data === undefined) last.value += node.value;
    else run.push(node.type === 'text' && node.data === undefined ? text(node.value) : node);
  };
  words.forEach((word, i) => {
    if (word !== '') add(text(word));
    const part = parts[i];
    if (part === undefined) return;
    for (const node of typeof part === 'string' ? [text(part)] : 'type' in part ? [part] : part) add(node);
  });
  return run;
}

export type Said = string | PhrasingContent | readonly PhrasingContent[];

/** "a, b and c". */
export function listed(items: readonly Said[]): PhrasingContent[] {
  return items.flatMap((item, i) => {
    const joint = i === 0 ? '' : i === items.length - 1 ? ' and ' : ', ';
    return say`${joint}${item}`;
  });
}
