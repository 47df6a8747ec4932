import type { PhrasingContent, Text } from 'mdast';
import { pointer, strong, text } from './markdown/nodes.js';

/** Numbers of figures and tables in the order of the report, and the references that wait for them. */
export interface Numbering {
  readonly numbers: Map<string, string>;
  readonly waiting: { readonly id: string; readonly node: Text; readonly fail: () => Error }[];
}

export function newNumbering(): Numbering {
  return { numbers: new Map(), waiting: [] };
}

/** The next number of its kind, in bold: "Figure 3." */
export function numbered(numbering: Numbering, kind: 'Figure' | 'Table', id: string, fail: (what: string) => Error): PhrasingContent {
  if (numbering.numbers.has(id)) throw fail(`${id} is in the report twice`);
  const before = [...numbering.numbers.values()].filter((label) => label.startsWith(kind)).length;
  const label = `${kind} ${String(before + 1)}`;
  numbering.numbers.set(id, label);
  return strong(text(`${label}.`));
}

/** A reference to a figure or table that may come later. */
export function reference(numbering: Numbering, id: string, fail: () => Error): Text {
  const node = pointer(id, id);
  numbering.waiting.push({ id, node, fail });
  return node;
}

/** Gives every reference its number. */
export function resolveReferences(numbering: Numbering): void {
  for (const { id, node, fail } of numbering.waiting) {
    const label = numbering.numbers.get(id);
    if (label === undefined) throw fail();
    node.value = label;
  }
}
