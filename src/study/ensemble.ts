import { readRealisations, readVector } from './array-shapes.js';
import { readNodes } from './nodes.js';
import type { RunContext } from './run-context.js';
import { everyDerivative, noneOf, onlyKey } from './run-context.js';
import type { EnsembleDerivativeFile, EnsembleFile } from './schema.js';
import { readSeeds } from './seeds.js';
import type { Ensemble, EnsembleDerivative, Parameter, Realisations } from './study.js';

/** The arrays of a run of kind `ensemble`; null where something cannot be used. */
export function readEnsemble(run: EnsembleFile, context: RunContext): Ensemble | null {
  const { reading, folder, place, columns } = context;
  const rows = readRealisations(reading, folder, run.fiducial.values, columns.length, place(['fiducial', 'values']));
  const fiducial = rows === null ? null : withSeeds(rows, run.fiducial.seeds, ['fiducial', 'seeds'], context);
  const derivatives = everyDerivative(context, run.derivatives ?? {}, run.insensitive ?? [], (given, parameter) =>
    readDerivative(given, parameter, fiducial, context),
  );
  return fiducial === null ? null : { kind: 'ensemble', fiducial, derivatives };
}

function withSeeds(
  rows: Omit<Realisations, 'seeds'>,
  reference: EnsembleFile['fiducial']['seeds'],
  path: readonly (string | number)[],
  { reading, folder, place }: RunContext,
): Realisations | null {
  if (reference === undefined) return { ...rows, seeds: null };
  const seeds = readSeeds(reading, folder, reference, rows.rows.rows, rows.source, place(path));
  return seeds === null ? null : { ...rows, seeds };
}

function readDerivative(given: EnsembleDerivativeFile, parameter: Parameter, fiducial: Realisations | null, context: RunContext): EnsembleDerivative | null {
  const { reading, folder, place, columns } = context;
  const path = ['derivatives', parameter.name];
  const kind = onlyKey(given, ['nodes', 'per_realisation', 'exact'], path, context);
  if (kind === 'nodes' && given.nodes !== undefined) return readNodes(given.nodes, given.seeds, parameter, fiducial, context);
  if (kind === 'per_realisation' && given.per_realisation !== undefined) {
    const rows = readRealisations(reading, folder, given.per_realisation, columns.length, place([...path, 'per_realisation']));
    const realisations = rows === null ? null : withSeeds(rows, given.seeds, [...path, 'seeds'], context);
    return realisations === null ? null : { kind: 'per realisation', realisations };
  }
  if (kind === 'exact' && given.exact !== undefined) {
    noneOf(given, ['seeds'], 'exact:', path, context);
    const values = readVector(reading, folder, given.exact, columns.length, place([...path, 'exact']));
    return values === null ? null : { kind: 'exact', values };
  }
  return null;
}
