import { describe, expect, it } from 'vitest';
import { runChecks } from '../../../src/forecast/checks/all.js';
import type { Check } from '../../../src/forecast/checks/check.js';
import { fiducialCount } from '../../../src/forecast/checks/fiducial-count.js';
import { matching } from '../../../src/forecast/checks/matching.js';
import { oneSided } from '../../../src/forecast/checks/one-sided.js';
import { repeatedRealisations } from '../../../src/forecast/checks/repeated-realisations.js';
import { sharedFiducials } from '../../../src/forecast/checks/shared-fiducials.js';
import { silentParameters } from '../../../src/forecast/checks/silent-parameters.js';
import { suitesOf } from '../../../src/forecast/suite.js';
import type { CheckResult } from '../../../src/results/schema.js';
import type { EnsembleDerivative, Realisations, Run, Study } from '../../../src/study/study.js';
import { columnsOf, combination, ensembleRun, memoryStudy, momentsRun, parameter, realisations } from '../../fixtures/memory-study.js';
import { allRows, combinedOf, normalRows, range, seededRealisations } from '../seeded-study.js';

const size = 4;
const exact: EnsembleDerivative = { kind: 'exact', values: Float64Array.from([1, 2, 3, 4]) };

function run(fiducial: Realisations, p0: EnsembleDerivative = exact, name = 'run', probe = 'base'): Run {
  return ensembleRun(name, columnsOf(probe, size), fiducial, { p0 });
}

function studyOf(runs: readonly Run[], fiducialValue = 0): Study {
  const probes = [...new Set(runs.flatMap(({ columns }) => columns.map(({ probe }) => probe)))];
  return memoryStudy({ parameters: [parameter('p0', { fiducial: fiducialValue })], combinations: [combination('joint', probes)], runs });
}

function results(check: Check, study: Study): readonly CheckResult[] {
  return check({ study, suites: suitesOf(study), combined: study.combinations.map(({ name }) => combinedOf(study, name)), measured: {} });
}

const plain = realisations(normalRows(40, size, 1), size, range(40));

describe('the number of fiducial realisations', () => {
  it('is well from twice the entries on, with what is left of uncertainty', () => {
    // nu = 40 - 1 - 4 + 1 = 36: 1/sqrt(72) = 11.8 %.
    expect(results(fiducialCount, studyOf([run(plain)]))).toEqual([
      {
        id: 'fiducial-count-joint-box',
        level: 'ok',
        message: '40 fiducial realisations for 4 entries: for Gaussian data the covariance alone leaves each marginalised error uncertain by 11.8 %.',
        where: 'combination joint, suite box',
      },
    ]);
  });

  it('is warned of below that', () => {
    const count = (rows: number) => results(fiducialCount, studyOf([run(realisations(normalRows(rows, size, 2), size))]))[0]!;
    expect(count(8).level).toBe('ok');
    expect(count(7)).toMatchObject({
      level: 'warning',
      message: '7 fiducial realisations for 4 entries: fewer than twice as many; for Gaussian data the covariance alone leaves each marginalised error uncertain by 40.8 %.',
    });
  });

  it('is noted as missing where a covariance came without it', () => {
    const covariance = { data: Float64Array.from(range(16), (k) => (k % 5 === 0 ? 1 : 0)), rows: 4, columns: 4 };
    const moments = momentsRun('run', columnsOf('base', 4), { covariance, realisations: null, derivatives: { p0: { kind: 'exact', values: Float64Array.from([1, 1, 1, 1]) } } });
    expect(results(fiducialCount, studyOf([moments]))[0]).toMatchObject({
      level: 'note',
      message: 'The covariance of 4 entries was given without a number of realisations: no precision factor is applied, and its noise is not in the intervals.',
    });
  });
});

