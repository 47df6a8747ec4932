import type { Vector } from '../arrays/rows.js';

/** Scalar product over entries `from` to `to` (exclusive) of two vectors that start at the given offsets. */
export function dot(a: Vector, startA: number, b: Vector, startB: number, from: number, to: number): number {
  let sum = 0;
  for (let i = from; i < to; i += 1) sum += a[startA + i]! * b[startB + i]!;
  return sum;
}
