import { lstatSync, readdirSync, realpathSync } from 'node:fs';
import path from 'node:path';
import type { Problem } from '../study/problems.js';

/** What must survive a build: the study and the files that it was read from. */
export interface Sources {
  readonly study: string;
  /** Relative to `study`. */
  readonly inputs: readonly string[];
}

/** Everything that a build writes: files by name, folders by the ending of what is in them. */
const knownFiles = new Set(['report.html', 'report.md', 'results.json']);
const knownFolders: Readonly<Record<string, string>> = { figures: '.svg', tables: '.csv' };

/**
 * Why a folder must not be written to, or null. It may be replaced when it does not exist, is empty, or holds nothing but what a build
 * writes: report.html, report.md, results.json, figures/*.svg, tables/*.csv, as ordinary files. It must not hold the study or any of its inputs,
 * nor lie among the runs, where it would be taken for one.
 */
export function refusal(directory: string, files: ReadonlyMap<string, unknown>, sources: Sources | undefined): Problem | null {
  const foreign = [...files.keys()].find((name) => !isKnown(name));
  if (foreign !== undefined) throw new Error(`${foreign} is no file of a build: it could never be replaced`);
  const where = { file: directory };
  const stats = lstatSync(directory, { throwIfNoEntry: false });
  const inputs = sources === undefined ? null : inTheWay(directory, sources);
  if (inputs !== null) {
    return { what: 'the output would replace the input', where, found: inputs, expected: 'a folder of its own', remedy: 'choose another folder with --out' };
  }
  if (stats === undefined) return null;
  const found = strangers(directory);
  if (found.length === 0) return null;
  return {
    what: 'a folder holds things that no build wrote',
    where,
    found: `${found.slice(0, 5).join(', ')}${found.length > 5 ? `, and ${String(found.length - 5)} more` : ''}`,
    expected: 'an empty folder, or one that an earlier build wrote and nobody added to',
    remedy: 'choose another folder with --out, or move these away: the whole folder is replaced',
  };
}

function isKnown(name: string): boolean {
  const [first = '', second, ...rest] = name.split('/');
  if (second === undefined) return knownFiles.has(first);
  const ending = knownFolders[first];
  return rest.length === 0 && ending !== undefined && second.endsWith(ending) && second !== ending;
}

function strangers(directory: string): readonly string[] {
  if (!isFolder(realpathOrNull(directory))) return ['a file, or a link that leads nowhere'];
  return readdirSync(directory, { withFileTypes: true })
    .flatMap((entry) => {
      if (!entry.isDirectory() || knownFolders[entry.name] === undefined) return entry.isFile() && isKnown(entry.name) ? [] : [entry.name];
      return readdirSync(path.join(directory, entry.name), { withFileTypes: true })
        .filter((inner) => !inner.isFile() || !isKnown(`${entry.name}/${inner.name}`))
        .map((inner) => `${entry.name}/${inner.name}`);
    })
    .sort();
}

function inTheWay(directory: string, { study, inputs }: Sources): string | null {
  const root = realpathSync(study);
  const target = realTarget(path.resolve(directory));
  if (isInside(root, target)) return 'the study folder itself, or a folder around it';
  const input = inputs.find((name) => isInside(path.join(root, name), target) || isInside(realpathOrNull(path.join(root, name)) ?? root, target));
  if (input !== undefined) return `${input} inside it`;
  return isInside(target, path.join(root, 'runs')) ? 'a folder among the runs of the study' : null;
}

/** Whether a path is another one or lies below it. */
function isInside(inner: string, outer: string): boolean {
  const steps = path.relative(outer, inner);
  return steps === '' || (steps !== '..' && !steps.startsWith(`..${path.sep}`) && !path.isAbsolute(steps));
}

/** Links followed as far as the path exists. */
function realTarget(target: string): string {
  const real = realpathOrNull(target);
  if (real !== null) return real;
  const parent = path.dirname(target);
  return parent === target ? target : path.join(realTarget(parent), path.basename(target));
}

function realpathOrNull(target: string): string | null {
  try {
    return realpathSync(target);
  } catch {
    return null;
  }
}

function isFolder(target: string | null): boolean {
  return target !== null && lstatSync(target).isDirectory();
}
