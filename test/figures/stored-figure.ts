import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { expect } from 'vitest';

/** One element a line, so that a change can be read in a review. */
function lines(svg: string): string {
  return svg.replaceAll('><', '>\n<');
}

/**
 * Compares a figure with the stored one. Where they differ a twin `-changed.svg` is written beside it: look at both, and rename
 * the twin if the change is meant.
 */
export function expectStored(name: string, svg: string): void {
  const file = new URL(`./stored/${name}.svg`, import.meta.url);
  const twin = new URL(`./stored/${name}-changed.svg`, import.meta.url);
  const drawn = lines(svg);
  const stored = existsSync(file) ? readFileSync(file, 'utf8') : '';
  if (stored === drawn) {
    rmSync(twin, { force: true });
    return;
  }
  writeFileSync(twin, drawn);
  expect.fail(`${name}.svg is not as stored; compare it with ${name}-changed.svg`);
}
