import { JSDOM } from 'jsdom';
import { toString } from 'mdast-util-to-string';
import type { Nodes, Root } from 'mdast';
import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import remarkParse from 'remark-parse';
import { unified } from 'unified';
import { beforeAll, describe, expect, it } from 'vitest';
import { visit } from 'unist-util-visit';
import { inventedResults } from '../fixtures/invented-results.js';
import { expectSafePage } from './page-rules.js';
import { changedResults, rendered, smallResults } from './report-results.js';

const sectionTitles = [
  'At a glance',
  'Forecast errors',
  'Improvement over the baseline',
  'Where the gain comes from',
  'Responses',
  'Is it converged?',
  'Dependence on scale',
  'Degeneracies',
  'Data checks',
  'Methods',
  'Provenance',
];

function parse(markdown: string): Root {
  return unified().use(remarkParse).use(remarkGfm).use(remarkMath).parse(markdown);
}

function find<T extends Nodes['type']>(tree: Root, type: T): Extract<Nodes, { type: T }>[] {
  const found: Nodes[] = [];
  visit(tree, type, (node) => {
    found.push(node);
  });
  return found as Extract<Nodes, { type: T }>[];
}

/** Formulae and marks of sources as nothing, since one side has TeX and the other MathML. */
function withoutFormulae(html: string): Document {
  const { document } = new JSDOM(html).window;
  for (const element of document.querySelectorAll('math, sup, .spoken')) element.remove();
  return document;
}

function words(text: string): string {
  return text.replace(/\s+/g, ' ').trim();
}

describe('a report', () => {
  let files: ReadonlyMap<string, string>;
  let html = '';
  let document: Document;
  let markdown: Root;

  beforeAll(async () => {
    files = await rendered(smallResults());
    html = files.get('report.html')!;
    document = new JSDOM(html).window.document;
    markdown = parse(files.get('report.md')!);
  });

  it('has the page, its twin, drawings and tables', () => {
    const names = [...files.keys()];
    expect(names).toContain('report.html');
    expect(names).toContain('report.md');
    expect(names).toContain('figures/gains-marginalised.svg');
    expect(names.filter((name) => name.startsWith('tables/')).sort()).toEqual(
      ['checks', 'claims', 'convergence', 'errors', 'fisher', 'improvements', 'inputs', 'parameters', 'responses', 'scan'].map((name) => `tables/${name}.csv`),
    );
  });

  it('holds no script, no style attribute, no address but links, and one style element that the policy names', () => {
    expectSafePage(html);
  });

  it('has its sections in the order that a reader needs them', () => {
    expect([...document.querySelectorAll('main h2')].map(({ textContent }) => textContent)).toEqual([...sectionTitles, 'Sources']);
  });

  it('has landmarks, a language, a title, and one heading of level 1', () => {
    expect(document.documentElement.lang).toBe('en');
    expect(document.title).toBe('In memory');
    for (const landmark of ['header', 'nav', 'main', 'footer']) expect(document.querySelectorAll(`body > ${landmark}`), landmark).toHaveLength(1);
    expect(document.querySelectorAll('h1')).toHaveLength(1);
    expect(document.querySelector('a.skip')?.getAttribute('href')).toBe('#main');
  });

  it('has headings without a hole in the outline', () => {
    const levels = [...document.querySelectorAll('h1, h2, h3, h4, h5, h6')].map(({ tagName }) => Number(tagName.slice(1)));
    levels.forEach((level, i) => {
      expect(level - (levels[i - 1] ?? 0)).toBeLessThanOrEqual(1);
    });
  });

  it('gives every heading of a table its scope, and every row its heading', () => {
    expect(document.querySelectorAll('th:not([scope])')).toHaveLength(0);
    for (const row of document.querySelectorAll('figure.table tbody tr')) expect(row.children[0]!.getAttribute('scope')).toBe('row');
    for (const heading of document.querySelectorAll('th')) expect(heading.textContent.trim()).not.toBe('');
    for (const region of document.querySelectorAll('.scroll')) expect(region.getAttribute('tabindex')).toBe('0');
  });

  it('numbers figures and tables in order, each with a caption', () => {
    const numbers = (selector: string): (string | undefined)[] =>
      [...document.querySelectorAll(`${selector} > figcaption > strong:first-child`)].map(({ textContent }) => textContent);
    const figures = numbers('figure.plot');
    const tables = numbers('figure.table');
    expect(figures.length).toBeGreaterThan(5);
    expect(figures).toEqual(figures.map((_, i) => `Figure ${String(i + 1)}.`));
    expect(tables).toEqual(tables.map((_, i) => `Table ${String(i + 1)}.`));
    expect(document.querySelectorAll('figure:not([id])')).toHaveLength(0);
    expect(document.querySelector('#fig-gains-marginalised')).not.toBeNull();
    expect(document.querySelector('#table-errors')).not.toBeNull();
  });

  it('shows every drawing inline, with a text alternative', () => {
    const drawings = [...document.querySelectorAll('figure.plot')];
    expect(drawings.every((figure) => figure.querySelector('svg > title, svg > desc') !== null)).toBe(true);
    expect(document.querySelectorAll('img')).toHaveLength(0);
  });

  it('shows formulae as MathML', () => {
    expect(document.querySelectorAll('math').length).toBeGreaterThan(20);
    expect(document.querySelectorAll('code.math-inline, code.math-display')).toHaveLength(0);
  });

  it('has Markdown without HTML, with drawings beside it and sources as footnotes', () => {
    expect(find(markdown, 'html')).toEqual([]);
    const images = find(markdown, 'image');
    expect(images.length).toBeGreaterThan(5);
    for (const { url, alt } of images) {
      expect(files.has(url), url).toBe(true);
      expect(alt).not.toBe('');
    }
    const defined = find(markdown, 'footnoteDefinition').map(({ identifier }) => identifier);
    expect(new Set(find(markdown, 'footnoteReference').map(({ identifier }) => identifier))).toEqual(new Set(defined));
  });

  it('says the same in both: headings', () => {
    const there = [...document.querySelectorAll('h1, h2, h3, h4')].map(({ tagName, textContent }) => `${tagName} ${words(textContent)}`);
    const here = find(markdown, 'heading').map((node) => `H${String(node.depth)} ${words(toString(node))}`);
    expect(there.filter((heading) => heading !== 'H2 Sources')).toEqual(here);
  });

  it('says the same in both: every table, cell by cell', () => {
    const there = [...withoutFormulae(html).querySelectorAll('table')].map((table) =>
      [...table.rows].map((row) => [...row.cells].map(({ textContent }) => words(textContent))),
    );
    const here = find(markdown, 'table').map((table) => table.children.map((row) => row.children.map((cell) => words(cellWords(cell)))));
    expect(here.length).toBeGreaterThan(12);
    expect(here).toEqual(there);
  });

  it('says the same in both: every number in the sentences', () => {
    const numbersIn = (text: string): string[] => text.match(/\d[\d.\u202f]*/g) ?? [];
    const there = [...withoutFormulae(html).querySelectorAll('main > section[aria-labelledby] > p, main li')]
      .filter((element) => element.closest('.footnotes') === null)
      .map(({ textContent }) => numbersIn(textContent));
    const outside = find(markdown, 'paragraph').map((node) => numbersIn(cellWords(node)));
    const here = new Set(outside.map((numbers) => numbers.join(' ')));
    expect(there.length).toBeGreaterThan(30);
    for (const numbers of there) expect(here).toContain(numbers.join(' '));
  });

  it('is the same, byte for byte, when made again', async () => {
    expect([...(await rendered(smallResults()))]).toEqual([...files]);
  });
});

