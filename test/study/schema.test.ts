import { describe, expect, it } from 'vitest';
import { changed, edited, minimalStudy } from '../fixtures/study-folder.js';
import { refusals } from './refusals.js';

const study = (from: string, to: string) => edited(minimalStudy(), 'study.yaml', from, to);
const power = (from: string, to: string) => edited(minimalStudy(), 'runs/power/run.yaml', from, to);

describe('keys of study.yaml that are wrong', () => {
  it('names the nearest valid key', async () => {
    expect(await refusals(study('baseline: power', 'basline: power'))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     study.yaml:1:1  baseline
        found     nothing
        expected  text
        do        add baseline:
      error: a key is unknown
        where     study.yaml:10:1  basline
        found     basline
        expected  one of format, title, summary, authors, licence, date, parameters, prior, derived, probes, combinations, baseline, scan, tolerance, claims
        do        write baseline, if that is what was meant"
    `);
  });

  it('lists the valid keys where none is near', async () => {
    expect(await refusals(study('fiducial: 0.8}', 'fiducial: 0.8, colour: red}'))).toMatchInlineSnapshot(`
      "error: a key is unknown
        where     study.yaml:6:36  parameters[2].colour
        found     colour
        expected  one of name, label, fiducial, unit, role, prior, reference
        do        remove it, or use one of these"
    `);
  });

  it('wants text in quotes where it looks like a number', async () => {
    expect(await refusals(study('title: Two summaries of an invented lensing survey', 'title: 2031'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:2:1  title
        found     2031
        expected  text
        do        put it in quotes, so that it is text"
    `);
  });

  it('says that a key has nothing behind it', async () => {
    expect(await refusals(study('baseline: power', 'baseline:'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:10:1  baseline
        found     nothing behind the colon
        expected  text
        do        give it a value, or remove the key"
    `);
  });

  it('wants finite numbers', async () => {
    expect(await refusals(study('fiducial: 0.8', 'fiducial: .nan'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:6:21  parameters[2].fiducial
        found     NaN
        expected  a finite number
        do        write a finite number"
    `);
  });

  it('wants plain numbers', async () => {
    expect(await refusals(study('fiducial: 0.8', 'fiducial: "0.8"'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:6:21  parameters[2].fiducial
        found     text: 0.8
        expected  a finite number
        do        write a plain number: no quotes, no unit, a point for decimals"
    `);
  });

  it('wants a positive prior', async () => {
    expect(await refusals(study('prior: 0.01', 'prior: 0'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:5:53  parameters[1].prior
        found     0
        expected  a finite number above 0
        do        write a finite number above 0"
    `);
  });

  it('wants names that are names', async () => {
    expect(await refusals(study('name: sigma_8', 'name: sigma-8'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:6:6  parameters[2].name
        found     text: sigma-8
        expected  a parameter name: a letter, then letters, digits or _, no word that JavaScript reserves
        do        write a parameter name: a letter, then letters, digits or _, no word that JavaScript reserves"
    `);
  });

  it('refuses names that JavaScript reserves', async () => {
    expect(await refusals(study('name: joint', 'name: constructor'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:9:6  combinations[1].name
        found     text: constructor
        expected  a name: a letter, then letters, digits, _ or -, no word that JavaScript reserves
        do        write a name: a letter, then letters, digits, _ or -, no word that JavaScript reserves"
    `);
  });

  it('wants a known role', async () => {
    expect(await refusals(study('role: nuisance', 'role: nuisence'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:5:37  parameters[1].role
        found     text: nuisence
        expected  one of target, nuisance
        do        write nuisance, if that is what was meant"
    `);
  });

  it('wants a tolerance between 0 and 1', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\ntolerance: 1'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:11:1  tolerance
        found     1
        expected  a number between 0 and 1, both excluded
        do        write a number between 0 and 1, both excluded"
    `);
  });

  it('wants dates that exist', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\ndate: 2031-02-30'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:11:1  date
        found     text: 2031-02-30
        expected  a date such as 2031-05-02
        do        write a date such as 2031-05-02"
    `);
  });

  it('wants an ORCID iD', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\nauthors: [{name: A. Author, orcid: 0000-0000}]'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:11:29  authors[0].orcid
        found     text: 0000-0000
        expected  an ORCID iD, such as 0000-0002-1825-0097
        do        write an ORCID iD, such as 0000-0002-1825-0097"
    `);
  });

  it('wants format 1', async () => {
    expect(await refusals(study('format: 1', 'format: 2'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:1:1  format
        found     2
        expected  1
        do        write 1"
    `);
  });

  it('wants lists that are not empty', async () => {
    expect(await refusals(study('probes: [power]', 'probes: []'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     study.yaml:8:42  combinations[0].probes
        found     a list of 0
        expected  a list with at least one item
        do        write a list with at least one item"
    `);
  });

  it('reports everything that is wrong in a file at once', async () => {
    expect(await refusals(edited(study('baseline: power', 'baseline: powr\ntolerence: 0.1'), 'study.yaml', 'probes: [power, peaks]', 'probes: [power, peeks]'))).toMatchInlineSnapshot(`
      "error: a key is unknown
        where     study.yaml:11:1  tolerence
        found     tolerence
        expected  one of format, title, summary, authors, licence, date, parameters, prior, derived, probes, combinations, baseline, scan, tolerance, claims
        do        write tolerance, if that is what was meant
      error: a name is not that of a combination
        where     study.yaml:10:1  baseline
        found     powr
        expected  one of power, joint
        do        write power, if that is what was meant
      error: a name is not that of a probe
        where     study.yaml:9:68  combinations[1].probes[1]
        found     peeks
        expected  one of peaks, power
        do        write peaks, if that is what was meant"
    `);
  });

  it('says that derived parameters come later', async () => {
    expect(await refusals(study('baseline: power', 'baseline: power\nderived: [{name: s8, expression: sigma_8}]'))).toMatchInlineSnapshot(`
      "error: a part of the format is not read by this version
        where     study.yaml:11:1  derived
        found     derived:
        expected  parameters only
        do        leave it out for now: a later version will read it"
    `);
  });
});

describe('keys of run.yaml that are wrong', () => {
  it('names the nearest valid key inside a node', async () => {
    expect(await refusals(power('{at: 0.29, values: omega_m_minus.npy}', '{at: 0.29, value: omega_m_minus.npy}'))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     runs/power/run.yaml:11:9  derivatives.omega_m.nodes[0].values
        found     nothing
        expected  the name of an array file, or a list of finite numbers
        do        add values:
      error: a key is unknown
        where     runs/power/run.yaml:11:20  derivatives.omega_m.nodes[0].value
        found     value
        expected  one of at, values, seeds
        do        write values, if that is what was meant"
    `);
  });

  it('wants a known kind', async () => {
    expect(await refusals(power('kind: ensemble', 'kind: ensamble'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     runs/power/run.yaml:2:1  kind
        found     text: ensamble
        expected  one of ensemble, moments
        do        write ensemble, if that is what was meant"
    `);
  });

  it('wants a kind', async () => {
    expect(await refusals(power('kind: ensemble\n', ''))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     runs/power/run.yaml:1:1  kind
        found     nothing
        expected  one of ensemble, moments
        do        add kind:"
    `);
  });

  it('says that Fisher matrices come later', async () => {
    expect(await refusals(power('kind: ensemble', 'kind: fisher'))).toMatchInlineSnapshot(`
      "error: a part of the format is not read by this version
        where     runs/power/run.yaml:2:1  kind
        found     kind: fisher
        expected  ensemble or moments
        do        leave it out for now: a later version will read it"
    `);
  });

  it('says that shards come later', async () => {
    expect(await refusals(changed(minimalStudy(), { 'runs/power/run.yaml': 'format: 1\nkind: moments\nshards: [part-0.npz]\n' }))).toMatchInlineSnapshot(`
      "error: a part of the format is not read by this version
        where     runs/power/run.yaml:3:1  shards
        found     shards:
        expected  covariance: and derivatives:
        do        leave it out for now: a later version will read it"
    `);
  });

  it('says that lists of files come later', async () => {
    expect(await refusals(power('values: fiducial.npy', 'values: [a.npy, b.npy]'))).toMatchInlineSnapshot(`
      "error: a list of files is not read by this version
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.values is a list of 2 names
        expected  one .npy file, or a list of numbers
        do        join the files into one with numpy.concatenate and numpy.save"
    `);
  });

  it('says that other array files come later', async () => {
    expect(await refusals(power('values: fiducial.npy', 'values: fiducial.npz#x'))).toMatchInlineSnapshot(`
      "error: a kind of array file is not read by this version
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npz#x
        expected  a .npy file, or a list of numbers
        do        save the array with numpy.save, and name that file here"
    `);
  });

  it('wants text in provenance', async () => {
    expect(await refusals(power('suite: box-a', 'suite: box-a\nprovenance: {commit: 12345}'))).toMatchInlineSnapshot(`
      "error: a value is not what it should be
        where     runs/power/run.yaml:4:14  provenance.commit
        found     12345
        expected  text
        do        put it in quotes, so that it is text"
    `);
  });

  it('says when a file is empty', async () => {
    expect(await refusals(changed(minimalStudy(), { 'runs/power/run.yaml': '' }))).toMatchInlineSnapshot(`
      "error: a file is empty
        where     runs/power/run.yaml:1:1
        found     no key
        expected  keys with values
        do        fill the file: see the format of a study"
    `);
  });

  it('wants entries in one way', async () => {
    expect(await refusals(power('coordinate: k, unit: h/Mpc, values: [0.1, 0.2, 0.3]', 'coordinate: k, size: 3'))).toMatchInlineSnapshot(`
      "error: a block does not say its entries in one way
        where     runs/power/run.yaml:5:5  vector[0]
        found     power/monopole has coordinate, size
        expected  coordinate: and values: (and perhaps unit:), or size: alone
        do        add what is missing, or remove what is too much"
    `);
  });

  it('wants entries at all', async () => {
    expect(await refusals(power(', coordinate: k, unit: h/Mpc, values: [0.1, 0.2, 0.3]', ''))).toMatchInlineSnapshot(`
      "error: a block does not say its entries in one way
        where     runs/power/run.yaml:5:5  vector[0]
        found     power/monopole has neither
        expected  coordinate: and values: (and perhaps unit:), or size: alone
        do        add what is missing, or remove what is too much"
    `);
  });

  it('claims no memory for an absurd size', async () => {
    expect(await refusals(power('coordinate: k, unit: h/Mpc, values: [0.1, 0.2, 0.3]', 'size: 9000000000000000'))).toMatchInlineSnapshot(`
      "error: a data vector is too long
        where     runs/power/run.yaml:4:1  vector
        found     9000000000000000 entries
        expected  at most 50000
        do        check size: and values:, or bin the data before the forecast"
    `);
  });

  it('refuses a block that stands twice', async () => {
    expect(await refusals(power('values: [0.1, 0.2, 0.3]}', 'values: [0.1, 0.2]}\n  - {probe: power, block: monopole, size: 1}'))).toMatchInlineSnapshot(`
      "error: the name of a block stands twice
        where     runs/power/run.yaml:6:5  vector[1]
        found     power/monopole, as number 1 and again as number 2
        expected  each name once
        do        rename or remove one of the two"
    `);
  });

  it('keeps the name blocks for itself', async () => {
    expect(await refusals(power('coordinate: k', 'coordinate: blocks'))).toMatchInlineSnapshot(`
      "error: a name is taken
        where     runs/power/run.yaml:5:37  vector[0].coordinate
        found     blocks
        expected  another name: keep: has a key blocks
        do        rename the coordinate"
    `);
  });

  it('wants the coordinates as a vector', async () => {
    expect(await refusals(power('values: [0.1, 0.2, 0.3]', 'values: [[0.1, 0.2], [0.3, 0.4]]'))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:5:65  vector[0].values
        found     vector[0].values has the shape [2, 2]
        expected  a vector of at least one value
        do        check that this is the right file, and the vector of its run"
    `);
  });
});
