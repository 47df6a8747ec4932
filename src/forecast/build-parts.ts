import type { Matrix } from '../arrays/rows.js';
import { cholesky } from '../linalg/cholesky.js';
import type { Problem } from '../study/problems.js';
import { InputError } from '../study/problems.js';
import type { Column, Combination, Run, Scan, Study } from '../study/study.js';
import { keeps, ordered, prefixesOf } from './cuts.js';
import type { Entry, Part } from './part.js';
import { chosen, makePart, picksOf } from './part.js';
import type { FiducialCovariance, Suite } from './suite.js';

/** The parts of a combination, one for each suite that holds entries of it. Throws InputError where one cannot be made. */
export function buildParts(study: Study, combination: Combination, suites: readonly Suite[], scan: Scan | null): readonly Part[] {
  const baseline = study.combinations.find(({ name }) => name === study.baseline)!;
  const parts = suites.flatMap((suite) => {
    const entries = ordered(entriesOf(suite, combination, baseline), scan);
    return entries.length === 0 ? [] : [buildPart(study, combination, suite, entries, scan)];
  });
  if (parts.length === 0) throw new InputError([emptyCombination(study, combination)]);
  return parts;
}

function emptyCombination(study: Study, combination: Combination): Problem {
  const place = study.combinations.findIndex(({ name }) => name === combination.name);
  return {
    what: 'a combination without entries',
    where: study.place(['combinations', place]),
    found: `nothing is left of ${combination.probes.join(', ')} in combination ${combination.name}`,
    expected: 'at least one entry of the data vector',
    remedy: 'loosen its keep: ranges or blocks',
  };
}

function entriesOf(suite: Suite, combination: Combination, baseline: Combination): readonly Entry[] {
  return suite.runs.flatMap((run) =>
    run.columns.flatMap((column, index) =>
      keeps(combination, column) ? [{ run, index, column, added: !keeps(baseline, column) }] : [],
    ),
  );
}

function buildPart(
  study: Study,
  combination: Combination,
  suite: Suite,
  entries: readonly Entry[],
  scan: Scan | null,
): Part {
  const runs = suite.runs.filter((run) => entries.some((entry) => entry.run.name === run.name));
  refuseUnshared(combination, suite, runs);
  const covariance = suite.covarianceOf(runs);
  refuseFewFiducials(combination, covariance, entries);
  const picks = picksOf(entries, covariance);
  const matrix = chosen(covariance.covariance, picks);
  refuseSilentColumns(matrix, covariance, picks, entries);
  const factorisation = cholesky(matrix);
  if (factorisation.kind === 'not positive definite') {
    throw new InputError([dependentEntry(combination, covariance, entries, factorisation.pivot)]);
  }
  return makePart(
    {
      suite,
      runs,
      entries,
      prefixes: prefixesOf(entries, scan),
      covariance,
      picks,
      factor: factorisation.factor,
      volumeScale: volumeScale(combination, runs),
    },
    study.parameters,
  );
}

/** Runs without common realisations have no covariance between them that anyone could measure. */
function refuseUnshared(combination: Combination, suite: Suite, runs: readonly Run[]): void {
  const shared = suite.sharedFiducials(runs);
  if (shared === null || shared >= 2 || runs.length < 2) return;
  throw new InputError([
    {
      what: 'runs of one suite that share no realisations',
      where: runs[1]!.place(['fiducial', 'seeds']),
      found: `${String(shared)} fiducial seeds in common between the runs ${runs.map(({ name }) => name).join(', ')} of combination ${combination.name}`,
      expected: 'the same seeds in every run of a suite, or most of them',
      remedy: 'check the seeds files, or give the runs suites of their own if they were measured on different simulations',
    },
  ]);
}

function volumeScale(combination: Combination, runs: readonly Run[]): number {
  if (combination.volume === null) return 1;
  const run = runs[0]!;
  if (run.volume === null) {
    throw new InputError([
      {
        what: 'a volume to scale to, but none to scale from',
        where: run.place([]),
        found: `combination ${combination.name} asks for volume ${String(combination.volume)}, and run ${run.name} gives none`,
        expected: 'volume: in the run, in the same unit',
        remedy: `add volume: to the run, or take volume: out of combination ${combination.name}`,
      },
    ]);
  }
  return combination.volume / run.volume;
}

