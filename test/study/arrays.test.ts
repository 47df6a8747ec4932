import { describe, expect, it } from 'vitest';
import { changed, edited, minimalStudy } from '../fixtures/study-folder.js';
import { npyBytes, npyFile } from '../fixtures/npy-writer.js';
import { refusals } from './refusals.js';

const power = (from: string, to: string) => edited(minimalStudy(), 'runs/power/run.yaml', from, to);

const fiducialSeeds = () =>
  changed(minimalStudy(), { 'runs/power/seeds.npy': npyFile("{'descr': '<i8', 'fortran_order': False, 'shape': (60,), }", new Uint8Array(BigInt64Array.from({ length: 60 }, (_, i) => 2n ** 53n + BigInt(i)).buffer)) });
const rows = (count: number, columns: number, place?: number, value?: number) => ({ shape: [count, columns], values: Array.from({ length: count * columns }, (_, i) => (i === place ? value! : i)) });
const fiducial = (content: Uint8Array | ReturnType<typeof rows>) => changed(minimalStudy(), { 'runs/power/fiducial.npy': content });
const file = (path: string, shape: number[], values: number[]) => changed(minimalStudy(), { [`runs/power/${path}`]: { shape, values } });

describe('array files that cannot be used', () => {
  it('a file that is missing, with the one that was meant', async () => {
    expect(await refusals(power('values: fiducial.npy', 'values: fidcial.npy'))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     runs/power/run.yaml:6:12  fiducial.values
        found     runs/power/fidcial.npy: no such file
        expected  a file inside the study folder
        do        write fiducial.npy, if that is what was meant"
    `);
  });

  it('a file in a folder that is missing', async () => {
    expect(await refusals(power('values: fiducial.npy', 'values: data/fiducial.npy'))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     runs/power/run.yaml:6:12  fiducial.values
        found     runs/power/data/fiducial.npy: no such file
        expected  a file inside the study folder
        do        put the file there, or correct the name data/fiducial.npy"
    `);
  });

  it('a file that was cut off', async () => {
    expect(await refusals(fiducial(npyBytes(rows(60, 3)).slice(0, 1000)))).toMatchInlineSnapshot(`
      "error: an array file is shorter than its header says
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy holds 872 bytes of data
        expected  1440 bytes, for the shape [60, 3] in its header
        do        copy or save the file again: it was cut off"
    `);
  });

  it('a file that is no array', async () => {
    expect(await refusals(fiducial(new TextEncoder().encode('1.0 2.0')))).toMatchInlineSnapshot(`
      "error: a file is not an NPY array
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy starts like text
        expected  a file written by numpy.save
        do        save the array with numpy.save"
    `);
  });

  it('an absurd shape', async () => {
    expect(await refusals(fiducial(npyFile("{'descr': '<f8', 'fortran_order': False, 'shape': (99999999999, 3), }", new Uint8Array(24))))).toMatchInlineSnapshot(`
      "error: an array file is shorter than its header says
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy holds 24 bytes of data
        expected  2399999999976 bytes, for the shape [99999999999, 3] in its header
        do        copy or save the file again: it was cut off"
    `);
  });

  it('a pickle', async () => {
    expect(await refusals(fiducial(npyFile("{'descr': '|O', 'fortran_order': False, 'shape': (60, 3), }", Uint8Array.of(0x80, 4))))).toMatchInlineSnapshot(`
      "error: an array does not hold plain numbers
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy holds pickled objects, which are never executed (type |O)
        expected  bool, integers of 1 to 8 bytes, or floats of 2, 4 or 8 bytes
        do        save it as float64: numpy.save(file, array.astype("<f8"))"
    `);
  });

  it('NaN', async () => {
    expect(await refusals(fiducial(rows(60, 3, 100, NaN)))).toMatchInlineSnapshot(`
      "error: an array holds values that are not finite
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy: NaN at row 33, column 1 (counted from 0), the only one
        expected  finite numbers only
        do        mend what wrote the file; where a simulation failed, leave out its row and its seed"
    `);
  });

  it('infinity', async () => {
    expect(await refusals(fiducial(rows(60, 3, 179, -Infinity)))).toMatchInlineSnapshot(`
      "error: an array holds values that are not finite
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy: -infinity at row 59, column 2 (counted from 0), the only one
        expected  finite numbers only
        do        mend what wrote the file; where a simulation failed, leave out its row and its seed"
    `);
  });

  it('a vector with NaN', async () => {
    expect(await refusals(file('shear_bias.npy', [3], [1, NaN, NaN]))).toMatchInlineSnapshot(`
      "error: an array holds values that are not finite
        where     runs/power/run.yaml:18:16  derivatives.shear_bias.exact
        found     shear_bias.npy: NaN at index 1 (counted from 0), the first of 2 such values
        expected  finite numbers only
        do        mend what wrote the file; where a simulation failed, leave out its row and its seed"
    `);
  });

  it('seeds that float64 would round', async () => {
    expect(await refusals(fiducialSeeds())).toMatchInlineSnapshot(`
      "error: an array holds values that are not exact
        where     runs/power/run.yaml:6:34  fiducial.seeds
        found     seeds.npy: an integer that float64 cannot hold exactly at index 1 (counted from 0), the first of 30 such values
        expected  integers up to 2^53 in size
        do        use smaller integers: seeds only need to differ"
    `);
  });
});

