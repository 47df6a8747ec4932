import { JSDOM } from 'jsdom';
import type { Nodes } from 'mdast';
import remarkGfm from 'remark-gfm';
import remarkMath from 'remark-math';
import remarkParse from 'remark-parse';
import { unified } from 'unified';
import { visit } from 'unist-util-visit';
import { describe, expect, it } from 'vitest';
import type { Results } from '../../src/results/schema.js';
import { expectSafePage } from './page-rules.js';
import { changedResults, rendered } from './report-results.js';

const attacks = [
  '<script>alert(1)</script>',
  '<img src=x onerror=alert(1)>',
  '"><svg onload=alert(1)>',
  '[x](javascript:alert(1)) [y](vbscript:x) [z](data:text/html,<script>1</script>)',
  '![tracked](https://example.invalid/pixel.png)',
  '[ref]\n\n[ref]: javascript:alert(1)',
  '<https://example.invalid/a> <javascript:alert(1)>',
  '</style><script>alert(1)</script>',
  '</title></figcaption></table></main><h1>mine</h1>',
  'a | b | c\n| - | - |\n| d',
  '$\\href{javascript:alert(1)}{x}$ $\\includegraphics{https://example.invalid/a.png}$ $\\class{sign}{x}$ $\\style{color:red}{x}$',
  '$\\htmlStyle{color:red}{x}$ $\\def\\a{\\a\\a}\\a$ $a | b$ $x$$y$',
  '::figure{name=gains} :value{name=title} :::each{of=combinations}',
  '# heading\n\n##### deep\n\n- [ ] task',
  '[^1]\n\n[^1]: a note <b onclick=alert(1)>x</b>',
  '*/}@import url(https://example.invalid/a.css);/*',
  "\\';alert(1)//",
  '`` ` `` ``` ~~~',
  '&lt;script&gt; &#60;script&#62; \u202Ereversed \u0000 nul',
];

/** One place after another where a study's author can put words. */
const places: Readonly<Record<string, (results: Results, words: string) => void>> = {
  title: (results, words) => (results.study.title = words),
  summary: (results, words) => (results.study.summary = words),
  author: (results, words) => (results.study.authors = [{ name: words, orcid: words, affiliation: words }]),
  licence: (results, words) => (results.study.licence = words),
  'label of a parameter': (results, words) => (results.parameters[0]!.label = words),
  'unit of a parameter': (results, words) => (results.parameters[0]!.unit = words),
  'label of a reference': (results, words) => (results.parameters[0]!.reference = { label: words, error: 1 }),
  'label of a combination': (results, words) => (results.combinations.joint!.label = words),
  'label of a probe': (results, words) => (results.probes.added!.label = words),
  'notes of a probe': (results, words) => (results.probes.added!.notes = words),
  'text of a claim': (results, words) => (results.claims[0]!.text = words),
  'label of a block': (results, words) => (results.vectors.added!.only!.label = words),
  'unit of a coordinate': (results, words) => (results.vectors.added!.only!.unit = words),
  'name of a file': (results, words) => (results.inputs[0]!.path = words),
  'provenance of a run': (results, words) => (results.runs.run!.provenance = [[words, words]]),
  'unit of a volume': (results, words) => Object.assign(results.runs.run!, { volume: 1, volumeUnit: words }),
  'message of a check': (results, words) => (results.checks = [{ id: 'x', level: 'warning', message: words, where: words }]),
  'reason of a status': (results, words) => (results.improvements.joint!.p0!.marginalised.why = words),
};

const all = attacks.join('\n\n');

describe('words of a study cannot do anything', () => {
  it.each(Object.keys(places))('as the %s', async (place) => {
    const files = await rendered(changedResults((results) => { places[place]!(results, all); }), new Set(['html', 'markdown']));
    const document = expectSafePage(files.get('report.html')!);
    expect(document.querySelectorAll('main')).toHaveLength(1);
    expect(document.querySelectorAll('h1')).toHaveLength(1);
    expectSafeMarkdown(files.get('report.md')!);
    expectSameShape(files);
    for (const [name, svg] of files) if (name.endsWith('.svg')) expectSafeDrawing(svg);
  });

  it.each(attacks)('each by itself, everywhere at once: %s', async (attack) => {
    const everywhere = changedResults((results) => {
      for (const put of Object.values(places)) put(results, attack);
    });
    const files = await rendered(everywhere, new Set(['html', 'markdown']));
    expectSafePage(files.get('report.html')!);
    expectSafeMarkdown(files.get('report.md')!);
    expectSameShape(files);
  });
});

function parse(markdown: string) {
  return unified().use(remarkParse).use(remarkGfm).use(remarkMath).parse(markdown);
}

/** A code host shows HTML and remote pictures: so there must be none, however it reads the file. */
function expectSafeMarkdown(markdown: string): void {
  visit(parse(markdown), (node: Nodes) => {
    expect(node.type).not.toBe('html');
    expect(node.type).not.toBe('definition');
    if (node.type === 'image') expect(node.url).toMatch(/^figures\/[\w-]+\.svg$/);
    if (node.type === 'link') expect(node.url).toMatch(/^(?:#[\p{L}\p{N}_-]+|https?:\/\/|mailto:)/u);
    if (node.type === 'inlineMath' || node.type === 'math') expect(node.value).not.toMatch(/\\(?:href|url|includegraphics|class|style|html)/);
  });
}

/** No word may break a table or end a list: both outputs have tables of the same rows and cells. */
function expectSameShape(files: ReadonlyMap<string, string>): void {
  const { document } = new JSDOM(files.get('report.html')).window;
  const there = [...document.querySelectorAll('figure.table table')].map((table) => [...table.querySelectorAll('tr')].map((row) => row.children.length));
  const here: number[][] = [];
  const tree = parse(files.get('report.md')!);
  tree.children.forEach((node, i) => {
    const before = tree.children[i - 1];
    const captioned = before?.type === 'paragraph' && before.children[0]?.type === 'strong';
    if (node.type === 'table' && captioned) here.push(node.children.map((row) => row.children.length));
  });
  expect(here).toEqual(there);
}

function expectSafeDrawing(svg: string): void {
  const { document } = new JSDOM(svg, { contentType: 'image/svg+xml' }).window;
  expect(document.querySelectorAll('script, foreignObject, image, a, style')).toHaveLength(0);
  for (const element of document.querySelectorAll('*')) {
    for (const { name } of element.attributes) expect(name).not.toMatch(/^on|href/);
  }
}
