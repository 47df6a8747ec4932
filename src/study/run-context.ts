import { unknownName } from './nearest-name.js';
import { reportDuplicates } from './duplicates.js';
import type { KeyPath } from './key-path.js';
import type { Place } from './problems.js';
import type { Reading } from './reading.js';
import type { Column, Parameter } from './study.js';

/** What the parts of one run need to know to read themselves. */
export interface RunContext {
  readonly reading: Reading;
  /** The run's folder, relative to the study. */
  readonly folder: string;
  readonly place: (path: KeyPath) => Place;
  readonly columns: readonly Column[];
  readonly parameters: readonly Parameter[];
}

/**
 * A derivative for every parameter of the study: from the run's `derivatives` by `read`, or insensitive where the run says so. A parameter that is
 * in neither list, or in both, is an error: nothing is taken to be zero in silence.
 */
export function everyDerivative<Given, Derivative>(
  context: RunContext,
  given: Readonly<Record<string, Given>>,
  insensitive: readonly string[],
  read: (given: Given, parameter: Parameter) => Derivative | null,
): Readonly<Record<string, Derivative | { readonly kind: 'insensitive' }>> {
  const { parameters, place, reading } = context;
  const names = parameters.map(({ name }) => name);
  for (const name of Object.keys(given)) {
    if (!names.includes(name)) reading.report(unknownName('a parameter', name, names, place(['derivatives', name])));
  }
  insensitive.forEach((name, i) => {
    if (!names.includes(name)) reading.report(unknownName('a parameter', name, names, place(['insensitive', i])));
  });
  reportDuplicates('a parameter', insensitive, (i) => place(['insensitive', i]), reading);
  const derivatives: Record<string, Derivative | { readonly kind: 'insensitive' }> = {};
  for (const parameter of parameters) {
    const own = Object.hasOwn(given, parameter.name) ? given[parameter.name] : undefined;
    const excused = insensitive.includes(parameter.name);
    if ((own === undefined) === !excused) reading.report(coverage(parameter.name, excused, context));
    const derivative = own === undefined ? null : read(own, parameter);
    if (derivative !== null) derivatives[parameter.name] = derivative;
    else if (excused) derivatives[parameter.name] = { kind: 'insensitive' };
  }
  return derivatives;
}

function coverage(parameter: string, both: boolean, { place }: RunContext) {
  return both
    ? {
        what: 'a parameter has a derivative and none',
        where: place(['derivatives', parameter]),
        found: `${parameter} under derivatives: and under insensitive:`,
        expected: 'one of the two',
        remedy: 'remove it from insensitive:, or remove its derivative',
      }
    : {
        what: 'a parameter has no derivative',
        where: place(['derivatives']),
        found: `${parameter} is neither under derivatives: nor under insensitive:`,
        expected: 'a derivative of every parameter of study.yaml in every run',
        remedy: `add its derivative; if the probes of this run do not depend on it, write insensitive: [${parameter}]`,
      };
}

/** Reports when not exactly one of some keys is given; says which one is. */
export function onlyKey<Key extends string>(given: object, keys: readonly Key[], path: KeyPath, { place, reading }: Pick<RunContext, 'place' | 'reading'>): Key | null {
  const found = keys.filter((key) => Object.hasOwn(given, key));
  if (found.length === 1) return found[0]!;
  reading.report({
    what: found.length === 0 ? 'a key is missing' : 'keys exclude each other',
    where: place(path),
    found: found.length === 0 ? 'none of them' : found.join(' and '),
    expected: `exactly one of ${keys.join(', ')}`,
    remedy: found.length === 0 ? 'add the one that applies' : 'remove all but one',
  });
  return null;
}

/** Reports keys that mean nothing beside another one. */
export function noneOf(given: object, keys: readonly string[], beside: string, path: KeyPath, { place, reading }: Pick<RunContext, 'place' | 'reading'>): void {
  for (const key of keys.filter((candidate) => Object.hasOwn(given, candidate))) {
    reading.report({
      what: 'a key means nothing here',
      where: place([...path, key]),
      found: `${key}: beside ${beside}`,
      expected: `${beside} without ${key}:`,
      remedy: 'remove one of the two',
    });
  }
}
