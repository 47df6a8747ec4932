import { toString } from 'mdast-util-to-string';
import type { PhrasingContent } from 'mdast';
import { superscript, thinSpace } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { cleanInline } from '../markdown/clean.js';
import { say, text } from '../markdown/nodes.js';
import type { Said } from '../markdown/nodes.js';
import { safeTex } from '../markdown/safe-tex.js';

type Parameter = Results['parameters'][number];

/** The symbol of a parameter; its name as code where the study gives no symbol. */
export function parameterLabel(results: Results, name: string): PhrasingContent {
  const parameter = results.parameters.find((one) => one.name === name);
  if (parameter === undefined || parameter.label === name) return { type: 'inlineCode', value: name };
  return safeTex(parameter.label);
}

export function combinationLabel(results: Results, name: string): PhrasingContent[] {
  return cleanInline(results.combinations[name]?.label ?? name);
}

export function probeLabel(results: Results, name: string): PhrasingContent[] {
  return cleanInline(results.probes[name]?.label ?? name);
}

/** A label that may be TeX without dollars, or plain words. */
export function blockLabel(label: string): PhrasingContent[] {
  return /[\\^_]/.test(label) && !label.includes('$') ? [safeTex(label)] : cleanInline(label);
}

/** A unit behind a number, or nothing. */
export function unitAfter(unit: string): PhrasingContent[] {
  return unit === '' ? [] : say`${thinSpace}${unitLabel(unit)}`;
}

/** A unit is plain words, unless it is TeX; the 2 of "deg^2" is raised. */
function unitLabel(unit: string): PhrasingContent[] {
  if (unit.includes('\\')) return blockLabel(unit);
  return [text(unit.replace(/\^(-?\d+)/g, (_, power: string) => superscript(power)))];
}

/** "σ (unit)" for a column's heading. */
export function withUnit(label: Said, unit: string): PhrasingContent[] {
  return unit === '' ? say`${label}` : say`${label} (${unitLabel(unit)})`;
}

export function parameterOf(results: Results, name: string): Parameter {
  return results.parameters.find((one) => one.name === name)!;
}

export function targets(results: Results): readonly string[] {
  return results.parameters.filter(({ role }) => role === 'target').map(({ name }) => name);
}

export function nuisances(results: Results): readonly string[] {
  return results.parameters.filter(({ role }) => role === 'nuisance').map(({ name }) => name);
}

/** Words alone, for where no markup can be. */
export function wordsOf(nodes: readonly PhrasingContent[]): string {
  return nodes.map((node) => toString(node)).join('');
}
