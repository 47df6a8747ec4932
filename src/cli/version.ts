import { readFileSync } from 'node:fs';

/** Name and version as package.json has them. */
export function generator(): { readonly name: string; readonly version: string } {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  const { name, version } = JSON.parse(text) as { readonly name: string; readonly version: string };
  return { name, version };
}
