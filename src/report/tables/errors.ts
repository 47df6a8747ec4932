import { asGiven } from '../../results/rounding.js';
import type { Results } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { combinationLabel, nuisances, parameterLabel, parameterOf, targets, withUnit } from '../words/labels.js';
import { corrected, noNumber, raw, sign, view } from '../words/values.js';
import type { ReportTable, TableMaker } from './table.js';
import { numbers, words } from './table.js';

const columns = [
  words('Parameter'),
  words('Combination'),
  numbers('Raw'),
  numbers('Corrected (68 % interval)'),
  words('Status'),
  numbers('Fixed, corrected'),
  words('Status, fixed'),
];

/** Errors of the parameters that the study is about. */
export const errors: TableMaker = (results) =>
  of(results, targets(results), {
    id: 'errors',
    caption: say`Errors (one standard deviation), marginalised over all other parameters, and with all others fixed. Priors are included.`,
  });

export const nuisanceErrors: TableMaker = (results) =>
  of(results, nuisances(results), { id: 'errors-nuisance', caption: say`The same for the nuisance parameters, which are marginalised over.` });

function of(results: Results, parameters: readonly string[], head: Pick<ReportTable, 'id' | 'caption'>): ReportTable {
  const rows = parameters.flatMap((name) =>
    Object.entries(results.combinations).flatMap(([combination, { errors: found }]) => {
      const both = found[name];
      if (both === undefined) return [];
      const label = withUnit(parameterLabel(results, name), parameterOf(results, name).unit);
      const { marginalised, fixed } = both;
      return [[label, combinationLabel(results, combination), raw(marginalised), corrected(marginalised), sign(marginalised.status), fixed.corrected === null ? noNumber(fixed.status) : view(fixed.corrected, fixed), sign(fixed.status)]];
    }),
  );
  return { ...head, columns, rows };
}

/** What is varied, around which model, with which priors. */
export const parameters: TableMaker = (results) => ({
  id: 'parameters',
  caption: say`Parameters, targets first. A prior is Gaussian and used in every combination; a reference is a line to compare with and enters no number.`,
  columns: [words('Parameter'), words('Name'), numbers('Fiducial value'), words('Role'), numbers('Prior (1 σ)'), words('Reference error')],
  rows: results.parameters.map(({ name, unit, fiducial, role, prior, reference }) => [
    withUnit(parameterLabel(results, name), unit),
    { type: 'inlineCode', value: name },
    asGiven(fiducial),
    role,
    prior === null ? 'none' : asGiven(prior),
    reference === null ? 'none' : `${reference.label}: ${asGiven(reference.error)}`,
  ]),
});
