import type { Matrix } from '../arrays/rows.js';
import { readMatrix } from './array-shapes.js';
import { reportDuplicates } from './duplicates.js';
import type { Reading } from './reading.js';
import type { StudyFile } from './schema.js';
import type { Parameter } from './study.js';
import { asymmetry, isPositiveSemidefinite, symmetrised } from './symmetric.js';
import type { YamlFile } from './yaml-positions.js';

/** Parameters with nuisance last, and where each stood in the file. */
export interface ParameterOrder {
  readonly parameters: readonly Parameter[];
  readonly positions: readonly number[];
}

export function orderParameters(study: StudyFile, yaml: YamlFile, reading: Reading): ParameterOrder {
  const all = study.parameters.map(
    (given): Parameter => ({
      name: given.name,
      label: given.label ?? given.name,
      fiducial: given.fiducial,
      unit: given.unit ?? '',
      role: given.role ?? 'target',
      prior: given.prior ?? null,
      reference: given.reference ?? null,
    }),
  );
  reportDuplicates('a parameter', all.map(({ name }) => name), (i) => yaml.place(['parameters', i, 'name']), reading);
  all.forEach(({ name, prior }, i) => {
    if (prior === null || Number.isFinite(1 / prior ** 2)) return;
    reading.report({
      what: 'a prior too narrow for double precision',
      where: yaml.place(['parameters', i, 'prior']),
      found: `${String(prior)} for ${name}`,
      expected: 'a prior whose inverse square is a number',
      remedy: 'check its unit; a parameter that is known exactly is best left out',
    });
  });
  const indices = all.map((_, i) => i);
  const positions = [...indices.filter((i) => all[i]!.role === 'target'), ...indices.filter((i) => all[i]!.role === 'nuisance')];
  return { parameters: positions.map((i) => all[i]!), positions };
}

/** The full prior Fisher matrix, in the order of the parameters. The file holds it in the order of study.yaml. */
export function readPrior(study: StudyFile, yaml: YamlFile, positions: readonly number[], reading: Reading): Matrix | null {
  if (study.prior === undefined) return null;
  const where = yaml.place(['prior']);
  const size = positions.length;
  const matrix = readMatrix(reading, '', study.prior, size, where);
  if (matrix === null) return null;
  const wrong = asymmetry(matrix);
  if (wrong !== null || !isPositiveSemidefinite(symmetrised(matrix))) {
    reading.report({
      what: 'the prior is not a Fisher matrix',
      where,
      found: wrong === null ? 'a matrix with a negative eigenvalue' : `element [${String(wrong.row)}, ${String(wrong.column)}] (counted from 0) differs from its mirror image`,
      expected: 'a symmetric, positive semidefinite matrix: the inverse of a covariance, in the order of parameters',
      remedy: 'check that the file holds the prior Fisher matrix, not a covariance or a factor of it',
    });
    return null;
  }
  const { data } = symmetrised(matrix);
  const ordered = Float64Array.from(data, (_, i) => data[positions[Math.floor(i / size)]! * size + positions[i % size]!]!);
  return { data: ordered, rows: size, columns: size };
}
