import { execFileSync, spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { beforeAll, describe, expect, it } from 'vitest';
import { forecast } from '../../src/forecast/forecast.js';
import { firstDerivativeWeights } from '../../src/forecast/stencil.js';
import type { Results } from '../../src/results/schema.js';
import { loadStudy } from '../../src/study/load.js';
import { normals } from '../fixtures/random-normal.js';
import { writeStudy } from '../fixtures/study-folder.js';

// The same numbers by another hand: vectorised NumPy that leaves realisations out one by one, on the same files.
const python = '/usr/bin/python3';
const available = spawnSync(python, ['-c', 'import numpy']).status === 0 || process.env.CI !== undefined;

const size = 9;
const fiducials = 70;
const realisations = 30;
const nodes: Readonly<Record<string, readonly number[]>> = { a: [0.9, 1.1], b: [-0.2, -0.1, 0.1, 0.2], m: [-0.01, 0.01] };
const fiducialValue: Readonly<Record<string, number>> = { a: 1, b: 0, m: 0 };
const names = Object.keys(nodes);

/** A study on disk with two and four nodes, matched seeds, a nuisance parameter with a prior, correlated noise. */
function folder(): string {
  const next = normals(5);
  const noise = (): number[] => {
    const white = Array.from({ length: size }, next);
    return white.map((one, i) => one + 0.4 * (white[i - 1] ?? 0));
  };
  const response = (name: string, i: number): number => 2 * Math.cos((i + 1) * (0.4 + 0.5 * names.indexOf(name)));
  const common = Array.from({ length: realisations }, noise);
  const files = new Map<string, string | { shape: number[]; values: number[] }>();
  files.set('runs/run/fiducial.npy', { shape: [fiducials, size], values: Array.from({ length: fiducials }, noise).flat() });
  const steps: Record<string, (number | string)[][]> = {};
  for (const [name, places] of Object.entries(nodes)) {
    const weights = firstDerivativeWeights(places, fiducialValue[name]!);
    steps[name] = places.map((at, j) => [at, weights[j]!, `${name}${String(j)}.npy`]);
    places.forEach((at, j) => {
      const step = at - fiducialValue[name]!;
      const rows = common.map((row) => row.map((value, i) => value * (1 + 0.3 * step) + step * (response(name, i) + 0.5 * next()) + 0.3 * step * step));
      files.set(`runs/run/${name}${String(j)}.npy`, { shape: [realisations, size], values: rows.flat() });
    });
  }
  const derivatives = names.map((name) => `  ${name}: {nodes: [${steps[name]!.map(([at, , file]) => `{at: ${String(at)}, values: ${String(file)}}`).join(', ')}]}\n`);
  files.set(
    'runs/run/run.yaml',
    `format: 1\nkind: ensemble\nvector:\n  - {probe: one, block: all, coordinate: k, values: [1, 2, 3, 4]}\n  - {probe: two, block: all, size: 5}\nfiducial: {values: fiducial.npy}\nderivatives:\n${derivatives.join('')}`,
  );
  files.set(
    'study.yaml',
    `format: 1\ntitle: Second opinion\nparameters:\n  - {name: a, fiducial: 1}\n  - {name: b, fiducial: 0}\n  - {name: m, fiducial: 0, role: nuisance, prior: 0.5}\ncombinations:\n  - {name: base, probes: [one]}\n  - {name: joint, probes: [one, two]}\nbaseline: base\n`,
  );
  files.set(
    'plan.json',
    JSON.stringify({ parameters: names, priors: [null, null, 0.5], steps, baseline: 'base', combinations: { base: [0, 1, 2, 3], joint: [0, 1, 2, 3, 4, 5, 6, 7, 8] } }),
  );
  return writeStudy(files);
}

interface Opinion {
  readonly fisher: { readonly raw: number[][]; readonly corrected: number[][] };
  /** [marginalised, fixed][parameter] */
  readonly raw: number[][];
  readonly corrected: number[][];
  readonly derivatives: number[][];
  readonly covariance: number[][];
  readonly gainDerivatives: number[][];
  readonly gainCovariance: number[][];
}

describe.skipIf(!available)(`NumPy ${available ? 'agrees' : 'is not here: skipped'}`, () => {
  let results: Results;
  let opinions: Readonly<Record<string, Opinion>>;

  beforeAll(async () => {
    const study = folder();
    results = forecast(await loadStudy(study), { name: 'test', version: '0' });
    const script = fileURLToPath(new URL('./numpy/second-opinion.py', import.meta.url));
    opinions = JSON.parse(execFileSync(python, [script, study], { encoding: 'utf8' })) as Record<string, Opinion>;
  });

  // Both sides invert matrices of condition below 1e4 in double precision: 1e-10 leaves room for that and for nothing else.
  const close = (actual: number, opinion: number): void => {
    expect(Math.abs(actual / opinion - 1)).toBeLessThan(1e-10);
  };

  it.each(['base', 'joint'])('on the Fisher matrices of %s', (name) => {
    const { fisher } = results.combinations[name]!;
    for (const which of ['raw', 'corrected'] as const) {
      fisher[which]!.forEach((row, i) => {
        row.forEach((value, j) => {
          close(value, opinions[name]!.fisher[which][i]![j]!);
        });
      });
    }
  });

  it.each(['base', 'joint'])('on the errors of %s and both parts of their uncertainty', (name) => {
    const opinion = opinions[name]!;
    names.forEach((parameter, a) => {
      (['marginalised', 'fixed'] as const).forEach((kind, k) => {
        const { raw, corrected, parts } = results.combinations[name]!.errors[parameter]![kind];
        close(raw!, opinion.raw[k]![a]!);
        close(corrected!, opinion.corrected[k]![a]!);
        close(parts.derivatives!, opinion.derivatives[k]![a]!);
        close(parts.covariance!, opinion.covariance[k]![a]!);
      });
    });
  });

  it('on the gains and both parts of their uncertainty', () => {
    const [base, joint] = [opinions.base!, opinions.joint!];
    names.forEach((parameter, a) => {
      (['marginalised', 'fixed'] as const).forEach((kind, k) => {
        const { raw, corrected, parts } = results.improvements.joint![parameter]![kind];
        close(raw!, base.raw[k]![a]! / joint.raw[k]![a]!);
        close(corrected!, base.corrected[k]![a]! / joint.corrected[k]![a]!);
        close(parts.derivatives!, joint.gainDerivatives[k]![a]!);
        close(parts.covariance!, joint.gainCovariance[k]![a]!);
      });
    });
  });
});
