import { marks, shiftedSize } from './glyphs.js';

/** Widths in ems of a common sans serif; generous, since the reader's font is not known. */
const narrow = 0.36;
const usual = 0.62;
const wide = 0.92;
const boldFactor = 1.13;

function ems(letter: string): number {
  if (/\p{Mn}/u.test(letter)) return 0;
  if (/[iljtfrI.,:;'’|!()[\]{} \u2009\u202f]/.test(letter)) return narrow;
  if (/[mwMW@%ΩΘΦ∑…]/.test(letter) || (letter.codePointAt(0) ?? 0) >= 0x2e80) return wide;
  return usual;
}

/** About how wide a text will be, in pixels. */
export function textWidth(text: string, size = 12, bold = false): number {
  let sum = 0;
  let scale = 1;
  for (const letter of text) {
    if (letter === marks.sub || letter === marks.sup) scale = shiftedSize;
    else if (letter === marks.base) scale = 1;
    else sum += scale * ems(letter);
  }
  return sum * size * (bold ? boldFactor : 1);
}

/** The text, cut with an ellipsis to fit a width. */
export function fitted(text: string, width: number, size = 12, bold = false): string {
  // Half a pixel, since widths are sums of fractions.
  if (textWidth(text, size, bold) <= width + 0.5) return text;
  const letters = Array.from(text);
  while (letters.length > 1 && textWidth(`${letters.join('')}…`, size, bold) > width) letters.pop();
  return `${letters.join('').trimEnd()}…`;
}

/** Start and end of a text, with an ellipsis between. */
function fittedInTheMiddle(text: string, width: number, size: number, bold: boolean): string {
  const letters = Array.from(text);
  let kept = letters.length - 1;
  const cut = (): string => `${letters.slice(0, Math.ceil(kept / 2)).join('').trimEnd()}…${letters.slice(letters.length - Math.floor(kept / 2)).join('').trimStart()}`;
  while (kept > 2 && textWidth(cut(), size, bold) > width) kept -= 1;
  return cut();
}

/** Labels cut to a width that still differ from one another, if they did: cut at the end, else in the middle. */
export function fittedApart(labels: readonly string[], width: number, size = 12, bold = false): readonly string[] {
  const short = labels.map((label) => fitted(label, width, size, bold));
  const isShared = (k: number): boolean => short.some((other, j) => j !== k && other === short[k] && labels[j] !== labels[k]);
  return labels.map((label, k) => (isShared(k) ? fittedInTheMiddle(label, width, size, bold) : short[k]!));
}

/** The text over at most `lines` lines of a width; the last is cut. */
export function wrapped(text: string, width: number, lines: number, size = 12, bold = false): readonly string[] {
  const words = text.split(' ');
  const made: string[] = [];
  let line = '';
  while (words.length > 0 && made.length < lines - 1) {
    const longer = line === '' ? words[0]! : `${line} ${words[0]!}`;
    if (line !== '' && textWidth(longer, size, bold) > width) {
      made.push(line);
      line = '';
    } else {
      line = longer;
      words.shift();
    }
  }
  const rest = [line, ...words].filter((word) => word !== '').join(' ');
  return (rest === '' ? made : [...made, rest]).map((one) => fitted(one, width, size, bold));
}
