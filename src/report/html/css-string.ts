/** More does not fit on the head of a printed page. */
const longest = 90;

/** A user's words as a string of CSS: everything but letters, digits and spaces as an escape, so that nothing can end the string. */
export function cssString(words: string): string {
  const short = words.length > longest ? `${words.slice(0, longest - 1).trimEnd()}…` : words;
  const escaped = Array.from(short, (character) => (/[A-Za-z0-9 ]/.test(character) ? character : `\\${character.codePointAt(0)!.toString(16)} `));
  return `"${escaped.join('')}"`;
}
