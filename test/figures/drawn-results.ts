import { forecast } from '../../src/forecast/forecast.js';
import type { Results } from '../../src/results/schema.js';
import { combination, columnsOf, ensembleRun, memoryStudy, parameter, realisations } from '../fixtures/memory-study.js';
import { normals } from '../fixtures/random-normal.js';

/** What a study for figures is made of. */
export interface Shape {
  readonly parameters: number;
  /** The baseline and this many more, each with a probe of its own. */
  readonly added: number;
  readonly label?: string;
  /** Noise of one realisation's derivative; large noise leaves values undetermined. */
  readonly noise?: number;
  readonly derivatives?: number;
}

/** Results of a seeded study of any shape: TeX labels, a nuisance with a prior, a reference, a probe for every combination. */
export function drawnResults({ parameters, added, label = 'Power and more', noise = 0.3, derivatives = 64 }: Shape): Results {
  const next = normals(11);
  const perProbe = Math.max(4, parameters + 1);
  const columns = Array.from({ length: added + 1 }, (_, k) => columnsOf(`probe${String(k)}`, perProbe)).flat();
  const size = columns.length;
  const rows = (count: number, at: (column: number) => number, scatter: number): Float64Array =>
    Float64Array.from({ length: count * size }, (_, i) => at(i % size) + scatter * next());
  const greek = ['\\Omega_\\mathrm{m}', '\\sigma_8', 'n_\\mathrm{s}', 'w_0', 'm'];
  const names = Array.from({ length: parameters }, (_, a) => `p${String(a)}`);
  const response = (column: number, a: number): number => Math.cos((column + 1) * (0.35 + 0.31 * a)) + (a === 1 ? 0.4 : 0);
  const run = ensembleRun(
    'run',
    columns,
    realisations(rows(4 * size + 40, (column) => 10 + column, 1), size),
    Object.fromEntries(
      names.map((name, a) => [
        name,
        { kind: 'per realisation', realisations: realisations(rows(derivatives, (column) => response(column, a), noise), size) },
      ]),
    ),
  );
  const combinations = Array.from({ length: added }, (_, k) =>
    combination(`joint${String(k)}`, ['probe0', `probe${String(k + 1)}`], { label: `${label} ${String(k + 1)}` }),
  );
  const study = memoryStudy({
    parameters: names.map((name, a) =>
      parameter(name, {
        label: greek[a] ?? `\\alpha_{${String(a)}}`,
        ...(a === parameters - 1 ? { role: 'nuisance' as const, prior: 0.5 } : {}),
        ...(a === 0 ? { reference: { label: 'Best bound', error: 0.4 } } : {}),
      }),
    ),
    combinations: [combination('base', ['probe0'], { label: 'Power spectrum' }), ...combinations],
    runs: [run],
  });
  return forecast(study, { name: 'sigmafolio', version: '0.0.0' });
}
