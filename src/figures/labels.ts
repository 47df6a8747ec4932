import type { Results } from '../results/schema.js';
import { glyphs, greekLetter, plainText } from './glyphs.js';
import { fittedApart } from './text-width.js';

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

/** Labels of parameters with their units, cut to a width and still different from one another. */
export function shortLabels(results: Results, width: number, size: number, bold: boolean): ReadonlyMap<string, string> {
  const labels = results.parameters.map(({ name, unit }) => withUnit(parameterLabel(results, name), unit));
  const short = fittedApart(labels, width, size, bold);
  return new Map(results.parameters.map(({ name }, k) => [name, short[k]!]));
}

/** A block's label: TeX only where it looks like it. */
export function blockLabel(label: string): string {
  return isTex(label) || label.includes('_') ? glyphs(label) : label;
}

/** Targets, then nuisance parameters, as the results order them. */
export function parameterNames(results: Results, role?: 'target' | 'nuisance'): readonly string[] {
  return results.parameters.filter((parameter) => role === undefined || parameter.role === role).map(({ name }) => name);
}

/** An axis label: the coordinate and its unit. Coordinates named after a Greek letter show as the letter. */
export function axisLabel(coordinate: string, unit: string): string {
  const name = greekLetter(coordinate) ?? coordinate;
  return unit === '' ? name : `${name} [${unit}]`;
}

/** An error or a derivative has the unit of its parameter. */
function withUnit(label: string, unit: string): string {
  return unit === '' ? label : `${label} [${unit}]`;
}
