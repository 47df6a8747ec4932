import type { Figure } from '../figures/figure.js';
import type { Results } from '../results/schema.js';
import { csvFiles } from './csv/all.js';
import { cssString } from './html/css-string.js';
import { renderHtml } from './html/render.js';
import { cleanInline } from './markdown/clean.js';
import { writeMarkdown } from './markdown/write.js';
import { printable } from './printable.js';
import type { Templates } from './templates.js';
import { reportTree } from './tree.js';
import { wordsOf } from './words/labels.js';

export type ReportPart = 'html' | 'markdown' | 'figures' | 'tables';

/** The files of a report by their relative path. `report.md` shows the figures beside it, so asking for it writes them too. */
export async function renderReport(given: Results, parts: ReadonlySet<ReportPart>, templates: Templates): Promise<ReadonlyMap<string, string>> {
  const results = printable(given);
  const files = new Map<string, string>();
  const drawn = parts.has('html') || parts.has('markdown') || parts.has('figures') ? await draw(results) : new Map<string, readonly Figure[]>();
  const figures = [...drawn.values()].flat();
  if (parts.has('html') || parts.has('markdown')) {
    const tree = reportTree(results, drawn, templates.pages);
    const title = wordsOf(cleanInline(results.study.title));
    if (parts.has('markdown')) files.set('report.md', writeMarkdown(tree));
    if (parts.has('html')) files.set('report.html', renderHtml(tree, figures, title, await styleSheet(templates.style, title)));
  }
  if (parts.has('figures') || parts.has('markdown')) {
    for (const { name, standalone } of figures) files.set(`figures/${name}.svg`, standalone);
  }
  if (parts.has('tables')) for (const [name, content] of csvFiles(results)) files.set(`tables/${name}.csv`, content);
  return files;
}

/** Every figure, by the name of its maker. Loaded only here: the document that figures are drawn in takes a second to load. */
async function draw(results: Results): Promise<Map<string, readonly Figure[]>> {
  const { openDrawing } = await import('../figures/drawing.js');
  const { figureMakers } = await import('../figures/all.js');
  const drawing = await openDrawing();
  return new Map(Object.entries(figureMakers).map(([name, make]) => [name, make(results, drawing)]));
}

async function styleSheet(style: string, title: string): Promise<string> {
  const { darkRules } = await import('../figures/palette.js');
  const running = `@page{@top-left{content:${cssString(title)};font:8pt sans-serif}}`;
  return `${style}\n${running}\n@media screen and (prefers-color-scheme:dark){${darkRules('figure.plot')}}\n`;
}