function refuseFewFiducials(combination: Combination, covariance: FiducialCovariance, entries: readonly Entry[]): void {
  const { realisations } = covariance;
  const needed = entries.length + 3;
  if (realisations === null || realisations >= needed) return;
  const run = entries[0]!.run;
  throw new InputError([
    {
      what: 'too few fiducial realisations for the length of the data vector',
      where: run.place([run.data.kind === 'moments' ? 'realisations' : 'fiducial']),
      found: `${String(realisations)} realisations for the ${String(entries.length)} entries of combination ${combination.name}`,
      expected: `more than ${String(entries.length + 2)} (entries + 2), and better twice as many as entries`,
      remedy: `add at least ${String(needed - realisations)} realisations, or cut or rebin the data vector`,
    },
  ]);
}

function named(column: Column, index: number): string {
  const place = column.coordinate === null ? '' : ` at ${column.coordinate.name} = ${String(column.coordinate.value)}`;
  return `column ${String(index)} (${column.probe}, ${column.block}${place})`;
}

function covariancePlace(run: Run): Problem['where'] {
  return run.place([run.data.kind === 'moments' ? 'covariance' : 'fiducial']);
}

/** Rounding of the mean is all the variance that a constant column of double-precision numbers can show. */
const constantTolerance = 16 * Number.EPSILON;
/** Two columns that are one up to a factor agree to rounding: correlation within 1e-12 of +-1. */
const duplicateTolerance = 1e-12;

function refuseSilentColumns(
  matrix: Matrix,
  covariance: FiducialCovariance,
  picks: Int32Array,
  entries: readonly Entry[],
): void {
  const problems: Problem[] = [];
  const deviation = entries.map((_, i) => Math.sqrt(Math.max(0, matrix.data[i * matrix.columns + i]!)));
  entries.forEach((entry, i) => {
    const mean = covariance.mean === null ? 0 : Math.abs(covariance.mean[picks[i]!]!);
    if (deviation[i]! <= constantTolerance * mean || deviation[i] === 0) problems.push(constantColumn(entry));
  });
  if (problems.length === 0) {
    entries.forEach((entry, i) => {
      const twin = entries.findIndex((_, j) => {
        const correlation = matrix.data[i * matrix.columns + j]! / (deviation[i]! * deviation[j]!);
        return j < i && Math.abs(correlation) >= 1 - duplicateTolerance;
      });
      if (twin >= 0) problems.push(duplicatedColumn(entry, entries[twin]!));
    });
  }
  if (problems.length > 0) throw new InputError(problems);
}

function constantColumn({ run, index, column }: Entry): Problem {
  return {
    what: 'a constant column',
    where: covariancePlace(run),
    found: `${named(column, index)} has no variance over the fiducial realisations`,
    expected: 'entries that scatter: a constant one has no covariance to invert',
    remedy: 'leave the entry out of the vector (an empty bin, or one fixed by normalisation, is the usual cause)',
  };
}

function duplicatedColumn(entry: Entry, twin: Entry): Problem {
  return {
    what: 'a duplicated column',
    where: covariancePlace(entry.run),
    found: `${named(entry.column, entry.index)} is ${named(twin.column, twin.index)}${twin.run.name === entry.run.name ? '' : ` of run ${twin.run.name}`} times a constant`,
    expected: 'entries that are not copies of one another',
    remedy: 'leave one of the two out of the vector or of the combination',
  };
}

function dependentEntry(
  combination: Combination,
  covariance: FiducialCovariance,
  entries: readonly Entry[],
  pivot: number,
): Problem {
  const { run, index, column } = entries[pivot]!;
  const rank = covariance.realisations === null ? '' : `, from ${String(covariance.realisations)} realisations`;
  return {
    what: 'a covariance that cannot be inverted',
    where: covariancePlace(run),
    found: `in combination ${combination.name}, ${named(column, index)} is a sum of multiples of entries before it (${String(entries.length)} entries${rank})`,
    expected: 'a positive-definite covariance',
    remedy: 'leave the entry out (bins that add up to a constant are the usual cause), or look for repeated realisations',
  };
}
