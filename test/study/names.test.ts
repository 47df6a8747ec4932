import { describe, expect, it } from 'vitest';
import { changed, edited, minimalStudy } from '../fixtures/study-folder.js';
import { refusals } from './refusals.js';

const study = (from: string, to: string) => edited(minimalStudy(), 'study.yaml', from, to);
const power = (from: string, to: string) => edited(minimalStudy(), 'runs/power/run.yaml', from, to);

const claim = 'claims:\n  - {id: better, text: It gets better., parameter: omega_m, combination: joint, gain: {at_least: 2}}';
const claims = (from: string, to: string) => study('baseline: power', `baseline: power\n${claim.replace(from, to)}`);

describe('names that stand for nothing', () => {
  it('a probe of a combination', async () => {
    expect(await refusals(study('probes: [power, peaks]', 'probes: [power, peeks]'))).toMatchInlineSnapshot(`
      "error: a name is not that of a probe
        where     study.yaml:9:68  combinations[1].probes[1]
        found     peeks
        expected  one of peaks, power
        do        write peaks, if that is what was meant"
    `);
  });

  it('the baseline', async () => {
    expect(await refusals(study('baseline: power', 'baseline: powers'))).toMatchInlineSnapshot(`
      "error: a name is not that of a combination
        where     study.yaml:10:1  baseline
        found     powers
        expected  one of power, joint
        do        write power, if that is what was meant"
    `);
  });

  it('a probe under keep', async () => {
    expect(await refusals(study('probes: [power, peaks]}', 'probes: [power, peaks], keep: {peak: {nu: {max: 1}}}}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a probe of this combination
        where     study.yaml:9:83  combinations[1].keep.peak
        found     peak
        expected  one of power, peaks
        do        write peaks, if that is what was meant"
    `);
  });

  it('a probe under keep that the combination leaves out', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], keep: {peaks: {nu: {max: 1}}}}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a probe of this combination
        where     study.yaml:8:66  combinations[0].keep.peaks
        found     peaks
        expected  power
        do        use this name"
    `);
  });

  it('a block under keep', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], keep: {power: {blocks: [monopol]}}}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a block of power
        where     study.yaml:8:83  combinations[0].keep.power.blocks[0]
        found     monopol
        expected  monopole
        do        write monopole, if that is what was meant"
    `);
  });

  it('a coordinate under keep', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], keep: {power: {kk: {max: 1}}}}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a coordinate of power
        where     study.yaml:8:74  combinations[0].keep.power.kk
        found     kk
        expected  k
        do        write k, if that is what was meant"
    `);
  });

  it('the coordinate of the scan', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\nscan: {coordinate: ell, at: [1, 2]}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a coordinate
        where     study.yaml:11:8  scan.coordinate
        found     ell
        expected  one of nu, k
        do        use one of these names"
    `);
  });

  it('a probe that is described', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\nprobes: {pwoer: {label: Power}}'))).toMatchInlineSnapshot(`
      "error: a name is not that of a probe of any run
        where     study.yaml:11:10  probes.pwoer
        found     pwoer
        expected  one of peaks, power
        do        write power, if that is what was meant"
    `);
  });

  it('a parameter of a claim', async () => {
    expect(await refusals(claims('omega_m', 'omega_n'))).toMatchInlineSnapshot(`
      "error: a name is not that of a parameter
        where     study.yaml:12:41  claims[0].parameter
        found     omega_n
        expected  one of omega_m, shear_bias, sigma_8
        do        write omega_m, if that is what was meant"
    `);
  });

  it('a combination of a claim', async () => {
    expect(await refusals(claims('combination: joint', 'combination: joined'))).toMatchInlineSnapshot(`
      "error: a name is not that of a combination
        where     study.yaml:12:61  claims[0].combination
        found     joined
        expected  one of power, joint
        do        write joint, if that is what was meant"
    `);
  });

  it('the other combination of a claim', async () => {
    expect(await refusals(claims('combination: joint', 'combination: joint, against: pwr'))).toMatchInlineSnapshot(`
      "error: a name is not that of a combination
        where     study.yaml:12:81  claims[0].against
        found     pwr
        expected  one of power, joint
        do        use one of these names"
    `);
  });

  it('a parameter with a derivative', async () => {
    expect(await refusals(power('  sigma_8:', '  sigma_9:'))).toMatchInlineSnapshot(`
      "error: a name is not that of a parameter
        where     runs/power/run.yaml:13:3  derivatives.sigma_9
        found     sigma_9
        expected  one of omega_m, sigma_8, shear_bias
        do        write sigma_8, if that is what was meant
      error: a parameter has no derivative
        where     runs/power/run.yaml:7:1  derivatives
        found     sigma_8 is neither under derivatives: nor under insensitive:
        expected  a derivative of every parameter of study.yaml in every run
        do        add its derivative; if the probes of this run do not depend on it, write insensitive: [sigma_8]"
    `);
  });

  it('a parameter that is insensitive', async () => {
    expect(await refusals(edited(minimalStudy(), 'runs/peaks/run.yaml', '[shear_bias]', '[shear_bais]'))).toMatchInlineSnapshot(`
      "error: a name is not that of a parameter
        where     runs/peaks/run.yaml:18:15  insensitive[0]
        found     shear_bais
        expected  one of omega_m, sigma_8, shear_bias
        do        write shear_bias, if that is what was meant
      error: a parameter has no derivative
        where     runs/peaks/run.yaml:7:1  derivatives
        found     shear_bias is neither under derivatives: nor under insensitive:
        expected  a derivative of every parameter of study.yaml in every run
        do        add its derivative; if the probes of this run do not depend on it, write insensitive: [shear_bias]"
    `);
  });
});

describe('combinations, scans and claims that contradict themselves', () => {
  it('a parameter that stands twice', async () => {
    expect(await refusals(study('name: sigma_8', 'name: omega_m'))).toMatchInlineSnapshot(`
      "error: the name of a parameter stands twice
        where     study.yaml:6:6  parameters[2].name
        found     omega_m, as number 1 and again as number 3
        expected  each name once
        do        rename or remove one of the two
      error: a name is not that of a parameter
        where     runs/peaks/run.yaml:13:3  derivatives.sigma_8
        found     sigma_8
        expected  one of omega_m, shear_bias
        do        use one of these names
      error: a name is not that of a parameter
        where     runs/power/run.yaml:13:3  derivatives.sigma_8
        found     sigma_8
        expected  one of omega_m, shear_bias
        do        use one of these names"
    `);
  });

  it('a combination that stands twice', async () => {
    expect(await refusals(study('name: joint', 'name: power'))).toMatchInlineSnapshot(`
      "error: the name of a combination stands twice
        where     study.yaml:9:6  combinations[1].name
        found     power, as number 1 and again as number 2
        expected  each name once
        do        rename or remove one of the two"
    `);
  });

  it('a probe that stands twice', async () => {
    expect(await refusals(study('[power, peaks]', '[power, power]'))).toMatchInlineSnapshot(`
      "error: the name of a probe stands twice
        where     study.yaml:9:68  combinations[1].probes[1]
        found     power, as number 1 and again as number 2
        expected  each name once
        do        rename or remove one of the two"
    `);
  });

  it('a range that is empty', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], keep: {power: {k: {min: 0.3, max: 0.1}}}}'))).toMatchInlineSnapshot(`
      "error: a range is empty
        where     study.yaml:8:74  combinations[0].keep.power.k
        found     min 0.3 above max 0.1
        expected  min, max, or both with min at most max
        do        exchange the two"
    `);
  });

  it('a range without bounds', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], keep: {power: {k: {}}}}'))).toMatchInlineSnapshot(`
      "error: a range is empty
        where     study.yaml:8:74  combinations[0].keep.power.k
        found     neither min nor max
        expected  min, max, or both with min at most max
        do        add a bound, or remove the range"
    `);
  });

  it('a cut that stands twice', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\nscan: {coordinate: k, at: [0.1, 0.2, 0.1]}'))).toMatchInlineSnapshot(`
      "error: a cut stands twice
        where     study.yaml:11:38  scan.at[2]
        found     0.1 at index 0 and 2 (counted from 0)
        expected  each cut once
        do        remove one of the two"
    `);
  });

  it('a volume that no run has', async () => {
    expect(await refusals(study('probes: [power]}', 'probes: [power], volume: 2}'))).toMatchInlineSnapshot(`
      "error: a volume cannot be scaled to
        where     study.yaml:8:59  combinations[0].volume
        found     no volume in run power
        expected  a volume in every run of the combination, all in one unit
        do        add volume: to run.yaml, or remove it here"
    `);
  });

  it('a claim against itself', async () => {
    expect(await refusals(claims('combination: joint', 'combination: joint, against: joint'))).toMatchInlineSnapshot(`
      "error: a claim compares a combination with itself
        where     study.yaml:12:81  claims[0].against
        found     joint
        expected  two different combinations
        do        name another combination under against:"
    `);
  });

  it('a claim of the baseline against the baseline', async () => {
    expect(await refusals(claims('combination: joint', 'combination: power'))).toMatchInlineSnapshot(`
      "error: a claim compares a combination with itself
        where     study.yaml:12:61  claims[0].combination
        found     power, which is the baseline
        expected  two different combinations
        do        name another combination, or add against:"
    `);
  });

  it('a claim of a gain and of a size', async () => {
    expect(await refusals(claims('gain: {at_least: 2}', 'gain: {at_least: 2}, size: {at_most: 1}'))).toMatchInlineSnapshot(`
      "error: keys exclude each other
        where     study.yaml:12:5  claims[0]
        found     gain and size
        expected  exactly one of gain, size
        do        remove all but one"
    `);
  });

  it('a claim of neither', async () => {
    expect(await refusals(claims(', gain: {at_least: 2}', ''))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     study.yaml:12:5  claims[0]
        found     none of them
        expected  exactly one of gain, size
        do        add the one that applies"
    `);
  });

  it('a claim with two bounds', async () => {
    expect(await refusals(claims('{at_least: 2}', '{at_least: 2, at_most: 3}'))).toMatchInlineSnapshot(`
      "error: keys exclude each other
        where     study.yaml:12:81  claims[0].gain
        found     at_least and at_most
        expected  exactly one of at_least, at_most, between
        do        remove all but one"
    `);
  });

  it('a claim with bounds in the wrong order', async () => {
    expect(await refusals(claims('{at_least: 2}', '{between: [3, 2]}'))).toMatchInlineSnapshot(`
      "error: two bounds are not in order
        where     study.yaml:12:88  claims[0].gain.between
        found     [3, 2]
        expected  the lower bound first, and the upper above it
        do        exchange the two"
    `);
  });

  it('a claim with a threshold that is not positive', async () => {
    expect(await refusals(claims('{at_least: 2}', '{at_least: 0}'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:12:88  claims[0].gain.at_least
        found     0
        expected  a finite number above 0
        do        write a finite number above 0"
    `);
  });

  it('a claim of a size against something', async () => {
    expect(await refusals(claims('gain: {at_least: 2}', 'against: power, size: {at_most: 2}'))).toMatchInlineSnapshot(`
      "error: a key means nothing here
        where     study.yaml:12:81  claims[0].against
        found     against: beside size:
        expected  size: without against:
        do        remove one of the two"
    `);
  });

  it('a claim that stands twice', async () => {
    expect(await refusals(study('baseline: power', `baseline: power\n${claim}\n${claim.split('\n')[1]!}`))).toMatchInlineSnapshot(`
      "error: the name of a claim stands twice
        where     study.yaml:13:6  claims[1].id
        found     better, as number 1 and again as number 2
        expected  each name once
        do        rename or remove one of the two"
    `);
  });
});

describe('runs that do not fit together', () => {
  it('a parameter without a derivative', async () => {
    expect(await refusals(edited(minimalStudy(), 'runs/peaks/run.yaml', 'insensitive: [shear_bias]\n', ''))).toMatchInlineSnapshot(`
      "error: a parameter has no derivative
        where     runs/peaks/run.yaml:7:1  derivatives
        found     shear_bias is neither under derivatives: nor under insensitive:
        expected  a derivative of every parameter of study.yaml in every run
        do        add its derivative; if the probes of this run do not depend on it, write insensitive: [shear_bias]"
    `);
  });

  it('a parameter with a derivative and none', async () => {
    expect(await refusals(power('vector:', 'insensitive: [omega_m]\nvector:'))).toMatchInlineSnapshot(`
      "error: a parameter has a derivative and none
        where     runs/power/run.yaml:9:3  derivatives.omega_m
        found     omega_m under derivatives: and under insensitive:
        expected  one of the two
        do        remove it from insensitive:, or remove its derivative"
    `);
  });

  it('a probe in two runs', async () => {
    expect(await refusals(edited(minimalStudy(), 'runs/peaks/run.yaml', 'probe: peaks', 'probe: power'))).toMatchInlineSnapshot(`
      "error: two runs hold one probe
        where     runs/power/run.yaml:5:6  vector[0].probe
        found     power in run peaks and in run power
        expected  each probe in one run
        do        rename one of the two probes, or put all blocks of the probe into one run
      error: a name is not that of a probe
        where     study.yaml:9:68  combinations[1].probes[1]
        found     peaks
        expected  power
        do        use this name"
    `);
  });

  it('runs without a suite', async () => {
    expect(await refusals(power('suite: box-a\n', ''))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     runs/power/run.yaml:1:1  suite
        found     nothing
        expected  a name of the suite of simulations: runs of one suite share realisations
        do        add suite:, the same in all runs that were measured on the same simulations"
    `);
  });

  it('one suite with two volumes', async () => {
    expect(await refusals(power('suite: box-a', 'suite: box-a\nvolume: 2\nvolume_unit: Gpc^3'))).toMatchInlineSnapshot(`
      "error: runs of one suite do not agree
        where     runs/power/run.yaml:4:1  volume
        found     volume not given in run peaks, 2 Gpc^3 in run power
        expected  the same in every run of suite box-a
        do        correct volume: and volume_unit:, or give the run a suite of its own"
    `);
  });

  it('one suite with seeds in one run only', async () => {
    expect(await refusals(power(', seeds: seeds.npy', ''))).toMatchInlineSnapshot(`
      "error: runs of one suite do not agree
        where     runs/power/run.yaml:6:1  fiducial
        found     fiducial seeds in run peaks, none in run power
        expected  seeds in every run of suite box-a, or in none
        do        add seeds: under fiducial:"
    `);
  });

  it('one suite with other numbers of rows', async () => {
    expect(await refusals(edited(edited(changed(minimalStudy(), { 'runs/power/fiducial.npy': { shape: [50, 3], values: Array(150).fill(1) } }), 'runs/power/run.yaml', ', seeds: seeds.npy', ''), 'runs/peaks/run.yaml', ', seeds: seeds.npy', ''))).toMatchInlineSnapshot(`
      "error: runs of one suite do not agree
        where     runs/power/run.yaml:6:12  fiducial.values
        found     60 fiducial rows in run peaks, 50 in run power
        expected  the same realisations in the same order, or seeds for each
        do        add seeds: under fiducial: of every run of the suite"
    `);
  });

  it('a study without runs', async () => {
    expect(await refusals(new Map([...minimalStudy()].filter(([path]) => !path.startsWith('runs/'))))).toMatchInlineSnapshot(`
      "error: a study has no runs
        where     runs
        found     runs/: no such file
        expected  a folder for each run, such as runs/power/, with its run.yaml
        do        make runs/NAME/run.yaml and put the arrays beside it"
    `);
  });

  it('a run without run.yaml', async () => {
    expect(await refusals(changed(minimalStudy(), { 'runs/peaks/run.yaml': null }))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     runs/peaks/run.yaml
        found     runs/peaks/run.yaml: no such file
        expected  a file inside the study folder
        do        make runs/peaks/run.yaml"
    `);
  });

  it('a study without study.yaml', async () => {
    expect(await refusals(changed(minimalStudy(), { 'study.yaml': null }))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     study.yaml
        found     study.yaml: no such file
        expected  a file inside the study folder
        do        make study.yaml"
    `);
  });

  it('a run whose name is no name', async () => {
    expect(await refusals(changed(minimalStudy(), { 'runs/2nd/run.yaml': 'format: 1\n' }))).toMatchInlineSnapshot(`
      "error: the name of a run is not a name
        where     runs/2nd
        found     2nd
        expected  a letter, then letters, digits, _ or -
        do        rename the folder, or move it out of runs/
      error: a key is missing
        where     runs/2nd/run.yaml:1:1  kind
        found     nothing
        expected  one of ensemble, moments
        do        add kind:"
    `);
  });
});
