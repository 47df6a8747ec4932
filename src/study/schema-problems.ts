import type { z } from 'zod';
import type { KeyPath } from './key-path.js';
import { nearestName } from './nearest-name.js';
import type { Problem } from './problems.js';
import type { YamlFile } from './yaml-positions.js';

/** What a schema makes of a file. With problems, `value` is what remains without the unknown keys, where that is enough to go on checking. */
export interface Parsed<T> {
  readonly value: T | null;
  readonly problems: readonly Problem[];
}

/** Checks a file against a schema; every departure becomes a problem with its line. */
export function parseWith<T extends z.ZodType>(schema: T, file: YamlFile): Parsed<z.infer<T>> {
  const result = schema.safeParse(file.value, { error: expectedText });
  if (result.success) return { value: result.data, problems: [] };
  const { issues } = result.error;
  const problems = issues.flatMap((issue) => problemsOf(issue, file));
  if (!issues.every((issue) => issue.code === 'unrecognized_keys')) return { value: null, problems };
  const rest = schema.safeParse(withoutKeys(file.value, issues.flatMap((issue) => issue.keys.map((key) => [...pathOf(issue), key]))));
  return { value: rest.success ? rest.data : null, problems };
}

/**
 * What the schema expects, kept as the message of an issue; for unknown keys the valid ones, joined by `, ` (no key has a comma).
 * Used where the schema itself has no words.
 */
const expectedText: z.core.$ZodErrorMap = (issue) => {
  if (issue.code === 'invalid_type') return kindNames[issue.expected] ?? issue.expected;
  if (issue.code === 'invalid_value') return issue.values.length === 1 ? String(issue.values[0]) : `one of ${issue.values.map(String).join(', ')}`;
  return issue.code === 'unrecognized_keys' ? keysOf(issue.inst).join(', ') : undefined;
};

const kindNames: Readonly<Record<string, string>> = { string: 'text', number: 'a finite number', array: 'a list', object: 'keys with values', record: 'keys with values' };

function keysOf(schema: unknown): readonly string[] {
  const shape = (schema as { readonly _zod?: { readonly def?: { readonly shape?: object } } } | undefined)?._zod?.def?.shape;
  return shape === undefined ? [] : Object.keys(shape);
}

function pathOf(issue: { readonly path: readonly PropertyKey[] }): KeyPath {
  return issue.path.map((step) => (typeof step === 'symbol' ? String(step) : step));
}

function problemsOf(issue: z.core.$ZodIssue, file: YamlFile): readonly Problem[] {
  const path = pathOf(issue);
  if (issue.code === 'unrecognized_keys') return issue.keys.map((key) => unknownKey(key, path, issue.message, file));
  const value = valueAt(file.value, path);
  const last = path.at(-1);
  if (value === null && last === undefined) {
    return [{ what: 'a file is empty', where: file.place(path), found: 'no key', expected: issue.message, remedy: 'fill the file: see the format of a study' }];
  }
  if (value === undefined) {
    return [
      {
        what: 'a key is missing',
        where: file.place(path),
        found: 'nothing',
        expected: issue.message,
        remedy: last === undefined ? 'fill the file' : `add ${String(last)}:`,
      },
    ];
  }
  return [
    { what: 'a value is not what it should be', where: file.place(path), found: describe(value), expected: issue.message, remedy: remedyFor(value, issue) },
  ];
}

function unknownKey(key: string, path: KeyPath, valid: string, file: YamlFile): Problem {
  const nearest = nearestName(key, valid.split(', '));
  return {
    what: 'a key is unknown',
    where: file.place([...path, key]),
    found: key,
    expected: `one of ${valid}`,
    remedy: nearest === null ? 'remove it, or use one of these' : `write ${nearest}, if that is what was meant`,
  };
}

function remedyFor(value: unknown, issue: z.core.$ZodIssue): string {
  if (value === null) return 'give it a value, or remove the key';
  if (issue.code === 'invalid_type' && issue.expected === 'string' && (typeof value === 'number' || typeof value === 'boolean')) {
    return 'put it in quotes, so that it is text';
  }
  if (typeof value === 'string' && issue.message.includes('number') && !issue.message.includes('name')) {
    return 'write a plain number: no quotes, no unit, a point for decimals';
  }
  if (issue.code === 'invalid_value' && typeof value === 'string') {
    const nearest = nearestName(value, issue.values.map(String));
    if (nearest !== null) return `write ${nearest}, if that is what was meant`;
  }
  return `write ${issue.message}`;
}

function valueAt(value: unknown, path: KeyPath): unknown {
  let inside = value;
  for (const step of path) {
    if (typeof inside !== 'object' || inside === null || !Object.hasOwn(inside, step)) return undefined;
    inside = (inside as Readonly<Record<string | number, unknown>>)[step];
  }
  return inside;
}

const longestShown = 60;

/** A value in a few words. */
function describe(value: unknown): string {
  if (value === null) return 'nothing behind the colon';
  if (Array.isArray(value)) return `a list of ${String(value.length)}`;
  if (typeof value === 'object') return `keys with values: ${Object.keys(value).slice(0, 8).join(', ')}`;
  if (typeof value === 'string') return `text: ${value.length > longestShown ? `${value.slice(0, longestShown)}…` : value}`;
  return typeof value === 'number' || typeof value === 'boolean' ? String(value) : 'something else';
}

function withoutKeys(value: unknown, paths: readonly KeyPath[]): unknown {
  const copy: unknown = structuredClone(value);
  for (const path of paths) {
    const holder = valueAt(copy, path.slice(0, -1));
    if (typeof holder === 'object' && holder !== null) Reflect.deleteProperty(holder, path.at(-1) ?? '');
  }
  return copy;
}
