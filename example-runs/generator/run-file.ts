import { fiducial, schemes } from './parameters.js';
import { sideInDegrees } from './sky.js';
import type { Block, RunName } from './vectors.js';
import { runs } from './vectors.js';

/** The text of a run.yaml. */
export function runFile(name: RunName): string {
  return [
    '# Written by example-runs/generator: change that, not this.',
    'format: 1',
    'kind: ensemble',
    'suite: patches',
    `volume: ${String(sideInDegrees ** 2)}`,
    'volume_unit: deg^2',
    'provenance:',
    '  code: example-runs/generator',
    '  data: simulated, an invented survey',
    'vector:',
    ...runs[name].flatMap(blockLines),
    'fiducial: {values: fiducial.npy, seeds: fiducial_seeds.npy}',
    'derivatives:',
    ...schemes.flatMap(({ parameter, nodes, fiducialNode }) => [
      `  ${parameter}:`,
      '    seeds: derivative_seeds.npy',
      '    nodes:',
      ...(fiducialNode ? [`      - {at: ${String(fiducial[parameter])}, values: fiducial}`] : []),
      ...nodes.map(({ at, file }) => `      - {at: ${String(at)}, values: ${file}.npy}`),
    ]),
    '',
  ].join('\n');
}

function blockLines({ probe, block, coordinate, unit, label, values }: Block): readonly string[] {
  return [
    `  - probe: ${probe}`,
    `    block: ${block}`,
    `    coordinate: ${coordinate}`,
    ...(unit === null ? [] : [`    unit: ${unit}`]),
    `    label: "${label.replaceAll('\\', '\\\\')}"`,
    `    values: [${values.join(', ')}]`,
  ];
}
