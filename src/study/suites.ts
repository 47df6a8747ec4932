import { unknownName } from './nearest-name.js';
import type { Problem } from './problems.js';
import type { Reading } from './reading.js';
import type { OpenRun } from './runs.js';
import type { Run } from './study.js';

/** The suite of a run; a study's only run may leave it out. Null where it is missing, which has been reported. */
export function suiteOf(run: OpenRun, runs: number, reading: Reading): string | null {
  if (run.file.suite !== undefined) return run.file.suite;
  if (runs === 1) return run.name;
  reading.report({
    what: 'a key is missing',
    where: run.yaml.place(['suite']),
    found: 'nothing',
    expected: 'a name of the suite of simulations: runs of one suite share realisations',
    remedy: 'add suite:, the same in all runs that were measured on the same simulations',
  });
  return null;
}

/** Each probe is measured by one run only. */
export function checkProbes(runs: readonly OpenRun[], described: readonly string[], placeOf: (probe: string) => Problem['where'], reading: Reading): void {
  const owners = new Map<string, string>();
  for (const run of runs) {
    for (const [i, { probe }] of run.file.vector.entries()) {
      const owner = owners.get(probe);
      if (owner !== undefined && owner !== run.name) {
        reading.report({
          what: 'two runs hold one probe',
          where: run.yaml.place(['vector', i, 'probe']),
          found: `${probe} in run ${owner} and in run ${run.name}`,
          expected: 'each probe in one run',
          remedy: 'rename one of the two probes, or put all blocks of the probe into one run',
        });
      }
      owners.set(probe, owner ?? run.name);
    }
  }
  const probes = [...owners.keys()];
  for (const probe of described) {
    if (!owners.has(probe)) reading.report(unknownName('a probe of any run', probe, probes, placeOf(probe)));
  }
}

/** Runs of one suite describe the same simulations: same volume, matched in the same way. */
export function checkSuites(runs: readonly Run[], reading: Reading): void {
  for (const suite of new Set(runs.map((run) => run.suite))) {
    const [first, ...others] = runs.filter((run) => run.suite === suite);
    for (const other of others) {
      const problem = first === undefined ? null : disagreement(first, other);
      if (problem !== null) reading.report(problem);
    }
  }
}

function disagreement(first: Run, other: Run): Problem | null {
  const start = { what: 'runs of one suite do not agree', expected: `the same in every run of suite ${first.suite}` };
  if (first.volume !== other.volume || first.volumeUnit !== other.volumeUnit) {
    return {
      ...start,
      where: other.place(['volume']),
      found: `volume ${volumeText(first)} in run ${first.name}, ${volumeText(other)} in run ${other.name}`,
      remedy: 'correct volume: and volume_unit:, or give the run a suite of its own',
    };
  }
  if (first.data.kind === 'moments' || other.data.kind === 'moments') {
    const run = other.data.kind === 'moments' ? other : first;
    return {
      what: 'a run without realisations shares a suite',
      where: run.place(['suite']),
      found: `run ${run.name} of kind moments in suite ${run.suite}, beside run ${run === first ? other.name : first.name}`,
      expected: 'a suite of its own: the covariance between the two runs cannot be known',
      remedy: 'put both probes into one run with their joint covariance, or give this run a suite of its own if the simulations differ',
    };
  }
  const [a, b] = [first.data.fiducial, other.data.fiducial];
  if ((a.seeds === null) !== (b.seeds === null)) {
    const without = a.seeds === null ? first : other;
    return {
      ...start,
      where: without.place(['fiducial']),
      found: `fiducial seeds in run ${a.seeds === null ? other.name : first.name}, none in run ${without.name}`,
      expected: `seeds in every run of suite ${first.suite}, or in none`,
      remedy: 'add seeds: under fiducial:',
    };
  }
  if (a.seeds === null && a.rows.rows !== b.rows.rows) {
    return {
      ...start,
      where: other.place(['fiducial', 'values']),
      found: `${String(a.rows.rows)} fiducial rows in run ${first.name}, ${String(b.rows.rows)} in run ${other.name}`,
      expected: 'the same realisations in the same order, or seeds for each',
      remedy: 'add seeds: under fiducial: of every run of the suite',
    };
  }
  return null;
}

function volumeText({ volume, volumeUnit }: Run): string {
  return volume === null ? 'not given' : `${String(volume)}${volumeUnit === '' ? '' : ` ${volumeUnit}`}`;
}
