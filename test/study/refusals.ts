import { loadStudy } from '../../src/study/load.js';
import { formatProblem } from '../../src/study/message.js';
import { InputError } from '../../src/study/problems.js';
import type { StudyFiles } from '../fixtures/study-folder.js';
import { writeStudy } from '../fixtures/study-folder.js';

/** The whole text that a user sees when a study is refused. */
export async function refusals(files: StudyFiles): Promise<string> {
  return refusalsIn(writeStudy(files));
}

export async function refusalsIn(folder: string): Promise<string> {
  try {
    await loadStudy(folder);
  } catch (error) {
    if (error instanceof InputError) return error.problems.map(formatProblem).join('\n');
    throw error;
  }
  throw new Error('nothing was refused');
}
