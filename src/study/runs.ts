import { readEnsemble } from './ensemble.js';
import { readMoments } from './moments.js';
import type { Reading } from './reading.js';
import { readText } from './reading.js';
import { readColumns } from './run-vector.js';
import { runFolders } from './run-folders.js';
import type { Parsed } from './schema-problems.js';
import { parseWith } from './schema-problems.js';
import type { RunFile } from './schema.js';
import { ensembleSchema, kindSchema, momentsSchema } from './schema.js';
import type { Column, Parameter, Run } from './study.js';
import { parseYaml } from './yaml-positions.js';
import type { YamlFile } from './yaml-positions.js';

/** A run.yaml that keeps to the schema; its arrays, apart from the coordinates, are not read yet. */
export interface OpenRun {
  readonly name: string;
  readonly folder: string;
  readonly file: RunFile;
  readonly yaml: YamlFile;
  readonly columns: readonly Column[];
  readonly volume: number | null;
  readonly volumeUnit: string;
}

/** Every run.yaml. `complete` is false where one was left out, so that nobody misses the probes it would have held. */
export function openRuns(reading: Reading): { readonly runs: readonly OpenRun[]; readonly complete: boolean } {
  const names = runFolders(reading.root, reading.report);
  const runs = names.map((name) => openRun(name, reading));
  return { runs: runs.filter((run) => run !== null), complete: names.length > 0 && !runs.includes(null) };
}

function openRun(name: string, reading: Reading): OpenRun | null {
  const path = `runs/${name}/run.yaml`;
  const text = readText(reading, '', path, { file: path });
  if (text === null) return null;
  const yaml = parseYaml(text, path);
  yaml.problems.forEach(reading.report);
  if (yaml.value === undefined) return null;
  const { value, problems } = parseRun(yaml);
  problems.forEach(reading.report);
  if (value === null) return null;
  const folder = `runs/${name}`;
  const columns = readColumns(value, folder, yaml, reading);
  return columns === null ? null : { name, folder, file: value, yaml, columns, volume: value.volume ?? null, volumeUnit: value.volume_unit ?? '' };
}

/** By the kind, so that a message speaks of the keys of that kind only. */
function parseRun(yaml: YamlFile): Parsed<RunFile> {
  const given = yaml.value as { readonly kind?: unknown; readonly shards?: unknown } | null;
  if (typeof given !== 'object' || given === null || Array.isArray(given)) return parseWith(ensembleSchema, yaml);
  if (given.kind === 'fisher') return { value: null, problems: [notRead('kind', 'kind: fisher', 'ensemble or moments', yaml)] };
  if (given.kind === 'ensemble') return parseWith(ensembleSchema, yaml);
  if (given.kind === 'moments' && Object.hasOwn(given, 'shards')) {
    return { value: null, problems: [notRead('shards', 'shards:', 'covariance: and derivatives:', yaml)] };
  }
  if (given.kind === 'moments') return parseWith(momentsSchema, yaml);
  return { value: null, problems: parseWith(kindSchema, { ...yaml, value: { kind: given.kind } }).problems };
}

function notRead(key: string, found: string, expected: string, yaml: YamlFile) {
  return {
    what: 'a part of the format is not read by this version',
    where: yaml.place([key]),
    found,
    expected,
    remedy: 'leave it out for now: a later version will read it',
  };
}

/** The arrays of a run; null where something cannot be used. */
export function readRun(open: OpenRun, suite: string, parameters: readonly Parameter[], reading: Reading): Run | null {
  const { name, file, yaml, columns, folder, volume, volumeUnit } = open;
  const context = { reading, folder, place: yaml.place, columns, parameters };
  const data = file.kind === 'ensemble' ? readEnsemble(file, context) : readMoments(file, context);
  if (data === null) return null;
  return { name, suite, volume, volumeUnit, provenance: Object.entries(file.provenance ?? {}), columns, data, place: yaml.place };
}
