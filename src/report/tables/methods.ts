import { asGiven, compact, count, significant } from '../../results/rounding.js';
import type { DerivativeResult, Results } from '../../results/schema.js';
import type { Said } from '../markdown/nodes.js';
import { cite, inlineMath, say } from '../markdown/nodes.js';
import { combinationLabel, parameterLabel } from '../words/labels.js';
import { slug } from '../slug.js';
import type { CombinationTableMaker } from './table.js';
import { numbers, words } from './table.js';

/** Factors that answer other questions, on variances and as their square root on errors. */
export const factors: CombinationTableMaker = (results, combination) => {
  const found = results.combinations[combination]!;
  const rows = found.suites.flatMap(({ suite, factors: of }): Said[][] => {
    if (of === null) return [];
    const row = (question: Said, source: string, value: number | null): Said[] => [
      question,
      { type: 'inlineCode', value: suite },
      value === null ? 'does not exist' : significant(value, 4),
      value === null ? 'does not exist' : significant(Math.sqrt(value), 4),
      say`${source}${cite(slug(source))}`,
    ];
    return [
      row('Unbiased variance of a parameter', 'Taylor and Joachimi 2014', of.taylorJoachimi),
      row('Scatter of estimates in an analysis with this covariance', 'Dodelson and Schneider 2013', of.dodelsonSchneider),
      row('The same, over the variance that such an analysis would quote', 'Percival and others 2014', of.percival2014),
      row('Variance with the frequentist-matching prior', 'Percival and others 2022', of.percival2022),
    ];
  });
  return {
    id: `factors-${combination}`,
    caption: say`${combinationLabel(results, combination)}: factors that answer other questions. They are in no number of this report, and must not be multiplied together.`,
    columns: [words('Question'), words('Suite'), numbers('On a variance'), numbers('On an error (its square root)'), words('Source')],
    rows,
  };
};

/** How each derivative was made. */
export const derivatives: CombinationTableMaker = (results, combination) => {
  const found = results.combinations[combination]!;
  const runs = [...new Set(found.suites.flatMap((suite) => suite.runs))];
  return {
    id: `derivatives-${combination}`,
    caption: say`${combinationLabel(results, combination)}: derivatives. ${inlineMath('N_\\mathrm{d}')} is the number of realisations, the correlation is between the outermost nodes, and the last column is the noise variance of unmatched nodes over that of the nodes as they are (medians over entries).`,
    columns: [
      words('Parameter'),
      words('Run'),
      words('Nodes and weights'),
      words('Matching'),
      numbers(inlineMath('N_\\mathrm{d}')),
      numbers('Correlation'),
      numbers('Noise cut by'),
    ],
    rows: found.parameters.flatMap((name) =>
      runs.flatMap((run) => {
        const derivative = results.runs[run]?.derivatives[name];
        return derivative === undefined ? [] : [rowOf(results, name, run, derivative)];
      }),
    ),
  };
};

function rowOf(results: Results, name: string, run: string, derivative: DerivativeResult): Said[] {
  const known = derivative.kind === 'exact' || derivative.kind === 'insensitive' ? 'does not apply' : 'not known';
  return [
    parameterLabel(results, name),
    { type: 'inlineCode', value: run },
    nodesOf(derivative),
    derivative.matching,
    derivative.realisations === null ? known : count(derivative.realisations),
    derivative.nodeCorrelation === null ? 'not known' : significant(derivative.nodeCorrelation),
    derivative.noiseReduction === null ? 'not known' : significant(derivative.noiseReduction, 2),
  ];
}

const kinds: Readonly<Record<Exclude<DerivativeResult['kind'], 'nodes'>, string>> = {
  'per realisation': 'differenced by the authors, per realisation',
  exact: 'exact, free of noise',
  mean: 'mean derivative, given by the authors',
  insensitive: 'zero by construction',
};

function nodesOf(derivative: DerivativeResult): string {
  if (derivative.kind !== 'nodes') return kinds[derivative.kind];
  return derivative.nodes.map(({ at, weight }) => `${asGiven(at)}: ${compact(weight)}`).join('; ');
}
