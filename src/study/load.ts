import { createHash } from 'node:crypto';
import { realpathSync, statSync } from 'node:fs';
import { systemReason } from '../arrays/regular-file.js';
import { readClaims } from './claims.js';
import { probesOf, readCombinations, readScan } from './combinations.js';
import { orderParameters, readPrior } from './parameters.js';
import type { Problem } from './problems.js';
import { InputError } from './problems.js';
import type { Reading } from './reading.js';
import { readText } from './reading.js';
import type { OpenRun } from './runs.js';
import { openRuns, readRun } from './runs.js';
import { parseWith } from './schema-problems.js';
import type { StudyFile } from './schema.js';
import { studySchema } from './schema.js';
import type { Input, Probe, Study } from './study.js';
import { checkProbes, checkSuites, suiteOf } from './suites.js';
import type { YamlFile } from './yaml-positions.js';
import { parseYaml } from './yaml-positions.js';

const defaultTolerance = 0.1;

/**
 * Reads a study from its folder: both kinds of YAML file, the arrays they name, and every rule that joins them.
 * Throws an `InputError` with all problems that were found. Rows of realisations stay in their files until they are asked for.
 */
export async function loadStudy(folder: string): Promise<Study> {
  const problems: Problem[] = [];
  const root = studyRoot(folder);
  const reading: Reading = { root, inputs: new Map(), arrays: new Map(), report: (problem) => problems.push(problem) };
  const opened = openStudyFile(reading);
  const { runs, complete } = openRuns(reading);
  const study = opened === null ? null : assemble(opened.file, opened.yaml, runs, complete, reading);
  if (problems.length > 0 || study === null) throw new InputError(problems);
  // Nothing waits yet; readers that must load a library first will.
  return await Promise.resolve(study);
}

function studyRoot(folder: string): string {
  const fault = (found: string): InputError =>
    new InputError([
      {
        what: 'there is no study folder',
        where: { file: folder },
        found,
        expected: 'a folder with study.yaml and runs/',
        remedy: 'check the path',
      },
    ]);
  let root: string;
  try {
    root = realpathSync(folder);
  } catch (error) {
    throw fault(systemReason(error));
  }
  if (!statSync(root).isDirectory()) throw fault('a file');
  return root;
}

function openStudyFile(reading: Reading): { readonly file: StudyFile; readonly yaml: YamlFile } | null {
  const text = readText(reading, '', 'study.yaml', { file: 'study.yaml' });
  if (text === null) return null;
  const yaml = parseYaml(text, 'study.yaml');
  yaml.problems.forEach(reading.report);
  if (yaml.value === undefined) return null;
  const { value, problems } = parseWith(studySchema, yaml);
  problems.forEach(reading.report);
  return value === null ? null : { file: value, yaml };
}

function assemble(file: StudyFile, yaml: YamlFile, open: readonly OpenRun[], complete: boolean, reading: Reading): Study {
  if (file.derived !== undefined) {
    reading.report({
      what: 'a part of the format is not read by this version',
      where: yaml.place(['derived']),
      found: 'derived:',
      expected: 'parameters only',
      remedy: 'leave it out for now: a later version will read it',
    });
  }
  const { parameters, positions } = orderParameters(file, yaml, reading);
  const prior = readPrior(file, yaml, positions, reading);
  const described = Object.keys(file.probes ?? {});
  // A run that could not be read may hold the very probe that a combination names.
  if (complete) checkProbes(open, described, (probe) => yaml.place(['probes', probe]), reading);
  const combinations = complete ? readCombinations(file, open, yaml, reading) : [];
  const scan = complete ? readScan(file, open, yaml, reading) : null;
  const claims = readClaims(file, yaml, reading);
  const runs = open.flatMap((run) => {
    const suite = suiteOf(run, open.length, reading);
    return readRun(run, suite ?? run.name, parameters, reading) ?? [];
  });
  checkSuites(runs, reading);
  const summary = file.summary === undefined ? null : readText(reading, '', file.summary, yaml.place(['summary']));
  const probes = readProbes(file, [...described, ...probesOf(open).filter((probe) => !described.includes(probe))], yaml, reading);
  const inputs = [...reading.inputs.values()].sort((a, b) => (a.path < b.path ? -1 : 1));
  return {
    title: file.title,
    summary,
    authors: (file.authors ?? []).map(({ name, orcid, affiliation }) => ({ name, orcid: orcid ?? null, affiliation: affiliation ?? null })),
    licence: file.licence ?? null,
    date: file.date ?? null,
    parameters,
    prior,
    probes,
    combinations,
    baseline: file.baseline,
    scan,
    tolerance: file.tolerance ?? defaultTolerance,
    claims,
    runs,
    inputs,
    digest: digestOf(inputs),
    place: yaml.place,
  };
}

/** Probes in the order of study.yaml, then those that it does not describe, in the order of the runs. */
function readProbes(file: StudyFile, names: readonly string[], yaml: YamlFile, reading: Reading): readonly Probe[] {
  return names.map((name) => {
    const words = file.probes?.[name];
    const notes = words?.notes === undefined ? null : readText(reading, '', words.notes, yaml.place(['probes', name, 'notes']));
    return { name, label: words?.label ?? name, notes };
  });
}

function digestOf(inputs: readonly Input[]): string {
  return createHash('sha256').update(inputs.map(({ sha256, path }) => `${sha256}  ${path}\n`).join('')).digest('hex');
}
