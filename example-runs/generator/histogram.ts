/** Bins of equal width. */
export interface Bins {
  readonly low: number;
  readonly width: number;
  readonly count: number;
}

/** Middle of each bin, free of the rounding noise of its sum. */
export function middles({ low, width, count }: Bins): readonly number[] {
  return Array.from({ length: count }, (_, b) => Number((low + (b + 0.5) * width).toFixed(6)));
}

/** How many values fall into each bin; values outside count nowhere. */
export function histogram(values: Iterable<number>, { low, width, count }: Bins): number[] {
  const counts = new Array<number>(count).fill(0);
  for (const value of values) {
    const bin = Math.floor((value - low) / width);
    if (bin >= 0 && bin < count) counts[bin]! += 1;
  }
  return counts;
}
