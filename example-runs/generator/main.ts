import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fourier } from './fourier.js';
import { floatRows, integers } from './npy.js';
import { derivativeCount, fiducialCount, simulate } from './realisations.js';
import { runFile } from './run-file.js';
import { pixels } from './sky.js';
import type { RunName } from './vectors.js';
import { runs } from './vectors.js';

/**
 * Simulates the invented survey and writes its runs: `npm run generate` into example-runs/lensing, or into the study folder
 * that the first argument names. study.yaml and notes/ are written by hand and stay as they are.
 */

/** The second run was measured by another job, which took the even seeds first: rows have to be matched by seed. */
const orders: Readonly<Record<RunName, (seeds: readonly number[]) => readonly number[]>> = {
  spectrum: (seeds) => seeds,
  maps: (seeds) => [...seeds.filter((seed) => seed % 2 === 0), ...seeds.filter((seed) => seed % 2 === 1)],
};

const study = process.argv[2] ?? join('example-runs', 'lensing');
const suite = simulate(fiducialCount, fourier(pixels));
for (const name of Object.keys(runs) as RunName[]) {
  const folder = join(study, 'runs', name);
  mkdirSync(folder, { recursive: true });
  const seedsOf = (count: number): readonly number[] => orders[name](Array.from({ length: count }, (_, i) => i + 1));
  writeFileSync(join(folder, 'run.yaml'), runFile(name));
  writeFileSync(join(folder, 'fiducial_seeds.npy'), integers(seedsOf(fiducialCount)));
  writeFileSync(join(folder, 'derivative_seeds.npy'), integers(seedsOf(derivativeCount)));
  for (const [file, vectors] of suite) {
    const rows = seedsOf(vectors.length).map((seed) => vectors[seed - 1]![name]);
    writeFileSync(join(folder, `${file}.npy`), floatRows(rows));
  }
}