/** What a reader sees, formulae and marks of sources aside. */
function cellWords(node: Nodes): string {
  if (node.type === 'inlineMath' || node.type === 'footnoteReference' || node.type === 'image') return '';
  if ('children' in node) return node.children.map(cellWords).join('');
  return 'value' in node ? node.value : '';
}

describe('the parts of a report', () => {
  it('are written alone when asked for alone', async () => {
    expect([...(await rendered(smallResults(), new Set(['html']))).keys()]).toEqual(['report.html']);
    const tables = [...(await rendered(smallResults(), new Set(['tables']))).keys()];
    expect(tables.every((name) => name.startsWith('tables/'))).toBe(true);
    const figures = [...(await rendered(smallResults(), new Set(['figures']))).keys()];
    expect(figures.every((name) => name.startsWith('figures/'))).toBe(true);
  });

  it('bring the figures along that the Markdown shows', async () => {
    const files = await rendered(smallResults(), new Set(['markdown']));
    expect([...files.keys()].filter((name) => name.endsWith('.svg')).length).toBeGreaterThan(5);
    expect(files.has('report.html')).toBe(false);
  });

  it('hold together where a study has no claims, no additions, no scan and no authors', async () => {
    const bare = changedResults((results) => {
      results.claims = [];
      results.improvements = {};
      results.combinations = { base: results.combinations.base! };
      results.scan = {};
      results.checks = [];
      results.convergence = {};
      results.dataCorrelation = {};
      results.inputs = [];
    });
    const files = await rendered(bare);
    expectSafePage(files.get('report.html')!);
    expect(files.get('report.md')).toContain('The study states no claims, and has nothing to compare its baseline with.');
  });

  it.each([
    ['every status and verdict', {}],
    ['one parameter and nothing to compare', { parameters: 1, combinations: 1 }],
    ['labels longer than a line', { parameters: 8, combinations: 6, longLabels: true }],
  ])('hold together with %s', async (_, options) => {
    const files = await rendered(inventedResults(options), new Set(['html', 'markdown']));
    const document = expectSafePage(files.get('report.html')!);
    expect(document.body.textContent).not.toMatch(/\b(?:NaN|undefined|null|Infinity)\b|\[object/);
    expect(files.get('report.md')).not.toMatch(/\b(?:NaN|null|Infinity)\b|\[object/);
  });
});