describe('shapes that do not fit', () => {
  it('columns that are not the entries', async () => {
    expect(await refusals(fiducial(rows(60, 4)))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy has the shape [60, 4]
        expected  [realisations, 3], one column for each entry of the vector
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('rows and columns exchanged', async () => {
    expect(await refusals(fiducial(rows(3, 60)))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy has the shape [3, 60]
        expected  [realisations, 3], one column for each entry of the vector
        do        save the transpose: one row for each realisation"
    `);
  });

  it('a vector in place of rows', async () => {
    expect(await refusals(file('fiducial.npy', [3], [1, 2, 3]))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy has the shape [3]
        expected  [realisations, 3], one column for each entry of the vector
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('one realisation', async () => {
    expect(await refusals(fiducial(rows(1, 3)))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy has the shape [1, 3]
        expected  [realisations, 3] with at least 2 realisations
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('no realisation', async () => {
    expect(await refusals(fiducial(rows(0, 3)))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:6:12  fiducial.values
        found     fiducial.npy has the shape [0, 3]
        expected  [realisations, 3] with at least 2 realisations
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('an exact derivative of the wrong length', async () => {
    expect(await refusals(file('shear_bias.npy', [2], [1, 2]))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:18:16  derivatives.shear_bias.exact
        found     shear_bias.npy has the shape [2]
        expected  [3]
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('an exact derivative as a column', async () => {
    expect(await refusals(file('shear_bias.npy', [3, 1], [1, 2, 3]))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:18:16  derivatives.shear_bias.exact
        found     shear_bias.npy has the shape [3, 1]
        expected  [3]
        do        check that this is the right file, and the vector of its run"
    `);
  });

  it('an exact derivative without a dimension', async () => {
    expect(await refusals(file('shear_bias.npy', [], [1]))).toMatchInlineSnapshot(`
      "error: the shape of an array does not fit
        where     runs/power/run.yaml:18:16  derivatives.shear_bias.exact
        found     shear_bias.npy has the shape []
        expected  [3]
        do        check that this is the right file, and the vector of its run"
    `);
  });
});

describe('seeds that do not fit', () => {
  it('fewer seeds than rows', async () => {
    expect(await refusals(file('seeds.npy', [3], [1, 2, 3]))).toMatchInlineSnapshot(`
      "error: seeds do not match their rows
        where     runs/power/run.yaml:6:34  fiducial.seeds
        found     3 seeds in seeds.npy, 60 rows in fiducial.npy
        expected  one seed for each row
        do        check that both files come from the same set of simulations"
    `);
  });

  it('a seed that stands twice', async () => {
    expect(await refusals(file('seeds.npy', [60], Array.from({ length: 60 }, (_, i) => (i === 40 ? 7 : i))))).toMatchInlineSnapshot(`
      "error: a seed stands twice
        where     runs/power/run.yaml:6:34  fiducial.seeds
        found     seeds.npy: seed 7 at index 7 and at index 40 (counted from 0)
        expected  each seed once: a realisation that counts twice looks like more simulations than there are
        do        remove the repeated rows and their seeds, or correct the seeds"
    `);
  });

  it('a seed that is not whole', async () => {
    expect(await refusals(file('seeds.npy', [60], Array.from({ length: 60 }, (_, i) => (i === 40 ? 40.5 : i))))).toMatchInlineSnapshot(`
      "error: a seed is not a whole number
        where     runs/power/run.yaml:6:34  fiducial.seeds
        found     seeds.npy: 40.5 at index 40 (counted from 0)
        expected  integers up to 2^53 in size
        do        save the seeds as integers"
    `);
  });

  it('seeds beside an exact derivative', async () => {
    expect(await refusals(power('{exact: shear_bias.npy}', '{exact: shear_bias.npy, seeds: seeds.npy}'))).toMatchInlineSnapshot(`
      "error: a key means nothing here
        where     runs/power/run.yaml:18:39  derivatives.shear_bias.seeds
        found     seeds: beside exact:
        expected  exact: without seeds:
        do        remove one of the two"
    `);
  });
});

describe('nodes that do not fit', () => {
  it('a single node', async () => {
    expect(await refusals(power('      - {at: 0.31, values: omega_m_plus.npy}\n', ''))).toMatchInlineSnapshot(`
      "error: a derivative has too few nodes
        where     runs/power/run.yaml:10:5  derivatives.omega_m.nodes
        found     1 node
        expected  at least 2, at different values of the parameter
        do        add a node; one of them may be the fiducial: {at: …, values: fiducial}"
    `);
  });

  it('no node', async () => {
    expect(await refusals(power('nodes:\n      - {at: 0.29, values: omega_m_minus.npy}\n      - {at: 0.31, values: omega_m_plus.npy}\n', 'nodes: []\n'))).toMatchInlineSnapshot(`
      "error: a derivative has too few nodes
        where     runs/power/run.yaml:10:5  derivatives.omega_m.nodes
        found     0 nodes
        expected  at least 2, at different values of the parameter
        do        add a node; one of them may be the fiducial: {at: …, values: fiducial}"
    `);
  });

  it('two nodes at one value', async () => {
    expect(await refusals(power('at: 0.31', 'at: 0.29'))).toMatchInlineSnapshot(`
      "error: two nodes stand at one value
        where     runs/power/run.yaml:12:10  derivatives.omega_m.nodes[1].at
        found     0.29 at nodes 0 and 1 (counted from 0)
        expected  a different value of the parameter at each node
        do        correct at: of one of them, or join their rows into one file"
    `);
  });

  it('other numbers of rows without seeds', async () => {
    expect(await refusals(edited(changed(minimalStudy(), { 'runs/power/omega_m_minus.npy': rows(30, 3) }), 'runs/power/run.yaml', '    seeds: step_seeds.npy\n', ''))).toMatchInlineSnapshot(`
      "error: a step does not match its files
        where     runs/power/run.yaml:11:9  derivatives.omega_m.nodes[1]
        found     30 rows in omega_m_minus.npy, 40 in omega_m_plus.npy
        expected  the same realisations at every node, or a seeds file for each
        do        add seeds: to both nodes"
    `);
  });

  it('seeds at one node only', async () => {
    expect(await refusals(edited(power('    seeds: step_seeds.npy\n', ''), 'runs/power/run.yaml', 'omega_m_minus.npy}', 'omega_m_minus.npy, seeds: step_seeds.npy}'))).toMatchInlineSnapshot(`
      "error: a step does not match its files
        where     runs/power/run.yaml:11:9  derivatives.omega_m.nodes[1]
        found     40 rows in omega_m_minus.npy with seeds, 40 rows in omega_m_plus.npy without
        expected  the same realisations at every node, or a seeds file for each
        do        add seeds: to the node that has none"
    `);
  });

  it('the fiducial at another value', async () => {
    expect(await refusals(power('{at: 0.31, values: omega_m_plus.npy}', '{at: 0.31, values: fiducial}'))).toMatchInlineSnapshot(`
      "error: the fiducial rows stand at another value
        where     runs/power/run.yaml:12:10  derivatives.omega_m.nodes[1].at
        found     0.31
        expected  0.3, the fiducial value of omega_m
        do        correct at:, or name the file that holds the rows at this value"
    `);
  });

  it('the fiducial with seeds of its own', async () => {
    expect(await refusals(power('{at: 0.31, values: omega_m_plus.npy}', '{at: 0.3, values: fiducial, seeds: seeds.npy}'))).toMatchInlineSnapshot(`
      "error: a key means nothing here
        where     runs/power/run.yaml:12:37  derivatives.omega_m.nodes[1].seeds
        found     seeds: beside values: fiducial
        expected  values: fiducial without seeds:
        do        remove one of the two"
    `);
  });

  it('the fiducial without seeds beside nodes with seeds', async () => {
    expect(await refusals(edited(edited(power('{at: 0.31, values: omega_m_plus.npy}', '{at: 0.3, values: fiducial}'), 'runs/power/run.yaml', ', seeds: seeds.npy', ''), 'runs/peaks/run.yaml', ', seeds: seeds.npy', ''))).toMatchInlineSnapshot(`
      "error: the fiducial rows cannot be matched with the other nodes
        where     runs/power/run.yaml:12:9  derivatives.omega_m.nodes[1]
        found     seeds at the other nodes, none under fiducial:
        expected  seeds for both, or for neither
        do        add seeds: under fiducial:"
    `);
  });

  it('the fiducial with seeds beside nodes without', async () => {
    expect(await refusals(edited(power('{at: 0.31, values: omega_m_plus.npy}', '{at: 0.3, values: fiducial}'), 'runs/power/run.yaml', '    seeds: step_seeds.npy\n', ''))).toMatchInlineSnapshot(`
      "error: the fiducial rows cannot be matched with the other nodes
        where     runs/power/run.yaml:11:9  derivatives.omega_m.nodes[1]
        found     seeds under fiducial:, none at the other nodes
        expected  seeds for both, or for neither
        do        add seeds: to this derivative"
    `);
  });

  it('the fiducial without a seed in common', async () => {
    expect(await refusals(edited(changed(minimalStudy(), { 'runs/power/step_seeds.npy': { shape: [40], values: Array.from({ length: 40 }, (_, i) => i) } }), 'runs/power/run.yaml', '{at: 0.31, values: omega_m_plus.npy}', '{at: 0.3, values: fiducial}'))).toMatchInlineSnapshot(`
      "error: the fiducial rows cannot be matched with the other nodes
        where     runs/power/run.yaml:12:9  derivatives.omega_m.nodes[1]
        found     0 seeds in common
        expected  at least 2 seeds that the fiducial rows and every other node share
        do        check that the seeds files name the same simulations, or leave the fiducial node out"
    `);
  });

  it('the fiducial twice', async () => {
    expect(await refusals(power('      - {at: 0.29, values: omega_m_minus.npy}\n      - {at: 0.31, values: omega_m_plus.npy}', '      - {at: 0.3, values: fiducial}\n      - {at: 0.3, values: fiducial}'))).toMatchInlineSnapshot(`
      "error: two nodes stand at one value
        where     runs/power/run.yaml:12:10  derivatives.omega_m.nodes[1].at
        found     0.3 at nodes 0 and 1 (counted from 0)
        expected  a different value of the parameter at each node
        do        correct at: of one of them, or join their rows into one file"
    `);
  });

  it('a derivative of two kinds', async () => {
    expect(await refusals(power('{exact: shear_bias.npy}', '{exact: shear_bias.npy, per_realisation: fiducial.npy}'))).toMatchInlineSnapshot(`
      "error: keys exclude each other
        where     runs/power/run.yaml:18:3  derivatives.shear_bias
        found     per_realisation and exact
        expected  exactly one of nodes, per_realisation, exact
        do        remove all but one"
    `);
  });

  it('a derivative of no kind', async () => {
    expect(await refusals(power('{exact: shear_bias.npy}', '{}'))).toMatchInlineSnapshot(`
      "error: a key is missing
        where     runs/power/run.yaml:18:3  derivatives.shear_bias
        found     none of them
        expected  exactly one of nodes, per_realisation, exact
        do        add the one that applies"
    `);
  });
});
