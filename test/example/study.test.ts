import { readdirSync, readFileSync, statSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { fourier } from '../../example-runs/generator/fourier.js';
import { realisation } from '../../example-runs/generator/maps.js';
import { floatRows, integers } from '../../example-runs/generator/npy.js';
import { fiducial, schemes } from '../../example-runs/generator/parameters.js';
import { meanOver } from '../../example-runs/generator/power-spectrum.js';
import { runFile } from '../../example-runs/generator/run-file.js';
import { fundamental, onModes, pixels, squaredModes } from '../../example-runs/generator/sky.js';
import type { RunName } from '../../example-runs/generator/vectors.js';
import { measureAt, runs } from '../../example-runs/generator/vectors.js';
import { convergenceSpectrum } from '../../example-runs/generator/convergence.js';
import { forecast } from '../../src/forecast/forecast.js';
import { loadStudy } from '../../src/study/load.js';

const folder = fileURLToPath(new URL('../../example-runs/lensing/', import.meta.url));
const names = Object.keys(runs) as RunName[];
const columns: Readonly<Record<RunName, number>> = { spectrum: 16, maps: 107 };

function committed(run: RunName, file: string): Buffer {
  return readFileSync(path.join(folder, 'runs', run, file));
}

/** What follows the header of an NPY file. */
function body(bytes: Uint8Array): Buffer {
  const buffer = Buffer.from(bytes);
  return buffer.subarray(10 + buffer.readUInt16LE(8));
}

function seedsOf(run: RunName, file: string): readonly number[] {
  const bytes = body(committed(run, file));
  return Array.from({ length: bytes.length / 4 }, (_, i) => bytes.readInt32LE(4 * i));
}

describe('the example study', () => {
  it('is at most 4 MB', () => {
    const files = readdirSync(folder, { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile() && !entry.parentPath.includes('report'));
    const size = files.reduce((sum, entry) => sum + statSync(path.join(entry.parentPath, entry.name)).size, 0);
    expect(size).toBeLessThan(4e6);
    expect(size).toBeGreaterThan(1e6);
  });

  it('holds the run files that the generator writes', () => {
    for (const run of names) expect(committed(run, 'run.yaml').toString()).toBe(runFile(run));
  });

  it('holds, in its first rows at every node, what the generator makes of their seeds, byte for byte', () => {
    const transform = fourier(pixels);
    const nodes = [
      { file: 'fiducial', seeds: 'fiducial_seeds.npy', measure: measureAt(fiducial, transform) },
      ...schemes.flatMap(({ parameter, nodes: at }) =>
        at.map((node) => ({ file: node.file, seeds: 'derivative_seeds.npy', measure: measureAt({ ...fiducial, [parameter]: node.at }, transform) })),
      ),
    ];
    expect(nodes).toHaveLength(12 + 1);
    for (const run of names) {
      for (const { file, seeds, measure } of nodes) {
        const rows = seedsOf(run, seeds)
          .slice(0, 2)
          .map((seed) => measure(realisation(seed, transform))[run]);
        const expected = body(floatRows(rows));
        expect(expected).toHaveLength(2 * 4 * columns[run]);
        expect(body(committed(run, `${file}.npy`)).subarray(0, expected.length).equals(expected), `${run}/${file}.npy`).toBe(true);
      }
    }
  });

  it('names the same simulations in both runs, in different orders', () => {
    for (const file of ['fiducial_seeds.npy', 'derivative_seeds.npy']) {
      const [first, second] = [seedsOf('spectrum', file), seedsOf('maps', file)];
      expect(first).not.toEqual(second);
      expect([...second].sort((a, b) => a - b)).toEqual(first);
      expect(integers(first)).toEqual(new Uint8Array(committed('spectrum', file)));
    }
  });

  it('has the mean power of its theory, within the scatter of its 1500 fiducial maps', () => {
    const bytes = body(committed('spectrum', 'fiducial.npy'));
    const count = bytes.length / 4 / columns.spectrum;
    const power = onModes(convergenceSpectrum(fiducial));
    const target = meanOver((mode) => ((1e5 * fundamental ** 2 * squaredModes[mode]!) / (2 * Math.PI)) * power[mode]!);
    target.forEach((expected, column) => {
      const values = Array.from({ length: count }, (_, row) => bytes.readFloatLE(4 * (row * columns.spectrum + column)));
      const mean = values.reduce((sum, value) => sum + value, 0) / count;
      const error = Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (count - 1) / count);
      // 4.5 standard errors: one of 16 correct means is further off once in 9000 times. The worst error is 2 % of the mean.
      expect(Math.abs(mean - expected) / error).toBeLessThan(4.5);
      expect(error / mean).toBeLessThan(0.025);
    });
  });

  it('flatters its plain gain, and has a claim for every verdict', async () => {
    const results = forecast(await loadStudy(folder), { name: 'test', version: '0' });
    const { raw, corrected, sham } = results.improvements.everything!.sigma_8!.marginalised;
    // The plain gain is beyond what the correction leaves by a fifth or more, and noise alone reports most of such a gain.
    expect(raw! / corrected!).toBeGreaterThan(1.2);
    expect(sham!).toBeGreaterThan(1.2);
    for (const { errors } of Object.values(results.combinations)) {
      for (const { marginalised, fixed } of Object.values(errors)) {
        expect(marginalised.corrected).not.toBeNull();
        expect(fixed.corrected).not.toBeNull();
      }
    }
    expect(Object.fromEntries(results.claims.map(({ id, verdict }) => [id, verdict]))).toEqual({
      'sigma8-all-three': 'contradicted',
      'sigma8-peaks': 'not settled',
      'sigma8-onepoint': 'too close to call',
      'omegam-onepoint': 'supported',
      'omegam-size': 'supported',
    });
    // Each would have passed on the plain numbers.
    for (const { raw: plain, test, threshold } of results.claims) {
      if (test === 'at least') expect(plain).toBeGreaterThan(threshold as number);
      else expect(plain).toBeLessThan(threshold as number);
    }
    // The maps are lognormal, and their distances say so.
    expect(results.checks.filter(({ level }) => level === 'warning' || level === 'error').map(({ id }) => id)).toEqual(['distances-patches']);
  });
});
