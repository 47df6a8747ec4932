import { readFileSync } from 'node:fs';

/** A table of outside values; each file names its source. */
export function readData(name: string): unknown {
  return JSON.parse(readFileSync(new URL(`./data/${name}.json`, import.meta.url), 'utf8'));
}

/** Correct digits: -log10 of the relative error, 16 where there is none. NIST calls it LRE. */
export function digits(value: number, reference: number): number {
  const error = Math.abs(value - reference) / Math.abs(reference);
  return error === 0 ? 16 : Math.min(16, -Math.log10(error));
}
