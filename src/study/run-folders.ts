import { readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { systemReason } from '../arrays/regular-file.js';
import type { Problem } from './problems.js';

/**
 * The names of the folders under runs/, sorted by code unit. Plain files beside them, and names that start with a dot (which
 * file managers and editors leave), are no runs.
 */
export function runFolders(root: string, report: (problem: Problem) => void): readonly string[] {
  const folder = join(root, 'runs');
  let names: readonly string[];
  try {
    names = readdirSync(folder).filter((name) => !name.startsWith('.') && isFolder(join(folder, name))).sort();
  } catch (error) {
    report({ ...noRuns, found: `runs/: ${systemReason(error)}` });
    return [];
  }
  if (names.length === 0) report({ ...noRuns, found: 'no folder in runs/' });
  for (const name of names.filter((candidate) => !/^[A-Za-z][A-Za-z0-9_-]*$/.test(candidate))) {
    report({
      what: 'the name of a run is not a name',
      where: { file: `runs/${name}` },
      found: name,
      expected: 'a letter, then letters, digits, _ or -',
      remedy: 'rename the folder, or move it out of runs/',
    });
  }
  return names;
}

const noRuns = {
  what: 'a study has no runs',
  where: { file: 'runs' },
  expected: 'a folder for each run, such as runs/power/, with its run.yaml',
  remedy: 'make runs/NAME/run.yaml and put the arrays beside it',
};

function isFolder(path: string): boolean {
  return statSync(path, { throwIfNoEntry: false })?.isDirectory() ?? false;
}
