import { describe, expect, it } from 'vitest';
import { writeMarkdown } from '../../src/report/markdown/write.js';
import { readTemplates } from '../../src/report/templates.js';
import { reportTree } from '../../src/report/tree.js';
import type { Figure } from '../../src/figures/figure.js';
import { changedResults, smallResults } from './report-results.js';

const figure: Figure = { name: 'gains-marginalised', standalone: '', inline: '', title: 'Gains', alternative: 'None', caption: 'What to see.' };
const figures = new Map<string, readonly Figure[]>([['gains', [figure]]]);

/** The Markdown of a report whose only section holds these lines. */
function made(lines: string, results = smallResults()): string {
  const templates = new Map([
    ['report', '# :value{name=title}\n\n::section{name=only}\n'],
    ['only', `## Only\n\n${lines}\n`],
    ['sources', '[^known]: A source.\n'],
  ]);
  return writeMarkdown(reportTree(results, figures, templates));
}

describe('a template that cannot be used is refused with its place', () => {
  it.each([
    ['an unknown directive', '::figur{name=gains}', 'templates/only.md:3: there is no directive "figur"; there are contents, csv, each, figure, footer, notes, section, see, sentence, table, value'],
    ['an unknown name', 'words\n\n::sentence{name=glans}', /^templates\/only\.md:5: there is no sentence "glans"; there are attribution, byline, checks, /],
    ['a missing attribute', '::table', 'templates/only.md:3: "table" needs the attribute "name"'],
    ['an unknown attribute', '::table{name=errors size=3}', 'templates/only.md:3: "table" has no attribute "size"; it has name'],
    ['a directive in the wrong form', ':::table{name=errors}\n:::', 'templates/only.md:3: "table" is written with two colons, on a line of its own'],
    ['a figure that is not there', '::figure{name=gains only=gains-fixed}', 'templates/only.md:3: the figure "gains" has no "gains-fixed"; it has gains-marginalised'],
    ['a reference to nothing', 'In :see{id=table-nothing}.', 'templates/only.md:3: "see" names "table-nothing", and the report has no such figure or table'],
    ['a loop over nothing', ':::each{of=probes}\n:::', 'templates/only.md:3: "each" goes over combinations or additions, not over "probes"'],
    ['notes of nothing', '::notes{of=runs}', 'templates/only.md:3: there are no notes of "runs"; there are probes, summary'],
    ['a section in a section', '::section{name=only}', 'templates/only.md:3: only report.md can hold sections'],
    ['a combination\'s words outside each', '::sentence{name=methods-data}', 'templates/only.md:3: the sentence "methods-data" is about one combination: it stands inside ":::each{of=combinations}"'],
    ['the same table twice', '::table{name=errors}\n\n::table{name=errors}', 'templates/only.md:5: table-errors is in the report twice'],
  ])('%s', (_, lines, message) => {
    expect(() => made(lines)).toThrow(message);
  });

  it('a section without a template', () => {
    const templates = new Map([['report', '# Title\n\n::section{name=nowhere}\n']]);
    expect(() => reportTree(smallResults(), figures, templates)).toThrow('templates/report.md:3: there is no template "nowhere.md"');
  });

  it('a section that begins with no heading', () => {
    const templates = new Map([['report', '::section{name=only}\n'], ['only', 'words\n']]);
    expect(() => reportTree(smallResults(), figures, templates)).toThrow('a section begins with a heading of level 2 (##)');
  });
});

describe('directives', () => {
  it('number tables in the order of the report, and resolve what refers to them from before', () => {
    const text = made('See :see{id=table-statuses}.\n\n::table{name=errors}\n\n::table{name=statuses}');
    expect(text).toContain('See Table 2.');
    expect(text).toContain('**Table 1.** Errors (one standard deviation)');
  });

  it('repeat what is inside each, with the combination at hand', () => {
    expect(made(':::each{of=combinations}\n### Part :value{name=combination}\n:::')).toContain('### Part base\n\n### Part joint');
    expect(made(':::each{of=additions}\n### Part :value{name=combination}\n:::')).not.toContain('### Part base');
  });

  it('leave figures out that a template leaves out', () => {
    expect(made('::figure{name=gains}')).toContain('![None](figures/gains-marginalised.svg)\n\n**Figure 1.** **Gains.** What to see.');
    expect(made('::figure{name=gains not=gains-marginalised}')).not.toContain('![');
  });

  it('cite sources, and only list those that are cited', () => {
    expect(made('Words.[^known]')).toContain('[^known]: A source.');
    expect(made('Words.')).not.toContain('[^known]');
  });

  it('show the notes of a study as they are, colons and all', () => {
    const results = changedResults((changed) => {
      changed.study.summary = 'At 3:4, ::figure{name=gains} is a word.';
    });
    expect(made('::notes{of=summary}', results)).toContain('At 3:4, ::figure{name=gains} is a word.');
  });
});

describe('the packaged templates', () => {
  it('are all used by the report', () => {
    const { pages } = readTemplates();
    const used = [...pages.get('report')!.matchAll(/::section\{name=([a-z-]+)\}/g)].map(([, name]) => name);
    expect([...pages.keys()].sort()).toEqual(['report', 'sources', ...used].sort());
  });
});
