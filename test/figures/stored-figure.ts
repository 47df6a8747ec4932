import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';

/** One element a line, so that a change can be read in a review. */
function lines(svg: string): string {
  return svg.replaceAll('><', '>\n<');
}

/**
 * Compares a figure with the stored one. Where they differ a twin `-changed.svg` is written beside it: look at both, and rename
 * the twin if the change is meant. Says which name is not as stored; null where all is well.
 */
export function differsFromStored(name: string, svg: string): string | null {
  const file = new URL(`./stored/${name}.svg`, import.meta.url);
  const twin = new URL(`./stored/${name}-changed.svg`, import.meta.url);
  const drawn = lines(svg);
  const stored = existsSync(file) ? readFileSync(file, 'utf8') : '';
  if (stored === drawn) {
    rmSync(twin, { force: true });
    return null;
  }
  writeFileSync(twin, drawn);
  return `${name}.svg is not as stored; compare it with ${name}-changed.svg`;
}
