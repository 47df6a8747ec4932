import type { CheckResult } from '../../results/schema.js';
import type { Run } from '../../study/study.js';
import type { RunDerivative } from '../derivatives.js';
import { derivativeResult } from '../vectors.js';
import type { Check } from './check.js';

/** How the nodes of each derivative are matched, with the measured correlation between them as evidence. */
export const matching: Check = ({ study, suites }) =>
  suites.flatMap((suite) =>
    suite.runs.flatMap((run) =>
      study.parameters.flatMap(({ name }) => describe(run, name, suite.derivatives.get(run.name)!.get(name)!)),
    ),
  );

/** Independent simulations have no correlation; a matched pair that shares less than this gains nothing by matching. Common practice, no source. */
const sharedNoise = 0.1;

function describe(run: Run, parameter: string, derivative: RunDerivative): readonly CheckResult[] {
  if (derivative.kind !== 'nodes') return [];
  const { nodeCorrelation, noiseReduction, realisations } = derivativeResult(derivative);
  const id = `matching-${run.name}-${parameter}`;
  const where = `run ${run.name}, derivatives.${parameter}`;
  const evidence =
    nodeCorrelation === null || noiseReduction === null
      ? ''
      : ` The correlation between the outermost nodes is ${nodeCorrelation.toFixed(2)} (median over entries), and differencing cuts the noise variance by a factor of ${factor(noiseReduction)}.`;
  const rows = `${String(realisations)} realisations`;
  switch (derivative.matching) {
    case 'by seed':
      return [{ id, level: 'ok', message: `Nodes are matched by seed, ${rows}.${evidence}`, where }];
    case 'by index':
      return [indexMatched(id, where, rows, evidence, nodeCorrelation)];
    case 'partly matched':
      return [
        {
          id,
          level: 'warning',
          message: `The nodes do not all have the same seeds, but some are shared: each node is averaged over its own realisations, and the noise they share is accounted for.`,
          where,
        },
      ];
    case 'unmatched':
      return [
        {
          id,
          level: 'warning',
          message: 'The nodes share no seeds: each is averaged by itself, and the noise of the nodes adds.',
          where,
        },
      ];
    case 'does not apply':
      return [];
  }
}

function indexMatched(id: string, where: string, rows: string, evidence: string, correlation: number | null): CheckResult {
  const doubtful = correlation !== null && correlation < sharedNoise;
  return {
    id,
    level: doubtful ? 'warning' : 'note',
    message: `No seeds were given: rows are matched by their index, ${rows}.${evidence}${doubtful ? ' They do not look like the same realisations: give seeds: to be sure.' : ''}`,
    where,
  };
}

/** Two digits without an exponent: a factor may be 0.9 or 13000. */
function factor(value: number): string {
  return value < 10 ? value.toFixed(1) : String(Number(value.toPrecision(2)));
}
