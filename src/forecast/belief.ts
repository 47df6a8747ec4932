import type { Results } from '../results/schema.js';
import type { Study } from '../study/study.js';
import { attributionOf } from './attribution-result.js';
import type { Assessed } from './assess.js';
import { budgetResult } from './budget-result.js';
import { quantityOf } from './combined.js';
import { covarianceCurve } from './covariance-curve.js';
import { derivativeTests } from './derivative-tests.js';
import { gaussianityOf } from './gaussianity-result.js';
import type { LogErrors } from './log-errors.js';
import { smallestDirections } from './smallest-directions.js';
import type { Suite } from './suite.js';
import { columnOffset } from './suite.js';

type Belief = Pick<
  Results,
  'attribution' | 'budget' | 'derivativeTests' | 'gaussianity' | 'covarianceConvergence' | 'smallestDirections'
>;

/** Whether the gain can be believed: where it comes from, what would settle it, and what the data say about the method. */
export function beliefResults(
  study: Study,
  suites: readonly Suite[],
  assessed: ReadonlyMap<string, Assessed>,
  results: Pick<Results, 'combinations' | 'improvements' | 'claims'>,
): Belief {
  const all = [...assessed.values()];
  const baseline = assessed.get(study.baseline)!;
  return {
    attribution: Object.fromEntries(
      all.filter((one) => one !== baseline).map((one) => [one.combined.combination.name, attributionOf(study, baseline, one)]),
    ),
    budget: budgetResult(study, results, assessed),
    derivativeTests: testsOf(study, suites, results),
    gaussianity: gaussianityOf(all.map(({ combined }) => combined)),
    covarianceConvergence: curves(study, all, ({ combined }) => {
      const curve = covarianceCurve(combined);
      return curve === null ? null : { head: { realisations: [...curve.realisations] }, logs: curve.logs };
    }),
    smallestDirections: curves(study, all, ({ combined }) => {
      const found = smallestDirections(combined);
      return found === null ? null : { head: { condition: found.condition, removed: [...found.removed] }, logs: found.logs };
    }),
  };
}

/** Errors along a list of log errors, by combination and parameter. */
function curves<Head extends object>(
  study: Study,
  all: readonly Assessed[],
  make: (one: Assessed) => { readonly head: Head; readonly logs: readonly LogErrors[] } | null,
) {
  const found = all.flatMap((one) => {
    const curve = make(one);
    if (curve === null) return [];
    const values = (parameter: number, kind: 'marginalised' | 'fixed'): (number | null)[] => {
      const quantity = quantityOf(one.combined, parameter, kind);
      return curve.logs.map((logs) => {
        const log = quantity === null ? null : (logs[quantity] ?? null);
        return log === null ? null : Math.exp(log);
      });
    };
    const errors = Object.fromEntries(
      study.parameters.map(({ name }, a) => [name, { marginalised: values(a, 'marginalised'), fixed: values(a, 'fixed') }]),
    );
    return [[one.combined.combination.name, { ...curve.head, errors }] as const];
  });
  return Object.fromEntries(found);
}

/** Curvature is given over one sigma of the baseline: half f'' sigma as a share of f'. */
function testsOf(study: Study, suites: readonly Suite[], results: Pick<Results, 'combinations'>): NonNullable<Belief['derivativeTests']> {
  const errors = results.combinations[study.baseline]!.errors;
  return suites.flatMap((suite) =>
    suite.runs.flatMap((run) => {
      const { covariance, runs } = suite.covarianceOf([run]);
      const offset = columnOffset(runs, run);
      const variance = Float64Array.from(run.columns, (_, i) => covariance.data[(offset + i) * (covariance.columns + 1)]!);
      return study.parameters.flatMap(({ name, fiducial }) => {
        const { corrected, raw } = errors[name]!.marginalised;
        const sigma = corrected ?? raw;
        return derivativeTests(run, suite.derivatives.get(run.name)!.get(name)!, variance, fiducial).flatMap((test) => {
          const scale = test.kind === 'curvature' ? sigma : 1;
          if (scale === null) return [];
          return [{ run: run.name, parameter: name, ...test, share: test.share * scale, standardError: test.standardError * scale }];
        });
      });
    }),
  );
}
