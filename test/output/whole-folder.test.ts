import { chmodSync, existsSync, lstatSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import { writeWhole } from '../../src/output/whole-folder.js';
import { formatProblem } from '../../src/study/message.js';
import { InputError } from '../../src/study/problems.js';

const base = mkdtempSync(path.join(tmpdir(), 'sigmafolio-output-'));
afterAll(() => {
  rmSync(base, { recursive: true, force: true });
});

/** The user without rights, by number: the same on every Unix that CI runs on. */
const nobody = 65_534;

let home = '';
let out = '';
beforeEach(() => {
  home = mkdtempSync(path.join(base, 'test-'));
  out = path.join(home, 'report');
});

type Files = Record<string, string | Uint8Array>;
const write = (files: Files, sources?: Parameters<typeof writeWhole>[2], directory = out) => {
  writeWhole(directory, new Map(Object.entries(files)), sources);
};

/** Everything below a folder, with its content. */
function tree(folder: string): Record<string, string> {
  const entries = readdirSync(folder, { withFileTypes: true, recursive: true }).filter((entry) => !entry.isDirectory());
  return Object.fromEntries(entries.map((entry) => [path.relative(folder, path.join(entry.parentPath, entry.name)), readFileSync(path.join(entry.parentPath, entry.name), 'utf8')]));
}

function refusal(action: () => void): string {
  try {
    action();
  } catch (error) {
    if (error instanceof InputError) return error.problems.map(formatProblem).join('\n').replaceAll(home, 'HOME');
    throw error;
  }
  throw new Error('nothing was refused');
}

const whole: Files = { 'report.html': '<p>', 'report.md': '#', 'results.json': '{}', 'figures/a.svg': '<svg/>', 'tables/b.csv': Uint8Array.of(0x62) };

describe('writing a folder', () => {
  it('makes it, and the folders on the way, with nothing else', () => {
    write(whole, undefined, path.join(home, 'a/b/report'));
    expect(tree(home)).toEqual({ 'a/b/report/report.html': '<p>', 'a/b/report/report.md': '#', 'a/b/report/results.json': '{}', 'a/b/report/figures/a.svg': '<svg/>', 'a/b/report/tables/b.csv': 'b' });
  });

  it('replaces an older build, with the parts that are not asked for this time', () => {
    write(whole);
    write({ 'results.json': '{"new": true}' });
    expect(tree(home)).toEqual({ 'report/results.json': '{"new": true}' });
    expect(readdirSync(home)).toEqual(['report']);
  });

  it('fills a folder that is empty, and one that a link leads to', () => {
    mkdirSync(path.join(home, 'real'));
    symlinkSync('real', out);
    write({ 'report.md': 'new' });
    expect(lstatSync(out).isSymbolicLink()).toBe(true);
    expect(tree(path.join(home, 'real'))).toEqual({ 'report.md': 'new' });
    expect(readdirSync(home).sort()).toEqual(['real', 'report']);
  });

  it('leaves the old build and nothing else where writing fails', () => {
    write(whole);
    const before = tree(home);
    // The last name is too long for any file system: it fails after the first was written.
    const broken = { 'report.md': 'new', [`figures/${'x'.repeat(300)}.svg`]: 'x' };
    expect(refusal(() => { write(broken); })).toMatchInlineSnapshot(`
      "error: the output cannot be written
        where     HOME/report
        found     a name that is too long
        expected  a place where this program may make and rename folders
        do        choose another folder with --out, or mend this; what was there before is unchanged"
    `);
    expect(tree(home)).toEqual(before);
    expect(readdirSync(home)).toEqual(['report']);
  });

  it('takes back the folders on the way where writing fails', () => {
    expect(() => { write({ [`figures/${'x'.repeat(300)}.svg`]: '' }, undefined, path.join(home, 'a/b/report')); }).toThrow(InputError);
    expect(readdirSync(home)).toEqual([]);
  });

  it('says when a file is on the way', () => {
    writeFileSync(path.join(home, 'file'), 'x');
    expect(refusal(() => { write(whole, undefined, path.join(home, 'file/report')); })).toMatchInlineSnapshot(`
      "error: the output cannot be written
        where     HOME/file/report
        found     a part of the path is a file, not a folder
        expected  a place where this program may make and rename folders
        do        choose another folder with --out, or mend this; what was there before is unchanged"
    `);
  });

  it('says when the place may not be written to', () => {
    // Nothing is forbidden to the superuser: this test lays the rights down for as long as it writes.
    const superuser = process.getuid?.() === 0;
    chmodSync(base, 0o755);
    chmodSync(home, 0o555);
    if (superuser) process.seteuid?.(nobody);
    const text = refusal(() => { write(whole); });
    if (superuser) process.seteuid?.(0);
    chmodSync(home, 0o700);
    expect(text).toBe(`error: the output cannot be written
  where     HOME/report
  found     permission denied
  expected  a place where this program may make and rename folders
  do        choose another folder with --out, or mend this; what was there before is unchanged`);
  });
});

describe('a folder that no build wrote', () => {
  const kept = (files: Files): string => {
    for (const [name, content] of Object.entries(files)) {
      mkdirSync(path.dirname(path.join(out, name)), { recursive: true });
      writeFileSync(path.join(out, name), content);
    }
    const before = tree(home);
    const text = refusal(() => { write(whole); });
    expect(tree(home)).toEqual(before);
    return text;
  };

  it('is refused for one file too many', () => {
    expect(kept({ 'report.html': 'x', 'thesis.tex': 'x' })).toMatchInlineSnapshot(`
      "error: a folder holds things that no build wrote
        where     HOME/report
        found     thesis.tex
        expected  an empty folder, or one that an earlier build wrote and nobody added to
        do        choose another folder with --out, or move these away: the whole folder is replaced"
    `);
  });

  it('is refused for files in figures/ and tables/ that are no figures or tables', () => {
    expect(kept({ 'figures/a.svg': 'x', 'figures/photo.png': 'x', 'tables/more/b.csv': 'x' })).toMatchInlineSnapshot(`
      "error: a folder holds things that no build wrote
        where     HOME/report
        found     figures/photo.png, tables/more
        expected  an empty folder, or one that an earlier build wrote and nobody added to
        do        choose another folder with --out, or move these away: the whole folder is replaced"
    `);
  });

  it('is refused with a few names where there are many', () => {
    expect(kept(Object.fromEntries(Array.from({ length: 9 }, (_, i) => [`${String(i)}.dat`, 'x'])))).toMatchInlineSnapshot(`
      "error: a folder holds things that no build wrote
        where     HOME/report
        found     0.dat, 1.dat, 2.dat, 3.dat, 4.dat, and 4 more
        expected  an empty folder, or one that an earlier build wrote and nobody added to
        do        choose another folder with --out, or move these away: the whole folder is replaced"
    `);
  });

  it('is refused where a folder has the name of a file, or a link that of a part', () => {
    mkdirSync(path.join(out, 'report.html'), { recursive: true });
    symlinkSync('elsewhere', path.join(out, 'figures'));
    expect(refusal(() => { write(whole); })).toMatchInlineSnapshot(`
      "error: a folder holds things that no build wrote
        where     HOME/report
        found     figures, report.html
        expected  an empty folder, or one that an earlier build wrote and nobody added to
        do        choose another folder with --out, or move these away: the whole folder is replaced"
    `);
  });

  it('is refused where it is a file', () => {
    writeFileSync(out, 'x');
    expect(refusal(() => { write(whole); })).toMatchInlineSnapshot(`
      "error: a folder holds things that no build wrote
        where     HOME/report
        found     a file, or a link that leads nowhere
        expected  an empty folder, or one that an earlier build wrote and nobody added to
        do        choose another folder with --out, or move these away: the whole folder is replaced"
    `);
    expect(readFileSync(out, 'utf8')).toBe('x');
  });
});

describe('a study that stands in the way', () => {
  const study = (): string => {
    const folder = path.join(home, 'study');
    mkdirSync(path.join(folder, 'runs/power'), { recursive: true });
    writeFileSync(path.join(folder, 'study.yaml'), 'x');
    return folder;
  };
  const attempt = (directory: (folder: string) => string, inputs: readonly string[] = ['study.yaml']): string => {
    const folder = study();
    return refusal(() => { write(whole, { study: folder, inputs }, directory(folder)); });
  };

  it('is not replaced', () => {
    expect(attempt((folder) => folder)).toMatchInlineSnapshot(`
      "error: the output would replace the input
        where     HOME/study
        found     the study folder itself, or a folder around it
        expected  a folder of its own
        do        choose another folder with --out"
    `);
    expect(existsSync(path.join(home, 'study/study.yaml'))).toBe(true);
  });

  it('is not replaced from above', () => {
    expect(attempt((folder) => path.dirname(folder))).toMatchInlineSnapshot(`
      "error: the output would replace the input
        where     HOME
        found     the study folder itself, or a folder around it
        expected  a folder of its own
        do        choose another folder with --out"
    `);
  });

  it('is not replaced through a link', () => {
    expect(attempt((folder) => {
      symlinkSync(folder, path.join(home, 'link'));
      return path.join(home, 'link');
    })).toMatchInlineSnapshot(`
      "error: the output would replace the input
        where     HOME/link
        found     the study folder itself, or a folder around it
        expected  a folder of its own
        do        choose another folder with --out"
    `);
  });

  it('keeps its inputs, even where they look like a build', () => {
    expect(attempt((folder) => {
      mkdirSync(path.join(folder, 'words'));
      writeFileSync(path.join(folder, 'words/report.md'), 'x');
      return path.join(folder, 'words');
    }, ['study.yaml', 'words/report.md'])).toMatchInlineSnapshot(`
      "error: the output would replace the input
        where     HOME/study/words
        found     words/report.md inside it
        expected  a folder of its own
        do        choose another folder with --out"
    `);
  });

  it('has no build among its runs', () => {
    expect(attempt((folder) => path.join(folder, 'runs/report'))).toMatchInlineSnapshot(`
      "error: the output would replace the input
        where     HOME/study/runs/report
        found     a folder among the runs of the study
        expected  a folder of its own
        do        choose another folder with --out"
    `);
  });

  it('may hold the build elsewhere', () => {
    const folder = study();
    write(whole, { study: folder, inputs: ['study.yaml'] }, path.join(folder, 'report'));
    expect(readdirSync(folder).sort()).toEqual(['report', 'runs', 'study.yaml']);
  });
});

describe('files that could not be replaced later', () => {
  it.each(['notes.txt', 'figures/a.png', 'figures/a/b.svg', '../report.md', '/report.md', 'figures', 'figures/.svg', ''])('%s is a bug of the caller', (name) => {
    expect(() => { write({ [name]: 'x' }); }).toThrow(`${name} is no file of a build: it could never be replaced`);
    expect(readdirSync(home)).toEqual([]);
  });
});
