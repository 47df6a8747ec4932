import { existsSync, mkdtempSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Ajv from 'ajv/dist/2020.js';
import { describe, expect, it } from 'vitest';
import { changed, edited, minimalStudy, writeStudy } from '../fixtures/study-folder.js';
import { sigmafolio } from './program.js';

const schema = JSON.parse(readFileSync(new URL('../../results.schema.json', import.meta.url), 'utf8')) as object;
const validate = new Ajv.default({ strict: false }).compile(schema);

describe('build', () => {
  it('writes the whole report, prints where it is, and exits with 0', () => {
    const study = writeStudy(minimalStudy());
    const run = sigmafolio(['build', study]);
    expect(run.stderr).toBe('');
    expect(run.code).toBe(0);
    expect(run.stdout).toBe(`${join(study, 'report', 'report.html')}\n`);
    expect(readdirSync(join(study, 'report')).sort()).toEqual(['figures', 'report.html', 'report.md', 'results.json', 'tables']);
  });

  it('writes results that the packaged JSON Schema accepts', () => {
    const study = writeStudy(minimalStudy());
    sigmafolio(['build', study, '--only', 'results']);
    const results: unknown = JSON.parse(readFileSync(join(study, 'report', 'results.json'), 'utf8'));
    validate(results);
    expect(validate.errors).toBeNull();
  });

  it('gives the same bytes from the same input, in another folder', () => {
    const [first, second] = [writeStudy(minimalStudy()), writeStudy(minimalStudy())];
    for (const study of [first, second]) sigmafolio(['build', study]);
    const names = readdirSync(join(first, 'report'), { recursive: true, withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map((entry) => join(entry.parentPath, entry.name).slice(first.length));
    expect(names.length).toBeGreaterThan(10);
    for (const name of names) expect(readFileSync(join(second, name)).equals(readFileSync(join(first, name))), name).toBe(true);
  });

  it('names no path of the machine in what it writes', () => {
    const study = writeStudy(minimalStudy());
    sigmafolio(['build', study]);
    for (const name of ['report.html', 'report.md', 'results.json']) {
      expect(readFileSync(join(study, 'report', name), 'utf8')).not.toContain(tmpdir());
    }
  });

  it('writes results alone without loading anything that renders', () => {
    const study = writeStudy(minimalStudy());
    const hook = `export async function resolve(specifier, context, next) {
      const found = await next(specifier, context);
      if (/node_modules.(jsdom|@observablehq|d3|unified|remark|temml)/.test(found.url)) process._rawDebug('rendering library: ' + found.url);
      return found;
    }`;
    const folder = mkdtempSync(join(tmpdir(), 'sigmafolio-watch-'));
    writeFileSync(join(folder, 'hook.mjs'), hook);
    writeFileSync(join(folder, 'watch.mjs'), "import { register } from 'node:module'; register('./hook.mjs', import.meta.url);");
    const loader = ['--import', join(folder, 'watch.mjs')];
    expect(sigmafolio(['build', study, '--only', 'results'], loader).stderr).not.toContain('rendering library');
    // The same watch does see them where they are needed.
    expect(sigmafolio(['build', study], loader).stderr).toContain('rendering library');
  });

  it('writes elsewhere with --out', () => {
    const study = writeStudy(minimalStudy());
    const out = join(mkdtempSync(join(tmpdir(), 'sigmafolio-out-')), 'report');
    expect(sigmafolio(['build', study, '--only', 'results', '--out', out]).code).toBe(0);
    expect(readdirSync(out)).toEqual(['results.json']);
    expect(existsSync(join(study, 'report'))).toBe(false);
  });

  it('exits with 1 under --require-claims where a claim is not supported', () => {
    const claim = `claims:\n  - {id: huge, text: A hundredfold gain., parameter: omega_m, combination: joint, gain: {at_least: 100}}\n`;
    const files = edited(minimalStudy(), 'study.yaml', 'baseline: power\n', `baseline: power\n${claim}`);
    const study = writeStudy(files);
    const run = sigmafolio(['build', study, '--only', 'results', '--require-claims']);
    expect(run.stderr).toContain('claim huge: contradicted');
    expect(run.code).toBe(1);
    expect(sigmafolio(['build', study, '--only', 'results']).code).toBe(0);
  });
});

describe('bad input', () => {
  it('gives one message, exit code 2, and leaves the previous report as it was', () => {
    const study = writeStudy(minimalStudy());
    sigmafolio(['build', study, '--only', 'results']);
    const before = readFileSync(join(study, 'report', 'results.json'), 'utf8');
    writeFileSync(join(study, 'runs/power/fiducial.npy'), 'no array');
    const run = sigmafolio(['build', study, '--only', 'results']);
    expect(run.code).toBe(2);
    expect(run.stdout).toBe('');
    expect(run.stderr.match(/^error: /gm)).toHaveLength(1);
    expect(run.stderr).toContain('runs/power/run.yaml');
    expect(run.stderr).not.toContain('    at ');
    expect(readFileSync(join(study, 'report', 'results.json'), 'utf8')).toBe(before);
  });

  it('says how many fiducial realisations are missing', () => {
    const power = { shape: [7, 3], values: Array.from({ length: 21 }, (_, i) => Math.sin(i * i)) };
    const peaks = { shape: [7, 2], values: Array.from({ length: 14 }, (_, i) => Math.cos(i * i)) };
    const seeds = { shape: [7], values: [100, 101, 102, 103, 104, 105, 106] };
    const study = writeStudy(
      changed(minimalStudy(), {
        'runs/power/fiducial.npy': power,
        'runs/power/seeds.npy': seeds,
        'runs/peaks/fiducial.npy': peaks,
        'runs/peaks/seeds.npy': seeds,
      }),
    );
    const run = sigmafolio(['build', study]);
    expect(run.code).toBe(2);
    expect(run.stderr).toBe(`error: too few fiducial realisations for the length of the data vector
  where     runs/peaks/run.yaml:6:1  fiducial
  found     7 realisations for the 5 entries of combination joint
  expected  more than 7 (entries + 2), and better twice as many as entries
  do        add at least 1 realisations, or cut or rebin the data vector
`);
    expect(existsSync(join(study, 'report'))).toBe(false);
  });

  it.each([
    ['no command', []],
    ['an unknown command', ['bild']],
    ['an unknown option', ['build', '.', '--ony', 'results']],
    ['an unknown part', ['build', '.', '--only', 'result']],
    ['a missing study', ['build']],
    ['a folder that is not there', ['build', 'nowhere']],
  ])('exits with 2 for %s', (_, args) => {
    const run = sigmafolio(args);
    expect(run.code).toBe(2);
    expect(run.stderr).not.toBe('');
  });
});

describe('help', () => {
  it.each([['build'], ['check']])('%s --help shows an example and exits with 0', (command) => {
    const run = sigmafolio([command, '--help']);
    expect(run.code).toBe(0);
    expect(run.stdout).toContain('Example:');
  });
});

describe('check', () => {
  it('writes nothing and sums up', () => {
    const study = writeStudy(minimalStudy());
    const run = sigmafolio(['check', study]);
    expect(run.code).toBe(0);
    expect(run.stdout).toBe('Two summaries of an invented lensing survey: 2 runs, 18 files, 2 combinations; 0 warnings.\n');
    expect(existsSync(join(study, 'report'))).toBe(false);
  });

  it('refuses what a build refuses', () => {
    const study = writeStudy(edited(minimalStudy(), 'study.yaml', 'baseline: power', 'baseline: pwer'));
    const run = sigmafolio(['check', study]);
    expect(run.code).toBe(2);
    expect(run.stderr).toContain('pwer');
  });
});
