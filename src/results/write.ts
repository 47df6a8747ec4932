import type { Results } from './schema.js';

/** One result as a line: arrays of numbers stay together, so that a changed number is a changed line in a review. */
const indent = '  ';

/**
 * The text of results.json: keys in the order of the schema, shortest decimal that reads back as the same double, a
 * line feed at the end. Same results, same bytes.
 */
export function writeResults(results: Results): string {
  return `${serialise(results, '')}\n`;
}

function serialise(value: unknown, margin: string): string {
  if (Array.isArray(value)) return serialiseArray(value, margin);
  if (typeof value === 'object' && value !== null) {
    const lines = Object.entries(value).map(
      ([key, inner]) => `${margin}${indent}${JSON.stringify(key)}: ${serialise(inner, margin + indent)}`,
    );
    return lines.length === 0 ? '{}' : `{\n${lines.join(',\n')}\n${margin}}`;
  }
  return JSON.stringify(value);
}

function serialiseArray(values: readonly unknown[], margin: string): string {
  if (values.every((value) => typeof value !== 'object' || value === null)) return `[${values.map((value) => JSON.stringify(value)).join(', ')}]`;
  const lines = values.map((value) => `${margin}${indent}${serialise(value, margin + indent)}`);
  return `[\n${lines.join(',\n')}\n${margin}]`;
}
