import { beforeAll, expect, it } from 'vitest';
import { figureMakers } from '../../src/figures/all.js';
import type { Drawing } from '../../src/figures/drawing.js';
import { openDrawing, stem } from '../../src/figures/drawing.js';
import { darkRules } from '../../src/figures/palette.js';
import { serialise } from '../../src/figures/serialise.js';
import { inventedResults } from '../fixtures/invented-results.js';

let drawing: Drawing;

beforeAll(async () => {
  drawing = await openDrawing();
});

function element(text: string): Element {
  const made = drawing.document.createElementNS('http://www.w3.org/2000/svg', 'text');
  made.setAttribute('y', '2');
  made.setAttribute('fill', text);
  made.textContent = text;
  return made;
}

it('an element is written with its attributes in order and its text escaped', () => {
  expect(serialise(element('a<b & "c">'))).toBe('<text fill="a&lt;b &amp; &quot;c&quot;&gt;" y="2">a&lt;b &amp; &quot;c&quot;&gt;</text>');
});

it('characters that XML forbids do not get through, and those that HTML has entities for stay characters', () => {
  expect(serialise(element('\u0000\u001b\ud800\ufffe'))).toContain('>\ufffd\ufffd\ufffd\ufffd<');
  expect(serialise(element('1\u00a0000\t2'))).toContain('>1\u00a0000\t2<');
});

it('names of a study become plain file names', () => {
  expect(stem('../a b<c>é')).toBe('-a-b-c-');
  expect(stem('maps_1-x')).toBe('maps_1-x');
});

it.each([
  ['the usual', {}],
  ['one parameter, the baseline alone', { parameters: 1, combinations: 1 }],
  ['thirty parameters, twelve combinations, long labels', { parameters: 30, combinations: 12, longLabels: true }],
])('figures of invented results are whole: %s', (_, options) => {
  const results = inventedResults(options);
  // Hostile text of every kind that a label may hold.
  for (const one of Object.values(results.combinations)) one.label += '\u0007\u00a0\ud800</svg><script>';
  const parser = new drawing.document.defaultView!.DOMParser();
  for (const make of Object.values(figureMakers)) {
    for (const { name, standalone, inline, alternative, caption } of make(results, drawing)) {
      const svg = parser.parseFromString(standalone, 'image/svg+xml').documentElement;
      expect(svg.tagName, name).toBe('svg');
      expect(standalone, name).not.toMatch(/NaN|Infinity|undefined|<script|\sstyle=/);
      expect(inline.startsWith('<svg '), name).toBe(true);
      expect(alternative, name).not.toBe('');
      expect(caption, name).not.toBe('');
    }
  }
});

it('every colour that is drawn has a dark twin, so that no ink is lost on a dark page', () => {
  const rules = darkRules('figure');
  for (const make of Object.values(figureMakers)) {
    for (const { inline } of make(inventedResults(), drawing)) {
      for (const [, attribute, colour] of inline.matchAll(/ (fill|stroke)="(#[0-9a-f]+|[a-z]+)"/gi)) {
        if (colour === 'none' || colour === 'currentColor') continue;
        expect(rules).toContain(`figure [${attribute!}="${colour!}"]{`);
      }
    }
  }
});

it('pages do not load what draws', async () => {
  // The contract of `build --only results`: the modules of figures import jsdom and Plot for their types alone.
  const { readdirSync, readFileSync } = await import('node:fs');
  const folder = new URL('../../src/figures/', import.meta.url);
  for (const file of readdirSync(folder)) {
    expect(readFileSync(new URL(file, folder), 'utf8'), file).not.toMatch(/^import (?!type)[^;]*'(jsdom|@observablehq\/plot)'/m);
  }
});
