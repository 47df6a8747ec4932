import { randomBytes } from 'node:crypto';
import { existsSync, lstatSync, mkdirSync, readdirSync, realpathSync, renameSync, rmdirSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { Problem } from '../study/problems.js';
import { InputError } from '../study/problems.js';
import type { Sources } from './replaceable.js';
import { refusal } from './replaceable.js';

/**
 * Writes a build's folder, whole or not at all. Everything is written into a new folder beside the old one, which then takes its
 * place by renaming; whatever fails before that leaves the old build as it was, and nothing else behind.
 *
 * Only an empty folder or one that a build wrote is replaced (see `refusal`). The new folder holds exactly `files`: a part of
 * an older build that was not asked for this time goes, because it would show other numbers than the parts beside it.
 *
 * Throws an `InputError` where the folder cannot be used or written. Two renames are needed where an old build exists, since no
 * system call that Node offers exchanges two folders: a machine that stops between them leaves the old build beside its place, in a
 * hidden folder that ends in `-old`.
 * @param files content by relative path, with forward slashes
 */
export function writeWhole(directory: string, files: ReadonlyMap<string, string | Uint8Array>, sources?: Sources): void {
  attempt(directory, () => {
    const problem = refusal(directory, files, sources);
    if (problem !== null) throw new InputError([problem]);
    const parent = path.dirname(path.resolve(directory));
    const made = mkdirSync(parent, { recursive: true });
    try {
      replace(existsSync(directory) ? realpathSync(directory) : path.resolve(directory), files);
    } catch (error) {
      if (made !== undefined) removeEmpty(parent, made);
      throw error;
    }
  });
}

/** Takes back folders that were made on the way to the output. One that is not empty any more stays, with those around it. */
function removeEmpty(innermost: string, outermost: string): void {
  for (let folder = innermost; readdirSync(folder).length === 0; folder = path.dirname(folder)) {
    rmdirSync(folder);
    if (folder === outermost) return;
  }
}

function replace(target: string, files: ReadonlyMap<string, string | Uint8Array>): void {
  const stem = path.join(path.dirname(target), `.${path.basename(target)}-${randomBytes(6).toString('hex')}`);
  const [fresh, old] = [`${stem}-new`, `${stem}-old`];
  try {
    mkdirSync(fresh);
    for (const [name, content] of files) {
      const file = path.join(fresh, ...name.split('/'));
      mkdirSync(path.dirname(file), { recursive: true });
      writeFileSync(file, content, { flag: 'wx' });
    }
    swap(target, fresh, old);
  } catch (error) {
    rmSync(fresh, { recursive: true, force: true });
    throw error;
  }
  removeOld(target, old);
}

/** The new build is in place by now; an old one that cannot be removed must not look as if nothing had been written. */
function removeOld(target: string, old: string): void {
  try {
    rmSync(old, { recursive: true, force: true });
  } catch {
    const problem: Problem = {
      what: 'the older build could not be removed',
      where: { file: path.basename(target) },
      found: `${path.basename(old)}, which stays beside the new build`,
      expected: 'a folder that this program may remove',
      remedy: 'remove it by hand: the new build is whole',
    };
    throw new InputError([problem]);
  }
}

function swap(target: string, fresh: string, old: string): void {
  if (lstatSync(target, { throwIfNoEntry: false }) === undefined) {
    renameSync(fresh, target);
    return;
  }
  renameSync(target, old);
  try {
    renameSync(fresh, target);
  } catch (error) {
    renameSync(old, target);
    throw error;
  }
}

/** Failures of the file system are the user's to mend: a full disk, a folder without permission. */
function attempt(directory: string, action: () => void): void {
  try {
    action();
  } catch (error) {
    if (!(error instanceof Error) || !('code' in error) || typeof error.code !== 'string') throw error;
    const problem: Problem = {
      what: 'the output cannot be written',
      where: { file: directory },
      found: reasons[error.code] ?? error.code,
      expected: 'a place where this program may make and rename folders',
      remedy: 'choose another folder with --out, or mend this; what was there before is unchanged',
    };
    throw new InputError([problem]);
  }
}

const reasons: Readonly<Record<string, string>> = {
  EACCES: 'permission denied',
  EPERM: 'permission denied',
  EROFS: 'a read-only file system',
  ENOSPC: 'no space left',
  EDQUOT: 'no quota left',
  EBUSY: 'the folder is in use, or another disk is mounted there',
  EXDEV: 'another disk is mounted there',
  ENOTDIR: 'a part of the path is a file, not a folder',
  ENAMETOOLONG: 'a name that is too long',
  EEXIST: 'a file is in the way',
};
