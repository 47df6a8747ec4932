import type { Results } from '../results/schema.js';

/** Control characters, and those that turn the direction of what follows: neither may reach a page, and SVG does not allow the first. */
const unprintable = /[\u0000-\u0008\u000B-\u001F\u007F-\u009F\u202A-\u202E\u2066-\u2069\uFFFE\uFFFF]/g;

/** Results whose words can be printed: lines only where the study may write several, which is in its summary and notes. */
export function printable(results: Results): Results {
  const lines = linesOf(results) as Results;
  const { study, probes } = results;
  return {
    ...lines,
    study: { ...lines.study, summary: blockOf(study.summary) },
    probes: Object.fromEntries(Object.entries(lines.probes).map(([name, probe]) => [name, { ...probe, notes: blockOf(probes[name]?.notes ?? null) }])),
  };
}

/** Every word in one line, at any depth. */
function linesOf(value: unknown): unknown {
  if (typeof value === 'string') return value.replace(/\s+/g, ' ').replace(unprintable, '').trim();
  if (Array.isArray(value)) return value.map(linesOf);
  if (typeof value !== 'object' || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, linesOf(inner)]));
}

function blockOf(words: string | null): string | null {
  return words === null ? null : words.replace(/\r\n?/g, '\n').replace(unprintable, '');
}
