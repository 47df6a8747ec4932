import { readdirSync, realpathSync } from 'node:fs';
import { join, posix, sep } from 'node:path';
import { systemReason } from '../arrays/regular-file.js';
import { nearestName } from './nearest-name.js';
import type { Place, Problem } from './problems.js';

/** A file inside the study folder. */
export interface InsideFile {
  /** Relative to the study folder, with forward slashes. */
  readonly path: string;
  /** Where it really is on this machine, links followed. */
  readonly real: string;
}

export type Found = { readonly kind: 'inside'; readonly file: InsideFile } | { readonly kind: 'refused'; readonly problem: Problem };

/**
 * Finds a file that a study names. Nothing outside the study folder is ever reached: not by `..`, not by an absolute
 * path, not by a link.
 * @param root the study folder, links followed
 * @param folder what `name` is relative to: a folder inside the study, or '' for the study itself
 */
export function findInside(root: string, folder: string, name: string, where: Place): Found {
  const fault = faultOf(name);
  if (fault !== null) {
    return refused({
      what: 'a path leads out of the study folder',
      where,
      found: `${name} (${fault})`,
      expected: `a path relative to ${folder === '' ? 'the study folder' : folder}, with forward slashes and without ..`,
      remedy: 'copy the file into the study folder and name it from there',
    });
  }
  const path = posix.join(folder, name);
  try {
    const real = realpathSync(join(root, path));
    if (real.startsWith(root.endsWith(sep) ? root : root + sep)) return { kind: 'inside', file: { path, real } };
  } catch (error) {
    return refused(missing(root, path, name, error, where));
  }
  return refused({
    what: 'a link leads out of the study folder',
    where,
    found: `${name}, or a folder on the way to it, is a link to a place outside`,
    expected: 'files inside the study folder',
    remedy: 'replace the link by a copy of what it leads to',
  });
}

function refused(problem: Problem): Found {
  return { kind: 'refused', problem };
}

function faultOf(name: string): string | null {
  if (name === '') return 'an empty name';
  if (name.includes('\0')) return 'a zero character';
  if (name.includes('\\')) return 'a backslash';
  if (name.startsWith('/') || /^[A-Za-z]:/.test(name)) return 'an absolute path';
  if (name.split('/').includes('..')) return '..';
  return null;
}

function missing(root: string, path: string, name: string, error: unknown, where: Place): Problem {
  const reason = systemReason(error);
  const nearest = nearestName(posix.basename(path), neighbours(root, posix.dirname(path)));
  return {
    what: 'a file cannot be found',
    where,
    found: `${path}: ${reason}`,
    expected: 'a file inside the study folder',
    remedy: nearest === null ? `put the file there, or correct the name ${name}` : `write ${posix.join(posix.dirname(name), nearest)}, if that is what was meant`,
  };
}

/** Names beside the missing file; none where its folder is missing too, or lies outside. */
function neighbours(root: string, folder: string): readonly string[] {
  try {
    const real = realpathSync(join(root, folder));
    return real === root || real.startsWith(root + sep) ? readdirSync(real).sort() : [];
  } catch {
    return [];
  }
}
