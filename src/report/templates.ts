import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The pages of the report, Markdown by name, and its style sheet. */
export interface Templates {
  readonly pages: ReadonlyMap<string, string>;
  readonly style: string;
}

/** The templates that come with the program. */
const packaged = fileURLToPath(new URL('../../templates/', import.meta.url));

/** The templates of the program; files of the same name in another folder take their place. */
export function readTemplates(overrides: string | null = null): Templates {
  const files = new Map(filesOf(packaged));
  for (const [name, content] of overrides === null ? [] : filesOf(overrides)) {
    if (!files.has(name)) throw new Error(`${name} is no template; there are ${[...files.keys()].sort().join(', ')}`);
    files.set(name, content);
  }
  const pages = [...files].filter(([name]) => name.endsWith('.md')).map(([name, content]) => [name.slice(0, -'.md'.length), content] as const);
  return { pages: new Map(pages), style: files.get('style.css')! };
}

function filesOf(folder: string): readonly (readonly [string, string])[] {
  return readdirSync(folder)
    .filter((name) => /^[a-z-]+\.(?:md|css)$/.test(name))
    .sort()
    .map((name) => [name, readFileSync(join(folder, name), 'utf8')] as const);
}
