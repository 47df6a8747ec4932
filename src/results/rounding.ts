/**
 * Numbers as they are shown: rounded by their uncertainty, with real minus signs and thin spaces. Nothing here decides what a
 * number means; where a number does not exist the caller says so in words.
 */

/** Two digits of the uncertainty: common practice. */
const uncertaintyDigits = 2;

/** A forecast known better than this many digits is shown with this many; the tables in CSV hold the rest. */
const mostDigits = 5;

/** Digits of a number that comes without an uncertainty. */
const plainDigits = 3;

/** U+202F, a thin space that does not break. */
export const thinSpace = '\u202f';
const minusSign = '\u2212';

/** Decimals (negative: tens, hundreds) that leave `digits` significant digits of `value`. */
function decimalsOf(value: number, digits: number): number {
  if (value === 0) return digits - 1;
  // Through toExponential, so that 0.0996 at two digits counts as 0.10.
  return digits - 1 - Number(value.toExponential(digits - 1).split('e')[1]);
}

/** Decimals at which `value` is shown, so that its standard error keeps two digits. */
export function decimalsFor(value: number, standardError: number | null): number {
  if (standardError === null || !(standardError > 0)) return decimalsOf(value, plainDigits);
  return Math.min(decimalsOf(standardError, uncertaintyDigits), decimalsOf(value, mostDigits));
}

/** A value rounded so that its standard error has two digits: `roundTo(0.034064, 0.0048)` is "0.0341". */
export function roundTo(value: number, standardError: number | null): string {
  return withDecimals([value], decimalsFor(value, standardError))[0]!;
}

/** A value with its standard error: "0.0341 ± 0.0048". */
export function withError(value: number, standardError: number): string {
  const [left, right] = withDecimals([value, standardError], decimalsFor(value, standardError));
  const small = Number(right!.replace(/[^\d.]/g, '')) === 0;
  return small ? left! : `${left!} ± ${right!}`;
}

/** A value with its interval, all to the same decimal: "1.30 (1.13 to 1.50)". */
export function withInterval(value: number, standardError: number | null, interval: readonly [number, number] | null): string {
  if (interval === null) return roundTo(value, standardError);
  const [middle, low, high] = withDecimals([value, ...interval], decimalsFor(value, standardError));
  return `${middle!} (${low!} to ${high!})`;
}

/** `digits` significant digits: `significant(0.98866, 3)` is "0.989". */
export function significant(value: number, digits: number = plainDigits): string {
  return withDecimals([value], decimalsOf(value, digits))[0]!;
}

/** At most `digits` digits, no zeros at the end: a factor of 10 is "10", a weight of 22.222 is "22.22". */
export function compact(value: number, digits = 4): string {
  return asGiven(Number(value.toPrecision(digits)));
}

/** The number as it was given, in the fewest digits that read back the same: 0.3 is "0.3". */
export function asGiven(value: number): string {
  const text = Object.is(value, -0) ? '0' : String(value);
  const [mantissa, exponent] = text.split('e');
  const shown = grouped(mantissa!.replace('-', minusSign));
  return exponent === undefined ? shown : `${shown}${powerOfTen(Number(exponent))}`;
}

/** A share as a percentage, two digits: `percent(0.0347)` is "3.5 %". */
export function percent(share: number): string {
  const value = 100 * share;
  if (value !== 0 && Math.abs(value) < 0.1) return `less than 0.1${thinSpace}%`;
  const decimals = Math.abs(value) < 9.95 ? 1 : 0;
  return `${fixed(value, decimals)}${thinSpace}%`;
}

/** A count, its thousands set apart: "12 500". */
export function count(value: number): string {
  return grouped(String(value));
}

/** Values of one quantity to the same number of decimals, with one power of ten where they are very large or very small. */
function withDecimals(values: readonly number[], decimals: number): string[] {
  const largest = Math.max(...values.map(Math.abs));
  const magnitude = largest === 0 ? 0 : Math.floor(Math.log10(largest));
  const usual = magnitude >= -4 && magnitude < 6 && decimals <= 9;
  if (usual) return values.map((value) => fixed(value, decimals));
  const scale = (value: number): number => value / 10 ** magnitude;
  return values.map((value) => `${fixed(scale(value), Math.max(0, decimals + magnitude))}${value === 0 ? '' : powerOfTen(magnitude)}`);
}

/** Fixed decimals; negative ones round to tens and hundreds. */
function fixed(value: number, decimals: number): string {
  const text = decimals >= 0 ? value.toFixed(decimals) : String(Math.round(value / 10 ** -decimals) * 10 ** -decimals);
  const zero = /^-0(\.0*)?$/.test(text);
  return grouped(zero ? text.slice(1) : text.replace('-', minusSign));
}

/** Digits before the decimal point in threes, from five digits on. */
function grouped(text: string): string {
  const [whole, rest] = text.split('.');
  const digits = whole!.replace(minusSign, '');
  const spaced = digits.length < 5 ? whole! : whole!.replace(/\B(?=(\d{3})+$)/g, thinSpace);
  return rest === undefined ? spaced : `${spaced}.${rest}`;
}

const superscripts = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];

function powerOfTen(exponent: number): string {
  return `${thinSpace}×${thinSpace}10${superscript(String(exponent))}`;
}

/** A whole number, raised: "-2" is "⁻²". */
export function superscript(power: string): string {
  return power.replace(/[-\d]/g, (sign) => (sign === '-' ? '⁻' : superscripts[Number(sign)]!));
}
