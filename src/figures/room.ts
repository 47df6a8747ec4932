/** A place for words beside the marks of a row on a logarithmic axis. */
export interface Room {
  /** Value that the words start from, end at, or have in their middle. */
  readonly at: number;
  readonly anchor: 'start' | 'middle' | 'end';
  readonly dx: number;
}

const clear = 10;

/**
 * After the last mark where there is room for the words, else before the first, else in the widest gap. Words keep clear of lines
 * too where they can.
 */
export function roomBeside(
  marks: readonly number[],
  lines: readonly number[],
  domain: readonly [number, number],
  pixels: number,
  needed: number,
): Room {
  const [low, high] = [Math.log(domain[0]), Math.log(domain[1])];
  const place = (value: number): number => ((Math.log(value) - low) / (high - low)) * pixels;
  const value = (at: number): number => Math.exp(low + (at / pixels) * (high - low));
  for (const obstacles of [[...marks, ...lines], marks]) {
    const places = obstacles.map(place).sort((a, b) => a - b);
    const [first, last] = [places[0], places[places.length - 1]];
    if (first === undefined || last === undefined) break;
    if (last + clear + needed <= pixels) return { at: value(last), anchor: 'start', dx: clear };
    if (first - clear - needed >= 0) return { at: value(first), anchor: 'end', dx: -clear };
    const gaps = places.slice(1).map((end, k) => ({ middle: (end + places[k]!) / 2, width: end - places[k]! }));
    const widest = gaps.reduce<(typeof gaps)[number] | undefined>((best, gap) => (best === undefined || gap.width > best.width ? gap : best), undefined);
    if (widest !== undefined && widest.width >= needed + clear) return { at: value(widest.middle), anchor: 'middle', dx: 0 };
  }
  return { at: value(pixels / 2), anchor: 'middle', dx: 0 };
}
