import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { cssString } from '../../src/report/html/css-string.js';
import { renderReport } from '../../src/report/report.js';
import { readTemplates } from '../../src/report/templates.js';
import { expectSafePage } from './page-rules.js';
import { smallResults } from './report-results.js';

describe('templates of a user', () => {
  let folder = '';

  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'sigmafolio-templates-'));
  });

  afterEach(() => {
    rmSync(folder, { recursive: true, force: true });
  });

  it('take the place of those of the same name, and of no other', () => {
    writeFileSync(join(folder, 'data-checks.md'), '## Checks\n\nMine.\n');
    const { pages } = readTemplates(folder);
    expect(pages.get('data-checks')).toBe('## Checks\n\nMine.\n');
    expect(pages.get('responses')).toBe(readTemplates().pages.get('responses'));
  });

  it('may bring a style sheet, which the policy names', async () => {
    writeFileSync(join(folder, 'style.css'), 'body { margin: 3rem }\n');
    const files = await renderReport(smallResults(), new Set(['html']), readTemplates(folder));
    expect(expectSafePage(files.get('report.html')!).querySelector('style')?.textContent).toContain('margin: 3rem');
  });

  it('may not end the style element', async () => {
    writeFileSync(join(folder, 'style.css'), 'body {}</style><script>alert(1)</script>');
    await expect(renderReport(smallResults(), new Set(['html']), readTemplates(folder))).rejects.toThrow('the style sheet holds markup');
  });

  it('are refused under a name that means nothing', () => {
    writeFileSync(join(folder, 'data-check.md'), '## Checks\n');
    expect(() => readTemplates(folder)).toThrow(/^data-check\.md is no template; there are at-a-glance\.md, /);
  });
});

describe('a title at the head of a printed page', () => {
  it.each([
    ['A plain title', '"A plain title"'],
    ['"}</style>', '"\\22 \\7d \\3c \\2f style\\3e "'],
    ['back\\slash', '"back\\5c slash"'],
  ])('%s', (title, css) => {
    expect(cssString(title)).toBe(css);
  });

  it('is cut where it would not fit', () => {
    expect(cssString('x'.repeat(200))).toBe(`"${'x'.repeat(89)}\\2026 "`);
  });
});
