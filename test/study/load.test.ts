import { createHash } from 'node:crypto';
import { appendFileSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { InputError } from '../../src/study/problems.js';
import type { Ensemble } from '../../src/study/study.js';
import { npyBytes } from '../fixtures/npy-writer.js';
import type { StudyFiles } from '../fixtures/study-folder.js';
import { changed, edited, minimalStudy, writeStudy } from '../fixtures/study-folder.js';

const load = async (files: StudyFiles) => loadStudy(writeStudy(files));
const study = (from: string, to: string) => edited(minimalStudy(), 'study.yaml', from, to);
const power = (from: string, to: string) => edited(minimalStudy(), 'runs/power/run.yaml', from, to);
const ensemble = async (files: StudyFiles): Promise<Ensemble> => {
  const run = (await load(files)).runs.find(({ name }) => name === 'power');
  if (run?.data.kind !== 'ensemble') throw new Error('no ensemble');
  return run.data;
};

describe('a study', () => {
  it('has its targets first, its nuisance parameters last, and defaults where nothing is said', async () => {
    const { parameters, ...rest } = await load(minimalStudy());
    expect(parameters).toEqual([
      { name: 'omega_m', label: '\\Omega_\\mathrm{m}', fiducial: 0.3, unit: '', role: 'target', prior: null, reference: null },
      { name: 'sigma_8', label: 'sigma_8', fiducial: 0.8, unit: '', role: 'target', prior: null, reference: null },
      { name: 'shear_bias', label: 'shear_bias', fiducial: 0, unit: '', role: 'nuisance', prior: 0.01, reference: null },
    ]);
    expect(rest).toMatchObject({ summary: null, authors: [], licence: null, date: null, prior: null, scan: null, tolerance: 0.1, claims: [], baseline: 'power' });
    expect(rest.combinations).toEqual([
      { name: 'power', label: 'Power spectrum', probes: ['power'], keep: [], volume: null },
      { name: 'joint', label: 'Power spectrum and peaks', probes: ['power', 'peaks'], keep: [], volume: null },
    ]);
  });

  it('has its runs by name, with the columns in the order of the vector', async () => {
    const { runs } = await load(power('values: [0.1, 0.2, 0.3]}', 'values: [0.1, 0.2], label: P_0(k)}\n  - {probe: shape, block: tail, size: 1}'));
    expect(runs.map(({ name, suite, volume, volumeUnit }) => [name, suite, volume, volumeUnit])).toEqual([
      ['peaks', 'box-a', null, ''],
      ['power', 'box-a', null, ''],
    ]);
    expect(runs[1]!.columns).toEqual([
      { probe: 'power', block: 'monopole', label: 'P_0(k)', coordinate: { name: 'k', unit: 'h/Mpc', value: 0.1 } },
      { probe: 'power', block: 'monopole', label: 'P_0(k)', coordinate: { name: 'k', unit: 'h/Mpc', value: 0.2 } },
      { probe: 'shape', block: 'tail', label: 'tail', coordinate: null },
    ]);
  });

  it('reads everything that study.yaml may say', async () => {
    const more = `baseline: joint
summary: notes/summary.md
authors: [{name: A. Author, orcid: 0000-0002-1825-0097}]
licence: CC-BY-4.0
date: 2031-05-02
tolerance: 0.05
probes: {peaks: {label: Peaks, notes: notes/peaks.md}, power: {}}
scan: {coordinate: k, keep: above, at: [0.3, 0.1, 0.2]}
claims:
  - {id: a, text: A., parameter: omega_m, combination: power, gain: {between: [1, 2]}}
  - {id: b, text: B., parameter: omega_m, combination: joint, against: power, error: fixed, gain: {at_least: 2}}
  - {id: c, text: C., parameter: sigma_8, combination: joint, size: {at_most: 0.1}}
`;
    const files = changed(edited(study('baseline: power\n', more), 'study.yaml', 'probes: [power]}', 'probes: [power], keep: {power: {k: {max: 0.2}, blocks: [monopole]}}}'), {
      'notes/summary.md': '# Σ\n',
      'notes/peaks.md': 'Peaks.\n',
    });
    const loaded = await load(files);
    expect(loaded).toMatchObject({
      summary: '# Σ\n',
      authors: [{ name: 'A. Author', orcid: '0000-0002-1825-0097', affiliation: null }],
      licence: 'CC-BY-4.0',
      date: '2031-05-02',
      tolerance: 0.05,
      scan: { coordinate: 'k', keep: 'above', at: [0.1, 0.2, 0.3] },
      probes: [
        { name: 'peaks', label: 'Peaks', notes: 'Peaks.\n' },
        { name: 'power', label: 'power', notes: null },
      ],
    });
    expect(loaded.combinations[0]!.keep).toEqual([{ probe: 'power', ranges: [{ coordinate: 'k', min: null, max: 0.2 }], blocks: ['monopole'] }]);
    expect(loaded.claims).toEqual([
      { id: 'a', text: 'A.', parameter: 'omega_m', combination: 'power', against: 'joint', error: 'marginalised', quantity: 'gain', test: { kind: 'between', low: 1, high: 2 } },
      { id: 'b', text: 'B.', parameter: 'omega_m', combination: 'joint', against: 'power', error: 'fixed', quantity: 'gain', test: { kind: 'at least', threshold: 2 } },
      { id: 'c', text: 'C.', parameter: 'sigma_8', combination: 'joint', against: 'joint', error: 'marginalised', quantity: 'size', test: { kind: 'at most', threshold: 0.1 } },
    ]);
  });

  it('puts the prior matrix into the order of the parameters', async () => {
    // In the file: omega_m, shear_bias, sigma_8.
    const { prior } = await load(changed(study('baseline: power', 'baseline: power\nprior: prior.npy'), { 'prior.npy': { shape: [3, 3], values: [4, 1, 2, 1, 5, 3, 2, 3, 6] } }));
    expect(Array.from(prior!.data)).toEqual([4, 2, 1, 2, 6, 3, 1, 3, 5]);
  });

  it('takes a prior matrix that is written out', async () => {
    const { prior } = await load(study('baseline: power', 'baseline: power\nprior: [[4, 0, 0], [0, 5, 0], [0, 0, 0]]'));
    expect(Array.from(prior!.data)).toEqual([4, 0, 0, 0, 0, 0, 0, 0, 5]);
  });

  it('may have one run without a suite, which is then named after the run', async () => {
    const alone = changed(edited(power('suite: box-a\n', ''), 'study.yaml', '  - {name: joint, label: Power spectrum and peaks, probes: [power, peaks]}\n', ''), {});
    const { runs } = await load(new Map([...alone].filter(([name]) => !name.startsWith('runs/peaks/'))));
    expect(runs.map(({ name, suite }) => [name, suite])).toEqual([['power', 'power']]);
  });

  it('scales a combination to a volume where its runs have one', async () => {
    const files = power('suite: box-a', 'suite: box-b\nvolume: 2\nvolume_unit: Gpc^3');
    const { combinations } = await load(edited(files, 'study.yaml', 'probes: [power]}', 'probes: [power], volume: 5}'));
    expect(combinations[0]!.volume).toBe(5);
  });

  it('keeps provenance in its order', async () => {
    const { runs } = await load(power('suite: box-a', 'suite: box-a\nprovenance: {data: here, code: there}'));
    expect(runs[1]!.provenance).toEqual([['data', 'here'], ['code', 'there']]);
  });

  it('ignores plain files and hidden folders beside its runs', async () => {
    const { runs } = await load(changed(minimalStudy(), { 'runs/README.md': 'x', 'runs/.hidden/x': 'x' }));
    expect(runs).toHaveLength(2);
  });

  it('says where its keys stand', async () => {
    const { place, runs } = await load(minimalStudy());
    expect(place(['combinations', 1, 'probes', 0])).toEqual({ file: 'study.yaml', line: 9, column: 61, path: 'combinations[1].probes[0]' });
    expect(runs[1]!.place(['fiducial'])).toEqual({ file: 'runs/power/run.yaml', line: 6, column: 1, path: 'fiducial' });
  });
});

describe('the inputs of a study', () => {
  it('are every file that was read, once, by path, with digest and size', async () => {
    const folder = writeStudy(changed(minimalStudy(), { 'runs/power/unused.npy': { shape: [1], values: [1] }, 'notes/unused.md': 'x' }));
    const { inputs, digest } = await loadStudy(folder);
    const names = ['fiducial.npy', 'omega_m_minus.npy', 'omega_m_plus.npy', 'run.yaml', 'seeds.npy', 'sigma_8_minus.npy', 'sigma_8_plus.npy', 'step_seeds.npy'];
    const paths = [...names.map((name) => `runs/peaks/${name}`), ...[...names, 'shear_bias.npy'].sort().map((name) => `runs/power/${name}`), 'study.yaml'];
    const expected = paths.map((name) => {
      const bytes = readFileSync(path.join(folder, name));
      return { path: name, sha256: createHash('sha256').update(bytes).digest('hex'), bytes: bytes.length };
    });
    expect(inputs).toEqual(expected);
    const list = expected.map((input) => `${input.sha256}  ${input.path}\n`).join('');
    expect(digest).toBe(createHash('sha256').update(list).digest('hex'));
  });

  it('have the same digest wherever the folder is, and another one when a byte differs', async () => {
    const first = await load(minimalStudy());
    const second = await load(minimalStudy());
    const third = await load(study('invented', 'invemted'));
    expect(second.digest).toBe(first.digest);
    expect(third.digest).not.toBe(first.digest);
  });
});

describe('an ensemble', () => {
  it('leaves its rows in their files and reads them when asked', async () => {
    const { fiducial } = await ensemble(changed(minimalStudy(), { 'runs/power/fiducial.npy': { shape: [60, 3], values: Array.from({ length: 180 }, (_, i) => i), type: '<f4' } }));
    expect([fiducial.source, fiducial.rows.rows, fiducial.rows.columns]).toEqual(['fiducial.npy', 60, 3]);
    expect(Array.from(fiducial.rows.read(2, 1))).toEqual([6, 7, 8]);
    expect(Array.from({ length: 3 }, (_, i) => fiducial.seeds![i])).toEqual([100, 101, 102]);
  });

  it('gives nodes the seeds of their derivative, unless they have their own', async () => {
    const files = changed(power('omega_m_plus.npy}', 'omega_m_plus.npy, seeds: own.npy}'), { 'runs/power/own.npy': { shape: [1, 40], values: Array.from({ length: 40 }, (_, i) => i) } });
    const { omega_m: derivative } = (await ensemble(files)).derivatives;
    const seeds = derivative?.kind === 'nodes' ? derivative.nodes.map(({ at, realisations }) => [at, realisations === 'fiducial' ? null : realisations.seeds![1]]) : [];
    expect(seeds).toEqual([[0.29, 101], [0.31, 1]]);
  });

  it('takes the fiducial rows as a node, matched by seed or by index', async () => {
    const node = (files: StudyFiles) => edited(files, 'runs/power/run.yaml', '{at: 0.31, values: omega_m_plus.npy}', '{at: 0.3, values: fiducial}');
    const bySeed = (await ensemble(node(minimalStudy()))).derivatives.omega_m;
    expect(bySeed?.kind === 'nodes' ? bySeed.nodes[1] : null).toEqual({ at: 0.3, realisations: 'fiducial' });
    const plain = ['power', 'peaks'].reduce((files, run) => edited(files, `runs/${run}/run.yaml`, ', seeds: seeds.npy', ''), minimalStudy());
    const byIndex = (await ensemble(edited(node(plain), 'runs/power/run.yaml', '    seeds: step_seeds.npy\n', ''))).derivatives.omega_m;
    expect(byIndex?.kind === 'nodes' ? byIndex.nodes.map(({ realisations }) => realisations === 'fiducial' || realisations.seeds) : null).toEqual([null, true]);
  });

  it('reads derivatives that are exact, per realisation, or nothing', async () => {
    const { derivatives } = await ensemble(power('{exact: shear_bias.npy}', '{per_realisation: omega_m_plus.npy, seeds: step_seeds.npy}'));
    const { shear_bias: perRealisation } = derivatives;
    expect(perRealisation?.kind === 'per realisation' ? [perRealisation.realisations.rows.rows, perRealisation.realisations.seeds![0]] : null).toEqual([40, 100]);
    const exact = (await ensemble(minimalStudy())).derivatives.shear_bias;
    expect(exact).toEqual({ kind: 'exact', values: Float64Array.of(20, 20, 20) });
    const peaks = (await load(minimalStudy())).runs[0]!;
    expect(peaks.data.derivatives.shear_bias).toEqual({ kind: 'insensitive' });
  });

  it('lets a vector serve as rows where there is one entry', async () => {
    const one = edited(minimalStudy(), 'runs/peaks/run.yaml', '[1, 2]', '[1]');
    const vectors = ['omega_m_minus', 'omega_m_plus', 'sigma_8_minus', 'sigma_8_plus'].map((name): [string, { shape: number[]; values: number[] }] => [`runs/peaks/${name}.npy`, { shape: [40], values: Array.from({ length: 40 }, (_, i) => i) }]);
    const { runs } = await load(changed(one, { ...Object.fromEntries(vectors), 'runs/peaks/fiducial.npy': { shape: [60], values: Array.from({ length: 60 }, (_, i) => i) } }));
    expect(runs[0]!.data.kind === 'ensemble' ? runs[0]!.data.fiducial.rows.columns : null).toBe(1);
  });

  it('says where it stood when a file changes after loading', async () => {
    const folder = writeStudy(minimalStudy());
    const { runs } = await loadStudy(folder);
    appendFileSync(path.join(folder, 'runs/power/fiducial.npy'), npyBytes({ shape: [1], values: [1] }));
    const { data } = runs[1]!;
    const read = () => (data.kind === 'ensemble' ? data.fiducial.rows.read(0, 1) : null);
    expect(read).toThrow(InputError);
    expect(read).toThrow('a file changed while it was read');
  });
});
