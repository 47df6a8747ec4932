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
    if (isInside(root, real)) return { kind: 'inside', file: { path, real } };
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

function isInside(root: string, real: string): boolean {
  return real === root || real.startsWith(root.endsWith(sep) ? root : root + sep);
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
  const own = posix.basename(path);
  const names = neighbours(root, posix.dirname(path));
  const start = { what: 'a file cannot be found', where, expected: 'a file inside the study folder' };
  if (names.includes(own)) {
    return { ...start, found: `${path}: a link that leads nowhere, or a file that may not be read`, remedy: 'replace a link by a copy of what it should lead to' };
  }
  const nearest = nearestName(own, names);
  return { ...start, found: `${path}: ${systemReason(error)}`, remedy: where.path === undefined ? fixedName(path, nearest) : named(name, nearest) };
}

/** What to do about a file whose name the format gives. */
function fixedName(path: string, nearest: string | null): string {
  return nearest === null ? `make ${path}` : `rename ${nearest} to ${posix.basename(path)}`;
}

/** What to do about a file that a key names. */
function named(name: string, nearest: string | null): string {
  return nearest === null ? `put the file there, or correct the name ${name}` : `write ${posix.join(posix.dirname(name), nearest)}, if that is what was meant`;
}

/** Names beside the missing file; none where its folder is missing too, or lies outside. */
function neighbours(root: string, folder: string): readonly string[] {
  try {
    const real = realpathSync(join(root, folder));
    return isInside(root, real) ? readdirSync(real).sort() : [];
  } catch {
    return [];
  }
}
