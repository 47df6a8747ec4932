import { beforeAll, describe, expect, it } from 'vitest';
import { figureMakers } from '../../src/figures/all.js';
import type { Drawing } from '../../src/figures/drawing.js';
import { openDrawing } from '../../src/figures/drawing.js';
import type { Figure } from '../../src/figures/figure.js';
import type { Results } from '../../src/results/schema.js';
import { drawnResults } from './drawn-results.js';
import { differsFromStored } from './stored-figure.js';

let drawing: Drawing;
const usual = drawnResults({ parameters: 3, added: 2 });

beforeAll(async () => {
  drawing = await openDrawing();
});

function drawAll(results: Results): readonly Figure[] {
  return Object.values(figureMakers).flatMap((make) => make(results, drawing));
}

function parsed(svg: string): Element {
  const document = new drawing.document.defaultView!.DOMParser().parseFromString(svg, 'image/svg+xml');
  return document.documentElement;
}

describe('every figure', () => {
  it.each(Object.keys(figureMakers))('%s is as stored', (name) => {
    const differences = figureMakers[name]!(usual, drawing).map((figure) => differsFromStored(figure.name, figure.standalone));
    expect(differences.filter((difference) => difference !== null)).toEqual([]);
  });

  it('has the same bytes when drawn again in another order', () => {
    const first = new Map(drawAll(usual).map((figure) => [figure.name, figure.standalone]));
    for (const make of Object.values(figureMakers).reverse()) {
      for (const figure of make(usual, drawing)) expect(figure.standalone).toBe(first.get(figure.name));
    }
  });

  it('is a well-formed picture with a title and a description, and nothing that acts', () => {
    for (const figure of drawAll(usual)) {
      for (const text of [figure.inline, figure.standalone]) {
        const svg = parsed(text);
        expect(svg.getAttribute('role')).toBe('img');
        const [title, description] = svg.children;
        expect(title?.textContent).toBe(figure.title);
        expect(description?.textContent).toBe(figure.alternative);
        expect(svg.getAttribute('aria-labelledby')).toBe(`${title?.id ?? ''} ${description?.id ?? ''}`);
        expect(text).not.toMatch(/<(script|style|image|foreignObject|a)\b|\son\w+=|href=|\sstyle=|NaN|Infinity|undefined/);
      }
    }
  });

  it('has ids that no other figure has, so that all can stand in one page', () => {
    const ids = drawAll(usual).flatMap(({ inline }) => [...inline.matchAll(/\sid="([^"]*)"/g)].map(([, id]) => id));
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('stays inside its frame', () => {
    for (const { standalone } of drawAll(usual)) {
      const svg = parsed(standalone);
      const [, , width, height] = svg.getAttribute('viewBox')!.split(' ').map(Number);
      expect(Number(svg.getAttribute('width'))).toBe(width);
      expect(Number(svg.getAttribute('height'))).toBe(height);
      for (const text of svg.querySelectorAll(':scope > text')) {
        expect(Number(text.getAttribute('x'))).toBeLessThanOrEqual(width!);
        expect(Number(text.getAttribute('y'))).toBeLessThanOrEqual(height!);
      }
    }
  });
});

describe('at the extremes', () => {
  it.each([
    ['one parameter, no added combination', { parameters: 1, added: 0 }],
    ['thirty parameters', { parameters: 30, added: 1, derivatives: 200 }],
    ['twelve combinations', { parameters: 3, added: 11 }],
    ['labels of any length', { parameters: 3, added: 2, label: 'A very long label of a combination that goes on and on and on' }],
    ['derivatives so noisy that nothing can be told', { parameters: 3, added: 2, noise: 30, derivatives: 6 }],
  ])('%s draw', (_, shape) => {
    for (const figure of drawAll(drawnResults(shape))) {
      expect(figure.standalone).not.toMatch(/NaN|Infinity|undefined/);
      expect(parsed(figure.standalone).tagName).toBe('svg');
    }
  });

  it('says in words what cannot be told', () => {
    const noisy = drawnResults({ parameters: 3, added: 2, noise: 30, derivatives: 6 });
    const [gains] = figureMakers.gains!(noisy, drawing);
    expect(gains?.standalone).toContain('cannot tell');
    expect(gains?.alternative).toContain('cannot tell');
  });
});

describe('hostile labels', () => {
  const hostile = '</svg><script>alert(1)</script><img src=x onerror=alert(1)>"\'&\\href{javascript:alert(1)}{x}';

  it('are text wherever they stand', () => {
    const results = structuredClone(usual);
    results.parameters.forEach((one) => {
      one.label = hostile;
      one.unit = hostile;
      if (one.reference !== null) one.reference.label = hostile;
    });
    for (const one of Object.values(results.combinations)) one.label = hostile;
    for (const one of Object.values(results.probes)) one.label = hostile;
    for (const blocks of Object.values(results.vectors)) {
      for (const one of Object.values(blocks)) {
        one.label = hostile;
        one.unit = hostile;
      }
    }
    for (const one of Object.values(results.dataCorrelation)) one.groups.forEach((group) => (group.label = hostile));
    for (const { inline, standalone } of drawAll(results)) {
      for (const text of [inline, standalone]) {
        expect(parsed(text).querySelector('script, img, a, foreignObject')).toBeNull();
        expect(text).not.toMatch(/<script|<img/);
      }
    }
  });
});
