import { asGiven, count } from '../../results/rounding.js';
import type { Said } from '../markdown/nodes.js';
import { say } from '../markdown/nodes.js';
import { unitAfter } from '../words/labels.js';
import type { TableMaker } from './table.js';
import { numbers, words } from './table.js';

/** Every file that a number came from. */
export const inputs: TableMaker = (results) => ({
  id: 'inputs',
  caption: say`Input files, relative to the study.`,
  columns: [words('File'), numbers('Bytes'), words('SHA-256')],
  rows: results.inputs.map(({ path, bytes, sha256 }): Said[] => [
    { type: 'inlineCode', value: path },
    count(bytes),
    { type: 'inlineCode', value: sha256 },
  ]),
});

/** What the runs say of themselves. */
export const runs: TableMaker = (results) => ({
  id: 'runs',
  caption: say`Runs. Runs of one suite share realisations.`,
  columns: [words('Run'), words('Suite'), words('Kind'), numbers('Entries'), numbers('Fiducial realisations'), words('Volume'), words('Provenance')],
  rows: Object.entries(results.runs).map(([name, run]): Said[] => [
    { type: 'inlineCode', value: name },
    { type: 'inlineCode', value: run.suite },
    run.kind,
    count(run.entries),
    run.fiducialRealisations === null ? 'not known' : count(run.fiducialRealisations),
    run.volume === null ? 'not given' : say`${asGiven(run.volume)}${unitAfter(run.volumeUnit)}`,
    run.provenance.length === 0 ? 'not given' : run.provenance.map(([key, value]) => `${key}: ${value}`).join('; '),
  ]),
});