describe('repeated realisations', () => {
  const withRows = (places: readonly number[]): Study => {
    const rows = normalRows(600, size, 3);
    return studyOf([run(realisations(Float64Array.from(places.flatMap((place) => Array.from(rows.subarray(place * size, (place + 1) * size)))), size))]);
  };

  it('are looked for and not found', () => {
    expect(results(repeatedRealisations, withRows(range(600)))).toEqual([
      { id: 'repeats-run-fiducial', level: 'ok', message: 'No two of the 600 fiducial realisations are the same.', where: 'run run, fiducial' },
    ]);
  });

  it('are found across chunks, and some are named', () => {
    expect(results(repeatedRealisations, withRows([...range(600), 5]))[0]!.message).toBe(
      '1 of 601 fiducial realisations repeat an earlier one (rows 5 and 600): they count as independent, so uncertainties come out too small.',
    );
    expect(results(repeatedRealisations, withRows([...range(10), 0, 1, 1, 2, 3]))[0]).toMatchObject({
      level: 'warning',
      message:
        '5 of 15 fiducial realisations repeat an earlier one (rows 0 and 10, rows 1 and 11, rows 1 and 12 and 2 more): they count as independent, so uncertainties come out too small.',
    });
  });
});

describe('how nodes are matched', () => {
  const rows = (seeds: readonly number[] | null, at: number, own: number, count = 30): Realisations => {
    const made = seededRealisations(seeds ?? range(count), size, (i) => at * i, { shared: 1, own, salt: at });
    return { ...made, seeds };
  };
  const nodes = (...given: readonly (readonly [number, Realisations])[]): EnsembleDerivative => ({ kind: 'nodes', nodes: given.map(([at, one]) => ({ at, realisations: one })) });
  const described = (derivative: EnsembleDerivative): readonly CheckResult[] => results(matching, studyOf([run(plain, derivative)]));

  it('is well by seed', () => {
    const [check] = described(nodes([-1, rows(range(30), -1, 0.3)], [1, rows(range(30), 1, 0.3)]));
    expect(check).toMatchObject({ id: 'matching-run-p0', level: 'ok', where: 'run run, derivatives.p0' });
    expect(check!.message).toMatch(/^Nodes are matched by seed, 30 realisations\. The correlation between the outermost nodes is 0\.\d\d \(median over entries\), and differencing cuts the noise variance by a factor of \d/);
  });

  it('is noted by index, and warned of where rows are not alike', () => {
    expect(described(nodes([-1, rows(null, -1, 0.3)], [1, rows(null, 1, 0.3)]))[0]).toMatchObject({ level: 'note' });
    const apart = (at: number, seed: number): Realisations => realisations(normalRows(400, size, seed).map((value) => value + at), size);
    const [check] = described(nodes([-1, apart(-1, 11)], [1, apart(1, 12)]));
    expect(check!.level).toBe('warning');
    expect(check!.message).toMatch(/^No seeds were given: rows are matched by their index, 400 realisations\..* They do not look like the same realisations: give seeds: to be sure\.$/);
  });

  it('is warned of where nodes share no seeds, or some', () => {
    expect(described(nodes([-1, rows(range(30), -1, 0.3)], [1, rows(range(30, 50), 1, 0.3)]))).toEqual([
      {
        id: 'matching-run-p0',
        level: 'warning',
        message: 'The nodes share no seeds: each is averaged by itself, and the noise of the nodes adds.',
        where: 'run run, derivatives.p0',
      },
    ]);
    const [partly] = described(nodes([-1, rows(range(30), -1, 0.3)], [1, rows(range(30, 10), 1, 0.3)]));
    expect(partly!.level).toBe('warning');
    expect(partly!.message).toMatch(/^The nodes do not all have the same seeds, but some are shared: /);
  });

  it('has nothing to say without nodes', () => {
    expect(described(exact)).toEqual([]);
  });

  it('does not say that nodes share no seeds where they do so in pairs', () => {
    const [check] = described(
      nodes([-2, rows(range(30, 50), -2, 0.3)], [-1, rows(range(30), -1, 0.3)], [1, rows(range(30), 1, 0.3)], [2, rows(range(30, 50), 2, 0.3)]),
    );
    expect(check!.message).not.toMatch(/share no seeds/);
  });

  it('says where two runs of one suite cannot share derivative noise for want of seeds', () => {
    const seeded = nodes([-1, rows(range(30), -1, 0.3)], [1, rows(range(30), 1, 0.3)]);
    const bare = nodes([-1, rows(null, -1, 0.3)], [1, rows(null, 1, 0.3)]);
    const other = realisations(normalRows(40, size, 5), size, range(40));
    const study = studyOf([run(plain, seeded), run(other, bare, 'two', 'added')]);
    const messages = runChecks({ study, suites: suitesOf(study), combined: [combinedOf(study, 'joint')], measured: {} }).filter(({ level }) => level === 'warning' || level === 'error');
    expect(messages).not.toEqual([]);
  });
});

