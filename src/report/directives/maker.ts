import type { Results } from '../../results/schema.js';
import type { Directive, Scope } from './directive.js';
import { named, TemplateError } from './template-error.js';

/** The maker of that name: one for all results, or one for the combination that an `each` around it is at. */
export function maker<T>(
  all: Readonly<Record<string, (results: Results) => T>>,
  each: Readonly<Record<string, (results: Results, combination: string) => T>>,
  name: string,
  kind: string,
  directive: Directive,
  scope: Scope,
): (results: Results) => T {
  const { combination, page } = scope;
  const bound = Object.fromEntries(
    Object.entries(each).map(([key, make]) => [
      key,
      (results: Results): T => {
        if (combination === null) throw new TemplateError(page, directive, `the ${kind} "${key}" is about one combination: it stands inside ":::each{of=combinations}"`);
        return make(results, combination);
      },
    ]),
  );
  return named({ ...all, ...bound }, name, kind, page, directive);
}
