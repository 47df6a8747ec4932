import type { Place, Problem } from './problems.js';

/** A problem as a terminal shows it: one line that says what, then where, found, expected and what to do. */
export function formatProblem(problem: Problem): string {
  const lines = [`error: ${printable(problem.what)}`, `  where     ${printable(placeText(problem.where))}`];
  if (problem.found !== undefined) lines.push(`  found     ${printable(problem.found)}`);
  if (problem.expected !== undefined) lines.push(`  expected  ${printable(problem.expected)}`);
  lines.push(`  do        ${printable(problem.remedy)}`);
  return lines.join('\n');
}

function placeText({ file, line, column, path }: Place): string {
  const position = [file, line, column].filter((part) => part !== undefined).map(String).join(':');
  return path === undefined ? position : `${position}  ${path}`;
}

const longest = 1000;

/** Names come from files: what could move the cursor, colour the terminal or turn the direction of writing is spelt out, and no line is endless. */
function printable(text: string): string {
  const short = text.length > longest ? `${text.slice(0, longest)}…` : text;
  return short.replace(/[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/gu, (character) => `\\u{${character.codePointAt(0)!.toString(16)}}`);
}
