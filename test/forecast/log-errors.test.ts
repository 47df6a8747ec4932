import { describe, expect, it } from 'vitest';
import { neighbourLogs, solve } from '../../src/forecast/log-errors.js';
import type { Small } from '../../src/linalg/small.js';

const small = (...data: readonly number[]): Small => ({ data: Float64Array.from(data), size: Math.sqrt(data.length) });
const base = small(4, 2, 2, 9);

/** Replicates of a neighbour, from a target that shows what is left alone. */
function neighbour(near: Small, solved = solve(base)): Float64Array {
  const target = new Float64Array(6).fill(7);
  neighbourLogs(near, solved, target, 1);
  return target;
}

describe('log errors', () => {
  it('of a 2 x 2 matrix are by hand: determinant 32, so 9/32, 1/4, 4/32, 1/9', () => {
    expect(Array.from(solve(base).logs, (log) => Math.exp(2 * log!))).toEqual([9 / 32, 1 / 4, 1 / 8, 1 / 9].map((value) => expect.closeTo(value, 14) as number));
  });

  it('have fixed errors where the matrix is not positive definite, and none where the diagonal is not', () => {
    expect(solve(small(1, 2, 2, 1)).logs).toEqual([null, -0, null, -0]);
    expect(solve(small(1, 0, 0, -1)).logs).toEqual([null, -0, null, null]);
    expect(solve(small(1, 0, 0, 0)).logs).toEqual([null, -0, null, null]);
  });

  it('are none where the scaled matrix is too close to singular', () => {
    expect(solve(small(1, 1, 1, 1 + 1e-15)).inversion.kind).toBe('ill conditioned');
    expect(solve(small(1e30, 0, 0, 1e-30)).logs[0]).toBeCloseTo(-15 * Math.log(10), 10);
  });

  it('of no parameter are none', () => {
    expect(solve(small()).logs).toEqual([]);
  });
});

describe('log errors of a neighbour', () => {
  it('are its own where it is positive definite, and stand in their place', () => {
    const near = small(4.1, 1.9, 1.9, 9.3);
    const logs = solve(near).logs;
    expect(Array.from(neighbour(near))).toEqual([7, ...logs.map((log) => expect.closeTo(log!, 14) as number), 7]);
  });

  it('are of first order where it is not: the derivative of the log', () => {
    const change = small(1, -3, -3, 2);
    const along = (t: number): Small => small(...base.data.map((value, k) => value + t * change.data[k]!));
    const slope = (q: number): number => (solve(along(1e-6)).logs[q]! - solve(along(-1e-6)).logs[q]!) / 2e-6;
    // A step of -20 makes the matrix indefinite (diagonal -16 and -31): all four are linear.
    const found = neighbour(along(-20));
    [0, 1, 2, 3].forEach((q) => {
      expect(found[q + 1]).toBeCloseTo(solve(base).logs[q]! - 20 * slope(q), 6);
    });
  });

  it('keep fixed errors exact where only the joint matrix is indefinite', () => {
    const found = neighbour(small(4, 7, 7, 9));
    expect(found[2]).toBeCloseTo(-Math.log(4) / 2, 14);
    expect(found[4]).toBeCloseTo(-Math.log(9) / 2, 14);
    // -(F^-1 dF F^-1)_00/(2 (F^-1)_00) by hand with dF = [[0, 5], [5, 0]] and F^-1 = [[9, -2], [-2, 4]]/32: 90/(2 * 9 * 32).
    expect(found[1]).toBeCloseTo(Math.log(9 / 32) / 2 + (2 * 5 * 9 * 2) / (32 * 32) / ((2 * 9) / 32), 12);
  });

  it('leave what does not exist at 0', () => {
    const singular = solve(small(1, 0, 0, -1));
    const target = new Float64Array(4);
    neighbourLogs(small(2, 0, 0, 3), singular, target, 0);
    expect(Array.from(target)).toEqual([0, -Math.log(2) / 2, 0, 0]);
  });
});
