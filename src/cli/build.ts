import path from 'node:path';
import { forecast } from '../forecast/forecast.js';
import { writeWhole } from '../output/whole-folder.js';
import type { Results } from '../results/schema.js';
import { writeResults } from '../results/write.js';
import { loadStudy } from '../study/load.js';
import type { ExitCode } from './exit-codes.js';
import { exitCodes } from './exit-codes.js';
import type { Terminal } from './terminal.js';
import { generator } from './version.js';

export const buildParts = ['results', 'html', 'markdown', 'figures', 'tables'] as const;
export type BuildPart = (typeof buildParts)[number];

export interface BuildOptions {
  readonly out: string | undefined;
  readonly only: ReadonlySet<BuildPart>;
  readonly requireClaims: boolean;
}

/** Builds a study's report. Nothing is written before every number and every page is made. */
export async function build(folder: string, options: BuildOptions, terminal: Terminal): Promise<ExitCode> {
  const study = await loadStudy(folder);
  const results = forecast(study, generator());
  const files = new Map<string, string>();
  if (options.only.has('results')) files.set('results.json', writeResults(results));
  const rendered = new Set([...options.only].filter((part) => part !== 'results'));
  if (rendered.size > 0) {
    // Loaded only now: what renders takes a second to load, and numbers alone do not need it.
    const { renderReport } = await import('../report/report.js');
    const { readTemplates } = await import('../report/templates.js');
    for (const [name, text] of await renderReport(results, rendered, readTemplates())) files.set(name, text);
  }
  const out = options.out ?? path.join(folder, 'report');
  writeWhole(out, files, { study: folder, inputs: study.inputs.map((input) => input.path) });
  for (const line of claimLines(results)) terminal.message(line);
  terminal.result(path.join(out, files.has('report.html') ? 'report.html' : [...files.keys()][0]!));
  const unsupported = results.claims.some(({ verdict }) => verdict !== 'supported');
  return options.requireClaims && unsupported ? exitCodes.gate : exitCodes.done;
}

function claimLines({ claims, checks }: Results): readonly string[] {
  const warnings = checks.filter(({ level }) => level === 'warning').length;
  return [
    ...claims.map(({ id, verdict }) => `claim ${id}: ${verdict}`),
    ...(warnings > 0 ? [`${String(warnings)} ${warnings === 1 ? 'warning' : 'warnings'}: see the data checks in the report`] : []),
  ];
}
