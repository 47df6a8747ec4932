import { mkdirSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { loadStudy } from '../../src/study/load.js';
import { npyBytes } from '../fixtures/npy-writer.js';
import { makePipe } from '../fixtures/pipe.js';
import { changed, edited, minimalStudy, writeStudy } from '../fixtures/study-folder.js';
import { refusals, refusalsIn } from './refusals.js';

const named = (name: string) => edited(minimalStudy(), 'runs/power/run.yaml', 'values: fiducial.npy', `values: '${name}'`);
const summary = (name: string) => edited(minimalStudy(), 'study.yaml', 'baseline: power', `baseline: power\nsummary: ${name}`);

/** A study whose runs/power/fiducial.npy is made by `make`, given its path and one outside of the study that holds a good array. */
function withFiducial(make: (file: string, outside: string) => void): string {
  const folder = writeStudy(changed(minimalStudy(), { 'runs/power/fiducial.npy': null }));
  const outside = writeStudy(new Map([['array.npy', npyBytes({ shape: [60, 3], values: Array(180).fill(1) })]]));
  make(path.join(folder, 'runs/power/fiducial.npy'), path.join(outside, 'array.npy'));
  return folder;
}

describe('paths that lead out of the study', () => {
  it.each([
    ['../peaks/fiducial.npy', '..'],
    ['../../../etc/passwd.npy', '..'],
    ['data/../../x.npy', '..'],
    ['/etc/passwd.npy', 'an absolute path'],
    ['C:/x.npy', 'an absolute path'],
    ['c:x.npy', 'an absolute path'],
    ['..\\x.npy', 'a backslash'],
    ['\\\\host\\x.npy', 'a backslash'],
  ])('%s is refused', async (name, fault) => {
    expect(await refusals(named(name))).toBe(`error: a path leads out of the study folder
  where     runs/power/run.yaml:6:12  fiducial.values
  found     ${name} (${fault})
  expected  a path relative to runs/power, with forward slashes and without ..
  do        copy the file into the study folder and name it from there`);
  });

  it('of notes are refused too', async () => {
    expect(await refusals(summary('../summary.md'))).toMatchInlineSnapshot(`
      "error: a path leads out of the study folder
        where     study.yaml:11:1  summary
        found     ../summary.md (..)
        expected  a path relative to the study folder, with forward slashes and without ..
        do        copy the file into the study folder and name it from there"
    `);
  });

  it('a zero character is refused', async () => {
    expect(await refusals(edited(minimalStudy(), 'runs/power/run.yaml', 'values: fiducial.npy', 'values: "a\\0.npy"'))).toMatchInlineSnapshot(`
      "error: a path leads out of the study folder
        where     runs/power/run.yaml:6:12  fiducial.values
        found     a\\u{0}.npy (a zero character)
        expected  a path relative to runs/power, with forward slashes and without ..
        do        copy the file into the study folder and name it from there"
    `);
  });
});

describe('links', () => {
  const leadsOut = `error: a link leads out of the study folder
  where     runs/power/run.yaml:6:12  fiducial.values
  found     fiducial.npy, or a folder on the way to it, is a link to a place outside
  expected  files inside the study folder
  do        replace the link by a copy of what it leads to`;

  it('that lead out are refused', async () => {
    expect(await refusalsIn(withFiducial((file, outside) => { symlinkSync(outside, file); }))).toBe(leadsOut);
  });

  it('that lead out over another link are refused', async () => {
    expect(
      await refusalsIn(
        withFiducial((file, outside) => {
          symlinkSync(outside, `${file}.link`);
          symlinkSync('fiducial.npy.link', file);
        }),
      ),
    ).toBe(leadsOut);
  });

  it('of a whole run that lead out are refused', async () => {
    const folder = writeStudy(minimalStudy());
    const other = writeStudy(minimalStudy());
    rmSync(path.join(folder, 'runs/peaks'), { recursive: true });
    symlinkSync(path.join(other, 'runs/peaks'), path.join(folder, 'runs/peaks'));
    expect(await refusalsIn(folder)).toMatchInlineSnapshot(`
      "error: a link leads out of the study folder
        where     runs/peaks/run.yaml
        found     runs/peaks/run.yaml, or a folder on the way to it, is a link to a place outside
        expected  files inside the study folder
        do        replace the link by a copy of what it leads to"
    `);
  });

  it('to a folder whose name merely starts like the study are refused', async () => {
    const folder = withFiducial((file) => {
      const neighbour = `${path.dirname(path.dirname(path.dirname(file)))}-neighbour`;
      mkdirSync(neighbour);
      writeFileSync(path.join(neighbour, 'x.npy'), npyBytes({ shape: [60, 3], values: Array(180).fill(1) }));
      symlinkSync(path.join(neighbour, 'x.npy'), file);
    });
    expect(await refusalsIn(folder)).toBe(leadsOut);
    rmSync(`${folder}-neighbour`, { recursive: true });
  });

  it('that lead in a circle, or nowhere, are refused', async () => {
    expect(await refusalsIn(withFiducial((file) => { symlinkSync(file, file); }))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     runs/power/run.yaml:6:12  fiducial.values
        found     runs/power/fiducial.npy: a link that leads nowhere, or a file that may not be read
        expected  a file inside the study folder
        do        replace a link by a copy of what it should lead to"
    `);
    expect(await refusalsIn(withFiducial((file) => { symlinkSync('nothing.npy', file); }))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     runs/power/run.yaml:6:12  fiducial.values
        found     runs/power/fiducial.npy: a link that leads nowhere, or a file that may not be read
        expected  a file inside the study folder
        do        replace a link by a copy of what it should lead to"
    `);
  });

  it('inside the study are followed, and each name is an input', async () => {
    const folder = writeStudy(minimalStudy());
    const seeds = path.join(folder, 'runs/peaks/seeds.npy');
    rmSync(seeds);
    symlinkSync('../power/seeds.npy', seeds);
    const { inputs } = await loadStudy(folder);
    const [peaks, power] = inputs.filter((input) => input.path.endsWith('/seeds.npy'));
    expect(peaks).toEqual({ ...power, path: 'runs/peaks/seeds.npy' });
  });

  it('to the study folder itself are followed', async () => {
    const folder = writeStudy(minimalStudy());
    const holder = writeStudy(new Map());
    symlinkSync(folder, path.join(holder, 'link'));
    expect((await loadStudy(path.join(holder, 'link'))).runs).toHaveLength(2);
  });
});

describe('places that hold no file', () => {
  const notAFile = `error: a path is not a file
  where     runs/power/run.yaml:6:12  fiducial.values
  found     fiducial.npy is a folder, a pipe or a device
  expected  an ordinary file
  do        name the file that holds the data`;

  it('a folder is refused', async () => {
    expect(await refusalsIn(withFiducial((file) => { mkdirSync(file); }))).toBe(notAFile);
  });

  it('a pipe is refused without waiting for its other end', async () => {
    expect(await refusalsIn(withFiducial((file) => { makePipe(file); }))).toBe(notAFile);
  });

  it('a pipe in place of study.yaml is refused likewise', async () => {
    const folder = writeStudy(changed(minimalStudy(), { 'study.yaml': null }));
    makePipe(path.join(folder, 'study.yaml'));
    expect(await refusalsIn(folder)).toMatchInlineSnapshot(`
      "error: a path is not a file
        where     study.yaml
        found     study.yaml is a folder, a pipe or a device
        expected  an ordinary file
        do        name the file that holds the data"
    `);
  });

  it('the study folder itself is no file', async () => {
    expect(await refusals(summary('.'))).toMatchInlineSnapshot(`
      "error: a path is not a file
        where     study.yaml:11:1  summary
        found     . is a folder, a pipe or a device
        expected  an ordinary file
        do        name the file that holds the data"
    `);
  });

  it('a file with nearly the name that it must have is found out', async () => {
    const text = minimalStudy().get('study.yaml')!;
    expect(await refusals(changed(minimalStudy(), { 'study.yaml': null, 'study.yml': text }))).toMatchInlineSnapshot(`
      "error: a file cannot be found
        where     study.yaml
        found     study.yaml: no such file
        expected  a file inside the study folder
        do        rename study.yml to study.yaml"
    `);
  });

  it('a study that is not there is refused, and one that is a file', async () => {
    const folder = writeStudy(new Map([['file', 'x']]));
    const text = async (name: string) => (await refusalsIn(path.join(folder, name))).replace(folder, 'FOLDER');
    expect(await text('missing')).toMatchInlineSnapshot(`
      "error: there is no study folder
        where     FOLDER/missing
        found     no such file
        expected  a folder with study.yaml and runs/
        do        check the path"
    `);
    expect(await text('file')).toMatchInlineSnapshot(`
      "error: there is no study folder
        where     FOLDER/file
        found     a file
        expected  a folder with study.yaml and runs/
        do        check the path"
    `);
  });
});

describe('text files', () => {
  it('are refused unless they are UTF-8', async () => {
    expect(await refusals(changed(summary('summary.md'), { 'summary.md': Uint8Array.of(0x61, 0xff) }))).toMatchInlineSnapshot(`
      "error: a text file is not UTF-8
        where     study.yaml:11:1  summary
        found     summary.md
        expected  text in UTF-8
        do        save the file again as UTF-8"
    `);
  });

  it('are refused above one megabyte', async () => {
    expect(await refusals(changed(summary('summary.md'), { 'summary.md': 'x'.repeat(1_048_577) }))).toMatchInlineSnapshot(`
      "error: a text file is too long
        where     study.yaml:11:1  summary
        found     summary.md has 1048577 bytes
        expected  at most 1048576 bytes
        do        check that this is the file you meant; put long lists of numbers into array files"
    `);
    expect(await refusals(changed(minimalStudy(), { 'study.yaml': `# ${'x'.repeat(1_048_577)}` }))).toMatchInlineSnapshot(`
      "error: a text file is too long
        where     study.yaml
        found     study.yaml has 1048579 bytes
        expected  at most 1048576 bytes
        do        check that this is the file you meant; put long lists of numbers into array files"
    `);
  });

  it('may have exactly one megabyte', async () => {
    expect((await loadStudy(writeStudy(changed(summary('summary.md'), { 'summary.md': 'x'.repeat(1_048_576) })))).summary).toHaveLength(1_048_576);
  });
});