describe('nodes on one side', () => {
  const at = (...places: readonly number[]): readonly CheckResult[] =>
    results(
      oneSided,
      studyOf([run(plain, { kind: 'nodes', nodes: places.map((one) => ({ at: one, realisations: seededRealisations(range(10), size, (i) => one * i, { shared: 1, own: 0, salt: 0 }) })) })], 1),
    );

  it('are noted, from either side', () => {
    expect(at(1.1, 1.2)).toEqual([
      {
        id: 'one-sided-run-p0',
        level: 'note',
        message: expect.stringMatching(/^The nodes \(1\.1, 1\.2\) lie on one side of the fiducial value 1: with 2 nodes the truncation error is of order 1 in the step/) as string,
        where: 'run run, derivatives.p0',
      },
    ]);
    expect(at(0.8, 1)).toHaveLength(1);
  });

  it('are not where they stand around it, and exact derivatives have none', () => {
    expect(at(0.9, 1.2)).toEqual([]);
    expect(results(oneSided, studyOf([run(plain)]))).toEqual([]);
  });
});

describe('fiducial rows that two runs do not share', () => {
  const second = (seeds: readonly number[]): Run => run(realisations(normalRows(seeds.length, size, 6), size, seeds), exact, 'two', 'added');

  it('are noted as left out', () => {
    expect(results(sharedFiducials, studyOf([run(plain), second(range(50, 10))]))).toEqual([
      {
        id: 'shared-fiducials-joint-box',
        level: 'note',
        message: '30 fiducial realisations are shared by the runs run, two, which have up to 50: the rest is left out of this combination.',
        where: 'combination joint, suite box',
      },
    ]);
  });

  it('are not where all are shared, in any order', () => {
    expect(results(sharedFiducials, studyOf([run(plain), second([...range(40)].reverse())]))).toEqual([]);
    expect(results(sharedFiducials, studyOf([run(plain)]))).toEqual([]);
  });
});

describe('silent parameters', () => {
  it('are named, once a combination', () => {
    const study = studyOf([run(plain)]);
    const two = { ...study, parameters: [...study.parameters, parameter('p1'), parameter('p2'), parameter('p3', { prior: 1 })] };
    const insensitive = { ...run(plain), data: { kind: 'ensemble' as const, fiducial: plain, derivatives: { p0: exact, p1: { kind: 'insensitive' as const }, p2: { kind: 'exact' as const, values: new Float64Array(size) }, p3: { kind: 'insensitive' as const } } } };
    expect(results(silentParameters, { ...two, runs: [insensitive] })).toEqual([
      {
        id: 'silent-parameters-joint',
        level: 'note',
        message: 'Nothing in joint responds to p1, p2, and without a prior there is no error to give: left out of its matrices.',
        where: 'combination joint',
      },
    ]);
    expect(results(silentParameters, study)).toEqual([]);
  });
});

describe('all checks', () => {
  it('read rows without changing them, and have ids that occur once', () => {
    const study = studyOf([run(plain), run(realisations(normalRows(40, size, 7), size, range(40)), exact, 'two', 'added')]);
    const before = allRows(plain);
    const found = runChecks({ study, suites: suitesOf(study), combined: [combinedOf(study, 'joint')], measured: {} });
    expect(new Set(found.map(({ id }) => id)).size).toBe(found.length);
    expect(allRows(plain)).toEqual(before);
  });
});
