import type { Problem } from '../study/problems.js';
import { InputError } from '../study/problems.js';
import type { Study } from '../study/study.js';
import type { Suite } from './suite.js';

/** A scatter needs two. */
const fewestFiducials = 2;

/**
 * Refuses runs that have too few realisations for any number to exist, whether or not a combination uses them: the report shows the
 * scatter of every run.
 */
export function refuseTooFew(study: Study, suites: readonly Suite[]): void {
  const problems = suites.flatMap((suite) => [...fewFiducials(suite), ...fewDerivatives(study, suite)]);
  if (problems.length > 0) throw new InputError(problems);
}

function fewFiducials(suite: Suite): readonly Problem[] {
  return suite.runs.flatMap((run) => {
    if (run.data.kind !== 'ensemble' || run.data.fiducial.rows.rows >= fewestFiducials) return [];
    return [
      {
        what: 'too few fiducial realisations',
        where: run.place(['fiducial']),
        found: `${String(run.data.fiducial.rows.rows)} realisation`,
        expected: 'more than the entries of a combination + 2, and never fewer than 2',
        remedy: 'add realisations, or take the run out of the study',
      },
    ];
  });
}

/** Leaving one out must leave two, or there is no noise to measure. */
const fewestDerivatives = 3;

function fewDerivatives(study: Study, suite: Suite): readonly Problem[] {
  return suite.runs.flatMap((run) =>
    study.parameters.flatMap(({ name }): readonly Problem[] => {
      const few = suite.derivatives
        .get(run.name)!
        .get(name)!
        .strands.find((strand) => strand.keys.length < fewestDerivatives);
      if (few === undefined) return [];
      const missing = fewestDerivatives - few.keys.length;
      return [
        {
          what: 'too few derivative realisations',
          where: run.place(['derivatives', name]),
          found: `${String(few.keys.length)} realisations`,
          expected: `at least ${String(fewestDerivatives)}, and tens to hundreds for a number that can be trusted`,
          remedy: `add at least ${String(missing)} more, or give the derivative as exact: if it has no noise`,
        },
      ];
    }),
  );
}
