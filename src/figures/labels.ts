import type { Results } from '../results/schema.js';
import { glyphs, plainText } from './glyphs.js';

/** A parameter's label for a drawing, with marks for shifts. */
export function parameterLabel(results: Results, name: string): string {
  const found = results.parameters.find((parameter) => parameter.name === name);
  return found === undefined ? name : isTex(found.label) ? glyphs(found.label) : found.label;
}

/** The same for descriptions. */
export function parameterName(results: Results, name: string): string {
  const found = results.parameters.find((parameter) => parameter.name === name);
  return found === undefined ? name : isTex(found.label) ? plainText(found.label) : found.label;
}

/** A label is TeX where it has a command, a shift, or is a letter or two; a bare name stays as it is. */
function isTex(label: string): boolean {
  return /[\\^{]/.test(label) || /^[A-Za-z]_[A-Za-z0-9]$/.test(label);
}

/** A block's label: TeX only where it looks like it. */
export function blockLabel(label: string): string {
  return isTex(label) || label.includes('_') ? glyphs(label) : label;
}

/** Text cut to about a number of characters; the table has the whole of it. */
export function shortened(text: string, most: number): string {
  const letters = Array.from(text);
  return letters.length <= most ? text : `${letters.slice(0, most - 1).join('')}…`;
}

/** Targets, then nuisance parameters, as the results order them. */
export function parameterNames(results: Results, role?: 'target' | 'nuisance'): readonly string[] {
  return results.parameters.filter((parameter) => role === undefined || parameter.role === role).map(({ name }) => name);
}

/** An axis label: the coordinate and its unit. */
export function axisLabel(coordinate: string, unit: string): string {
  return unit === '' ? coordinate : `${coordinate} [${unit}]`;
}
