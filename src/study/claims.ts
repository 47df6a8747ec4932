import { reportDuplicates } from './duplicates.js';
import { unknownName } from './nearest-name.js';
import type { Reading } from './reading.js';
import { noneOf, onlyKey } from './run-context.js';
import type { ClaimFile, StudyFile } from './schema.js';
import type { Claim, ClaimTest } from './study.js';
import type { YamlFile } from './yaml-positions.js';

/** Claims with every name checked. Those that cannot be tested are reported and left out. */
export function readClaims(study: StudyFile, yaml: YamlFile, reading: Reading): readonly Claim[] {
  const claims = study.claims ?? [];
  reportDuplicates('a claim', claims.map(({ id }) => id), (i) => yaml.place(['claims', i, 'id']), reading);
  return claims.flatMap((claim, i) => readClaim(claim, i, study, yaml, reading) ?? []);
}

function readClaim(given: ClaimFile, index: number, study: StudyFile, yaml: YamlFile, reading: Reading): Claim | null {
  const path = ['claims', index];
  const parameters = study.parameters.map(({ name }) => name);
  const combinations = study.combinations.map(({ name }) => name);
  if (!parameters.includes(given.parameter)) reading.report(unknownName('a parameter', given.parameter, parameters, yaml.place([...path, 'parameter'])));
  for (const key of ['combination', 'against'] as const) {
    const name = given[key];
    if (name !== undefined && !combinations.includes(name)) reading.report(unknownName('a combination', name, combinations, yaml.place([...path, key])));
  }
  const context = { place: yaml.place, reading };
  const quantity = onlyKey(given, ['gain', 'size'], path, context);
  const rule = quantity === null ? undefined : given[quantity];
  if (quantity === null || rule === undefined) return null;
  const against = given.against ?? study.baseline;
  if (quantity === 'size') noneOf(given, ['against'], 'size:', path, context);
  if (quantity === 'gain' && against === given.combination) reading.report(againstItself(against, index, given.against !== undefined, yaml));
  const test = readTest(rule, [...path, quantity], yaml, reading);
  const { id, text, parameter, combination, error = 'marginalised' } = given;
  return test === null ? null : { id, text, parameter, combination, against, error, quantity, test };
}

function againstItself(name: string, index: number, explicit: boolean, yaml: YamlFile) {
  return {
    what: 'a claim compares a combination with itself',
    where: yaml.place(['claims', index, explicit ? 'against' : 'combination']),
    found: explicit ? name : `${name}, which is the baseline`,
    expected: 'two different combinations',
    remedy: explicit ? 'name another combination under against:' : 'name another combination, or add against:',
  };
}

function readTest(rule: NonNullable<ClaimFile['gain']>, path: readonly (string | number)[], yaml: YamlFile, reading: Reading): ClaimTest | null {
  const kind = onlyKey(rule, ['at_least', 'at_most', 'between'], path, { place: yaml.place, reading });
  if (kind === 'at_least' && rule.at_least !== undefined) return { kind: 'at least', threshold: rule.at_least };
  if (kind === 'at_most' && rule.at_most !== undefined) return { kind: 'at most', threshold: rule.at_most };
  if (kind !== 'between' || rule.between === undefined) return null;
  const [low, high] = rule.between;
  if (low < high) return { kind: 'between', low, high };
  reading.report({
    what: 'two bounds are not in order',
    where: yaml.place([...path, 'between']),
    found: `[${String(low)}, ${String(high)}]`,
    expected: 'the lower bound first, and the upper above it',
    remedy: low === high ? 'use at_least or at_most for a single bound' : 'exchange the two',
  });
  return null;
}
