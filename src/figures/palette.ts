/** A colour with its light and its dark value. The light one is written into every SVG; the report's style sheet swaps it. */
interface Colour {
  readonly light: string;
  readonly dark: string;
}

/**
 * Hues that stay apart for the common kinds of colour blindness and differ in lightness, so that grey print keeps an order.
 * Our own choice; checked by looking at them in colour, in grey, and on both grounds.
 */
const hues: readonly Colour[] = [
  { light: '#1b3a57', dark: '#9fc3e6' },
  { light: '#c2491d', dark: '#ff9a6b' },
  { light: '#1a8271', dark: '#5fd0ba' },
  { light: '#8a3a86', dark: '#dc94d8' },
  { light: '#98690a', dark: '#e6b84c' },
  { light: '#5a6472', dark: '#b9c2ce' },
];

/** Names for the marks of a combination; kept by Plot's own shapes. */
const symbols = ['circle', 'square', 'triangle', 'diamond', 'star', 'cross'] as const;
const dashes = ['', '7 3', '2 3', '9 3 2 3', '12 4', '5 2 1 2 1 2'] as const;

/** How a combination looks, in every figure. */
export interface Look {
  readonly colour: string;
  readonly symbol: (typeof symbols)[number];
  readonly dash: string;
}

/** The look of the k-th combination: after six, hues come again with other shapes and dashes. */
export function lookOf(index: number): Look {
  const turn = Math.floor(index / hues.length);
  const place = index % hues.length;
  return {
    colour: hues[place]!.light,
    symbol: symbols[(place + turn) % symbols.length]!,
    dash: dashes[(place + turn) % dashes.length]!,
  };
}

/** Quiet ink for what is not a measurement: rules, references, what is less sure. */
export const quiet: Colour = { light: '#6b7280', dark: '#a3acb8' };
/** Lines to guide the eye. */
export const faint: Colour = { light: '#dde1e6', dark: '#353d49' };
/** The sham gain, and everything that says "this is noise". */
export const warning: Colour = { light: '#a01c2e', dark: '#ff8d97' };
/** Ends of the correlation scale. */
export const negative: Colour = { light: '#8a4b08', dark: '#e0a15c' };
export const positive: Colour = { light: '#1f5f8b', dark: '#7fb9e4' };

const all: readonly Colour[] = [...hues, quiet, faint, warning, negative, positive];

/** Rules for the report's style sheet that give inlined figures the dark values. Attributes yield to any rule. */
export function darkRules(scope: string): string {
  return all
    .map(({ light, dark }) => `${scope} [fill="${light}"]{fill:${dark}}${scope} [stroke="${light}"]{stroke:${dark}}`)
    .join('');
}
