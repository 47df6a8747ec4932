/**
 * TeX labels as text. Marks of the private use area say where a subscript or superscript begins and where the base line comes
 * back; `tidy` turns them into shifted spans, `plainText` drops them.
 */
export const marks = { base: '\uE000', sub: '\uE001', sup: '\uE002' } as const;

/** Size of sub- and superscripts over that of the line. */
export const shiftedSize = 0.75;

const greek: Readonly<Record<string, string>> = {
  alpha: 'α', beta: 'β', gamma: 'γ', delta: 'δ', epsilon: 'ϵ', varepsilon: 'ε', zeta: 'ζ', eta: 'η', theta: 'θ', vartheta: 'ϑ',
  iota: 'ι', kappa: 'κ', lambda: 'λ', mu: 'μ', nu: 'ν', xi: 'ξ', pi: 'π', rho: 'ρ', sigma: 'σ', tau: 'τ', upsilon: 'υ', phi: 'ϕ',
  varphi: 'φ', chi: 'χ', psi: 'ψ', omega: 'ω', Gamma: 'Γ', Delta: 'Δ', Theta: 'Θ', Lambda: 'Λ', Xi: 'Ξ', Pi: 'Π', Sigma: 'Σ',
  Upsilon: 'Υ', Phi: 'Φ', Psi: 'Ψ', Omega: 'Ω', ell: 'ℓ', hbar: 'ℏ', infty: '∞', times: '×', cdot: '·', pm: '±', prime: '′',
  sum: '∑', langle: '⟨', rangle: '⟩', partial: '∂', nabla: '∇', odot: '⊙', oplus: '⊕', star: '⋆', ast: '∗', sim: '∼', approx: '≈', le: '≤', ge: '≥',
}; // prettier-ignore

const accents: Readonly<Record<string, string>> = { hat: '\u0302', bar: '\u0304', tilde: '\u0303', dot: '\u0307', vec: '\u20D7', overline: '\u0305', widehat: '\u0302' };
/** Commands that only change the face of their argument. */
const faces = new Set(['mathrm', 'mathbf', 'mathit', 'mathcal', 'mathsf', 'text', 'textrm', 'boldsymbol', 'bm', 'operatorname', 'rm']);

interface Cursor {
  readonly tex: string;
  place: number;
}

/** A TeX label as text with marks. Commands that are not known show as their name. */
export function glyphs(tex: string): string {
  const cursor = { tex: tex.replaceAll(/[\uE000-\uE002]/g, ''), place: 0 };
  return sequence(cursor, false);
}

/** The letter of a TeX command that stands for one: ell, nu. */
export function greekLetter(name: string): string | undefined {
  return Object.hasOwn(greek, name) ? greek[name] : undefined;
}

/** The same without shifts, for titles and descriptions: Ω_m. */
export function plainText(tex: string): string {
  return glyphs(tex).replaceAll(marks.sub, '_').replaceAll(marks.sup, '^').replaceAll(marks.base, '');
}

function sequence(cursor: Cursor, inGroup: boolean): string {
  let text = '';
  while (cursor.place < cursor.tex.length) {
    if (cursor.tex[cursor.place] === '}') {
      cursor.place += 1;
      if (inGroup) return text;
      continue;
    }
    text += piece(cursor);
  }
  return text;
}

function piece(cursor: Cursor): string {
  const character = cursor.tex[cursor.place]!;
  cursor.place += 1;
  switch (character) {
    case '{':
      return sequence(cursor, true);
    case '_':
      return `${marks.sub}${unshifted(argument(cursor))}${marks.base}`;
    case '^':
      return `${marks.sup}${unshifted(argument(cursor))}${marks.base}`;
    case '\\':
      return command(cursor);
    case '~':
      return ' ';
    case '-':
      return '\u2212';
    case '$':
      return '';
    default:
      return character;
  }
}

/** Shifts do not nest: one inside another stays on its line. */
function unshifted(text: string): string {
  return text.replaceAll(/[\uE000-\uE002]/g, '');
}

function argument(cursor: Cursor): string {
  while (cursor.tex[cursor.place] === ' ') cursor.place += 1;
  return cursor.place < cursor.tex.length ? piece(cursor) : '';
}

function command(cursor: Cursor): string {
  const name = /^[A-Za-z]+/.exec(cursor.tex.slice(cursor.place))?.[0];
  if (name === undefined) {
    const character = cursor.tex[cursor.place] ?? '';
    cursor.place += 1;
    return /[,;:! ]/.test(character) ? '\u2009' : character;
  }
  cursor.place += name.length;
  while (cursor.tex[cursor.place] === ' ') cursor.place += 1;
  if (faces.has(name)) return argument(cursor);
  const accent = Object.hasOwn(accents, name) ? accents[name] : undefined;
  if (accent !== undefined) return argument(cursor) + accent;
  return greekLetter(name) ?? name;
}
