import { describe, expect, it } from 'vitest';
import type { Root } from 'mdast';
import { cleanInline, cleanNotes } from '../../src/report/markdown/clean.js';
import { writeMarkdown } from '../../src/report/markdown/write.js';

function notes(source: string): string {
  const tree: Root = { type: 'root', children: cleanNotes(source, 2, 'x') };
  return writeMarkdown(tree).trim();
}

function line(source: string): string {
  return writeMarkdown({ type: 'root', children: [{ type: 'paragraph', children: cleanInline(source) }] }).trim();
}

describe('notes', () => {
  it.each([
    ['keep what Markdown can say', 'Some *words*, **loud**, `code`.\n\n- a\n- b', 'Some _words_, **loud**, `code`.\n\n- a\n- b'],
    ['keep links to the web and to mailboxes', '[a](https://example.invalid/x) [b](mailto:a@example.invalid)', '[a](https://example.invalid/x) [b](mailto:a@example.invalid)'],
    ['lose every other link, and keep its words', '[a](javascript:x) [b](file:///etc) [c](other.md) [d](#id) [e](//example.invalid)', 'a b c d e'],
    ['keep links by reference', '[a][r]\n\n[r]: https://example.invalid/x', '[a](https://example.invalid/x)'],
    ['lose HTML', 'a <b>bold</b>\n\n<div>\nx\n</div>', 'a bold'],
    ['show pictures by their words', '![a fish](https://example.invalid/fish.png)', 'a fish'],
    ['keep formulae in a line', 'A $\\sigma_8$ here.', 'A $\\sigma_8$ here.'],
    ['keep formulae on their own', '$$\n\\sigma_8\n$$', '$$\n\\sigma_8\n$$'],
    ['take a line of $$ for a formula on its own', '$$\\sigma_8$$', '$$\n\\sigma_8\n$$'],
    ['show TeX that is not sound as it was written', 'A $\\frac{1$ here.', 'A `\\frac{1` here.'],
    ['show TeX that asks for trust as it was written', '$\\href{https://example.invalid}{x}$ $\\class{a}{x}$', '`\\href{https://example.invalid}{x}` `\\class{a}{x}`'],
    ['put headings below their place, one level at a time', '# One\n\n### Deep', '### One\n\n#### Deep'],
    ['give footnotes names of their own', 'Words.[^1]\n\n[^1]: A note.', 'Words.[^note-x-1]\n\n[^note-x-1]: A note.'],
  ])('%s', (_, source, expected) => {
    expect(notes(source)).toBe(expected);
  });

  it('are cut with a word where they are too long', () => {
    expect(notes(`${'word '.repeat(5000)}end`)).toMatch(/_The note is cut here: it is longer than 20000 characters\._$/);
  });

  it.each([['>'], ['- '], ['1. ']])('are shown as they are where %s goes too deep to read', (mark) => {
    // Deeper ones take the parser a minute, and then its stack.
    const before = performance.now();
    expect(notes(`${mark.repeat(3000)}x`)).toMatch(/^```\n/);
    expect(performance.now() - before).toBeLessThan(2000);
  });
});

describe('a line of words', () => {
  it.each([
    ['keeps emphasis and formulae', 'A *fine* $\\sigma_8$', 'A _fine_ $\\sigma_8$'],
    ['is never a block', '# Title', '\\# Title'],
    ['is never a list', '- item', '\\- item'],
    ['is never HTML', '<b>x</b>', 'x'],
    ['stays in one line', 'a\n\nb', 'a b'],
  ])('%s', (_, source, expected) => {
    expect(line(source)).toBe(expected);
  });
});
