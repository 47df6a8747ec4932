import { describe, expect, it } from 'vitest';
import type { Element } from 'hast';
import { visit } from 'unist-util-visit';
import { mathMl } from '../../src/report/html/mathml.js';

function shown(math: Element): string {
  let text = '';
  visit(math, 'text', (node) => {
    text += node.value;
  });
  return text;
}

function names(math: Element): ReadonlySet<string> {
  const found = new Set<string>();
  visit(math, 'element', (node) => {
    found.add(node.tagName);
  });
  return found;
}

describe('TeX as MathML', () => {
  it.each([
    ['\\sigma_8', 'σ8'],
    ['\\Omega_\\mathrm{m}', 'Ωm'],
    ['\\hat{\\theta}', 'θˆ'],
    ['\\text{share of pixels}', 'share of pixels'],
    ['\\mathrm{shares}', 'shares'],
    ['\\mathbf{F}', '𝐅'],
    ['h^{-1}\\,\\mathrm{Mpc}', 'h−1Mpc'],
    ['\\frac{1}{2}', '12'],
    ['a < b', 'a<b'],
  ])('shows %s as %s', (tex, text) => {
    expect(shown(mathMl(tex, false)!).replace(/\u00a0/g, ' ')).toBe(text);
  });

  it.each([
    '\\href{https://example.invalid}{x}',
    '\\url{https://example.invalid}',
    '\\includegraphics{a.png}',
    '\\class{a}{x}',
    '\\id{a}{x}',
    '\\style{color:red}{x}',
    '\\data{a=b}{x}',
    '\\frac{1',
    '\\unknown',
    'a & b',
    '\\def\\a{\\a\\a}\\a',
    '{'.repeat(1900) + '}'.repeat(1900),
    'x'.repeat(5000),
  ])('refuses %.40s', (tex) => {
    expect(mathMl(tex, false)).toBeNull();
  });

  it.each(['\\color{red}x', '\\colorbox{red}{x}', '\\begin{pmatrix}a & b\\\\c & d\\end{pmatrix}', '\\boxed{x}', '\\cancel{x}', '\\label{a}x\\ref{a}', '\\hat{x}', '\\rule{9em}{1em}'])(
    'carries no style, class, id, colour or link from %s',
    (tex) => {
      const math = mathMl(tex, true)!;
      expect([...names(math)].filter((name) => !name.startsWith('m'))).toEqual([]);
      visit(math, 'element', ({ properties }) => {
        for (const key of Object.keys(properties)) expect(['style', 'class', 'className', 'id', 'href', 'mathcolor', 'mathbackground']).not.toContain(key);
      });
    },
  );
});
