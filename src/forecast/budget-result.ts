import type { ClaimResult, Estimate, Results } from '../results/schema.js';
import type { Study } from '../study/study.js';
import type { Assessed } from './assess.js';
import type { Standing } from './budget.js';
import { budgetFor, decidingError, rawBudget, settledError } from './budget.js';
import { wishartDegrees } from './precision.js';

type Row = NonNullable<Results['budget']>[number];

/** What a row is about. */
type Subject = Pick<Row, 'parameter' | 'combination' | 'against' | 'claim'>;

/**
 * Realisations for every marginalised error and gain of a target parameter to be settled, then for every claim to be decided.
 * A claim is budgeted at its present value: if the value moves, so does the budget.
 */
export function budgetResult(study: Study, results: Pick<Results, 'combinations' | 'improvements' | 'claims'>, assessed: ReadonlyMap<string, Assessed>): Row[] {
  const settled = settledError(study.tolerance);
  const targets = study.parameters.filter(({ role }) => role === 'target');
  const errors = Object.entries(results.combinations).flatMap(([combination, { errors: all }]) =>
    targets.map(({ name }) => {
      const subject = { parameter: name, combination, against: null, claim: null };
      return row(subject, all[name]!.marginalised, settled, study.tolerance, [assessed.get(combination)!]);
    }),
  );
  const gains = Object.entries(results.improvements).flatMap(([combination, all]) =>
    targets.map(({ name }) => {
      const subject = { parameter: name, combination, against: study.baseline, claim: null };
      return row(subject, all[name]!.marginalised, settled, study.tolerance, [
        assessed.get(combination)!,
        assessed.get(study.baseline)!,
      ]);
    }),
  );
  return [...errors, ...gains, ...results.claims.map((claim) => claimRow(study, claim, assessed))];
}

function claimRow(study: Study, claim: ClaimResult, assessed: ReadonlyMap<string, Assessed>): Row {
  const { parameter, combination, against, estimate: value } = claim;
  const sides = [combination, ...(against === null ? [] : [against])].map((name) => assessed.get(name)!);
  const thresholds = typeof claim.threshold === 'number' ? [claim.threshold] : claim.threshold;
  const goal =
    value === null
      ? null
      : Math.min(...thresholds.map((threshold) => decidingError(Math.log(value), Math.log(threshold))));
  const estimate = { ...claim, corrected: value };
  return row({ parameter, combination, against, claim: claim.id }, estimate, goal, study.tolerance, sides);
}

function row(
  subject: Subject,
  estimate: Pick<Estimate, 'raw' | 'corrected' | 'relativeStandardError' | 'parts'>,
  goal: number | null,
  tolerance: number,
  sides: readonly Assessed[],
): Row {
  const { raw, corrected, relativeStandardError: now, parts } = estimate;
  const nothing = { ...subject, now, goal, reached: false, derivatives: null, fiducials: null, both: null, raw: null };
  if (now === null || goal === null || corrected === null || parts.derivatives === null || parts.covariance === null) return nothing;
  const standing: Standing = {
    logRaw: raw === null ? null : Math.log(raw),
    logCorrected: Math.log(corrected),
    varianceDerivatives: parts.derivatives ** 2,
    varianceCovariance: parts.covariance ** 2,
    derivativeRealisations: fewestDerivatives(sides),
    fiducials: fewestFiducials(sides),
  };
  return {
    ...subject,
    now,
    goal,
    reached: now <= goal,
    ...budgetFor(standing, goal),
    raw: subject.claim === null ? rawBudget(standing, tolerance) : null,
  };
}

function fewestDerivatives(sides: readonly Assessed[]): number | null {
  const counts = sides.flatMap(({ combined }) => combined.parts.flatMap((part) => part.strands.map((strand) => strand.seeds.length)));
  return counts.length === 0 ? null : Math.min(...counts);
}

function fewestFiducials(sides: readonly Assessed[]): Standing['fiducials'] {
  const counts = sides.flatMap(({ combined }) =>
    combined.parts.flatMap(({ covariance: { realisations }, entries }) =>
      realisations === null
        ? []
        : [{ realisations, degrees: wishartDegrees(realisations, entries.length, combined.active.length) }],
    ),
  );
  return counts.length === 0 ? null : counts.reduce((least, one) => (one.degrees < least.degrees ? one : least));
}
