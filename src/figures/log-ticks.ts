const ladders: readonly (readonly number[])[] = [[1], [1, 3], [1, 2, 5], [1, 1.5, 2, 3, 5, 7], [1, 1.2, 1.5, 2, 2.5, 3, 4, 5, 7], [1, 1.2, 1.4, 1.6, 1.8, 2, 2.5, 3, 4, 5, 6, 7, 8, 9]];

/** Places to label on a logarithmic axis: the finest ladder of round numbers that has at most `most` in the domain. */
export function logTicks(domain: readonly [number, number], most: number): readonly number[] {
  const [low, high] = domain;
  const on = (ladder: readonly number[]): number[] => {
    const ticks: number[] = [];
    for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power += 1) {
      for (const step of ladder) {
        const value = Number((step * 10 ** power).toPrecision(3));
        if (value >= low && value <= high) ticks.push(value);
      }
    }
    return ticks;
  };
  const decades = on([1]);
  if (decades.length > most) return decades.filter((_, k) => k % Math.ceil(decades.length / most) === 0);
  const fitting = ladders.map(on).filter((ticks) => ticks.length <= most);
  const finest = fitting[fitting.length - 1];
  return finest !== undefined && finest.length >= 3 ? finest : linearTicks(low, high, most);
}

/** Round steps; a logarithmic axis over less than a factor of two is nearly linear. */
export function linearTicks(low: number, high: number, most: number): readonly number[] {
  const raw = (high - low) / Math.max(1, most);
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = power * ([1, 2, 5, 10].find((factor) => factor * power >= raw) ?? 10);
  const ticks: number[] = [];
  for (let k = Math.ceil(low / step); k * step <= high + 1e-9 * step; k += 1) ticks.push(Number((k * step).toPrecision(6)));
  return ticks;
}
