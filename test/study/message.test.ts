import { describe, expect, it } from 'vitest';
import { formatProblem } from '../../src/study/message.js';

describe('the text of a problem', () => {
  it('says what, where, found, expected and what to do', () => {
    const text = formatProblem({
      what: 'a step does not match its files',
      where: { file: 'runs/power/run.yaml', line: 14, column: 9, path: 'derivatives.omega_m.nodes[1]' },
      found: '300 rows in omega_m_plus.npy, 280 in omega_m_minus.npy',
      expected: 'the same realisations at every node, or a seeds file for each',
      remedy: 'add seeds: to both nodes',
    });
    expect(text).toBe(`error: a step does not match its files
  where     runs/power/run.yaml:14:9  derivatives.omega_m.nodes[1]
  found     300 rows in omega_m_plus.npy, 280 in omega_m_minus.npy
  expected  the same realisations at every node, or a seeds file for each
  do        add seeds: to both nodes`);
  });

  it('leaves out what is not known', () => {
    expect(formatProblem({ what: 'x', where: { file: 'a.yaml', line: 3 }, remedy: 'y' })).toBe('error: x\n  where     a.yaml:3\n  do        y');
  });

  it('cuts lines that would have no end', () => {
    expect(formatProblem({ what: 'x', where: { file: 'a' }, found: 'y'.repeat(100_000), remedy: 'z' })).toBe(`error: x\n  where     a\n  found     ${'y'.repeat(1000)}…\n  do        z`);
  });

  it('spells out characters that could move the cursor, colour the terminal or turn the text around', () => {
    expect(formatProblem({ what: 'x', where: { file: 'a' }, found: '\u001b[31mred\nerror: y\u202e\u2028Ω é', remedy: 'y' })).toBe(
      'error: x\n  where     a\n  found     \\u{1b}[31mred\\u{a}error: y\\u{202e}\\u{2028}Ω é\n  do        y',
    );
  });
});
