import type { Nodes } from 'mdast';

/** A template that cannot be used: the page, the line, and what to do. */
export class TemplateError extends Error {
  override readonly name = 'TemplateError';

  constructor(page: string, node: Nodes | null, what: string) {
    const line = node?.position?.start.line;
    super(`templates/${page}.md${line === undefined ? '' : `:${String(line)}`}: ${what}`);
  }
}

/** The entry of a table of makers, or an error that lists them. */
export function named<T>(makers: Readonly<Record<string, T>>, name: string, kind: string, page: string, node: Nodes): T {
  const maker = Object.hasOwn(makers, name) ? makers[name] : undefined;
  if (maker === undefined) throw new TemplateError(page, node, `there is no ${kind} "${name}"; there are ${Object.keys(makers).sort().join(', ')}`);
  return maker;
}
