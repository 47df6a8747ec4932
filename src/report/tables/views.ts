import { percent } from '../../results/rounding.js';
import type { Estimate, Results } from '../../results/schema.js';
import { say } from '../markdown/nodes.js';
import { prose } from '../words/prose.js';
import { combinationLabel, parameterLabel, targets } from '../words/labels.js';
import { noNumber, sign, view } from '../words/values.js';
import type { Said } from '../markdown/nodes.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

const columns = [
  words('Parameter'),
  words('Combination'),
  numbers('Corrected'),
  numbers('Limit'),
  numbers('Split'),
  numbers('Noise: derivatives, covariance'),
  words('Status'),
  words('Why'),
];

/** The three views of every error, side by side. */
export const views: TableMaker = (results) => ({
  id: 'views',
  caption: say`Three views of each marginalised error, the relative standard error from the derivatives and from the covariance, and what follows.`,
  columns,
  rows: targets(results).flatMap((name) =>
    Object.entries(results.combinations).flatMap(([combination, { errors }]) => rowOf(results, name, combination, errors[name]?.marginalised)),
  ),
});

/** The same for the gains, which is what the claims rest on. */
export const gainViews: TableMaker = (results) => ({
  id: 'views-gains',
  caption: say`Three views of each improvement of a marginalised error.`,
  columns,
  rows: targets(results).flatMap((name) =>
    Object.entries(results.improvements).flatMap(([combination, gains]) => rowOf(results, name, combination, gains[name]?.marginalised)),
  ),
});

function rowOf(results: Results, name: string, combination: string, estimate: Estimate | undefined): Said[][] {
  if (estimate === undefined) return [];
  return [
    [
      parameterLabel(results, name),
      combinationLabel(results, combination),
      estimate.corrected === null ? noNumber(estimate.status) : view(estimate.corrected, estimate),
      view(estimate.limit, estimate),
      view(estimate.split, estimate),
      `${share(estimate.parts.derivatives)}, ${share(estimate.parts.covariance)}`,
      sign(estimate.status),
      prose(estimate.why),
    ],
  ];
}

function share(part: number | null): string {
  return part === null ? 'not known' : percent(part);
}

/** What the words of status mean, as the program applies them. */
export const statuses: TableMaker = ({ rules, study }) => ({
  id: 'statuses',
  caption: say`The rules of the status. The tolerance of this study is ${percent(study.tolerance)}.`,
  columns: [words('Status'), words('Rule')],
  rows: rules.statuses.map(({ status, rule }) => [sign(status), prose(rule)]),
});

export const verdicts: TableMaker = ({ rules, claims }) =>
  claims.length === 0
    ? null
    : {
        id: 'verdicts',
        caption: say`The rules of the verdict on a claim.`,
        columns: [words('Verdict'), words('Rule')],
        rows: rules.verdicts.map(({ verdict, rule }) => [sign(verdict), prose(rule)]),
      };
