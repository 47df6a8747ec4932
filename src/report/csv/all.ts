import type { Results } from '../../results/schema.js';
import type { CsvTable } from './csv.js';
import { writeCsv } from './csv.js';
import { claimsCsv, errorsCsv, improvementsCsv } from './estimates.js';
import { fisherCsv } from './matrices.js';
import { convergenceCsv, responsesCsv, scanCsv } from './scans.js';

const makers: Readonly<Record<string, (results: Results) => CsvTable>> = {
  checks: ({ checks }) => ({ header: ['id', 'level', 'message', 'where'], rows: checks.map(({ id, level, message, where }) => [id, level, message, where]) }),
  claims: claimsCsv,
  convergence: convergenceCsv,
  errors: errorsCsv,
  fisher: fisherCsv,
  improvements: improvementsCsv,
  inputs: ({ inputs }) => ({ header: ['path', 'bytes', 'sha256'], rows: inputs.map(({ path, bytes, sha256 }) => [path, bytes, sha256]) }),
  parameters: ({ parameters }) => ({
    header: ['parameter', 'unit', 'fiducial', 'role', 'prior', 'reference', 'reference_error'],
    rows: parameters.map(({ name, unit, fiducial, role, prior, reference }) => [name, unit, fiducial, role, prior, reference?.label ?? null, reference?.error ?? null]),
  }),
  responses: responsesCsv,
  scan: scanCsv,
};

/** The tables in full, by name. */
export function csvFiles(results: Results): ReadonlyMap<string, string> {
  return new Map(Object.entries(makers).map(([name, make]) => [name, writeCsv(make(results))]));
}
