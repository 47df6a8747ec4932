import type { Parameters } from './parameters.js';

/**
 * Matter fluctuations in a flat universe with a cosmological constant, from fitting formulae (all from memory, which is
 * good enough for a fiction). Wavenumbers in h/Mpc, distances in Mpc/h.
 */

/** The Hubble constant over 100 km/s/Mpc; never varied here. */
const hubble = 0.7;
const omegaBaryons = 0.049;
/** c / H_0 in Mpc/h. */
export const hubbleDistance = 2997.92458;

/** a as a function of redshift needs no more: H(z) / H_0 of a flat universe. */
export function expansion(omegaM: number, z: number): number {
  return Math.sqrt(omegaM * (1 + z) ** 3 + 1 - omegaM);
}

/** Linear growth, 1 today. Carroll, Press & Turner 1992, Ann. Rev. Astron. Astrophys. 30, 499. */
export function growth(omegaM: number, z: number): number {
  const suppression = (matter: number): number =>
    (2.5 * matter) / (matter ** (4 / 7) - (1 - matter) + (1 + matter / 2) * (1 + (1 - matter) / 70));
  const matterThen = (omegaM * (1 + z) ** 3) / expansion(omegaM, z) ** 2;
  return suppression(matterThen) / suppression(omegaM) / (1 + z);
}

/** Cold dark matter. Bardeen, Bond, Kaiser & Szalay 1986, Astrophys. J. 304, 15; shape with baryons of Sugiyama 1995, Astrophys. J. Suppl. 100, 281. */
function transfer(omegaM: number, k: number): number {
  const shape = omegaM * hubble * Math.exp(-omegaBaryons * (1 + Math.sqrt(2 * hubble) / omegaM));
  const q = k / shape;
  return (Math.log1p(2.34 * q) / (2.34 * q)) * (1 + 3.89 * q + (16.1 * q) ** 2 + (5.46 * q) ** 3 + (6.71 * q) ** 4) ** -0.25;
}

/** Linear spectrum today but for its amplitude. */
function shapeAt({ omega_m, n_s }: Parameters, k: number): number {
  return k ** n_s * transfer(omega_m, k) ** 2;
}

/** sigma_8^2 = int dlnk k^3 P(k) / (2 pi^2) w(8 k)^2, w(x) = 3 (sin x - x cos x) / x^3, by the midpoint rule in ln k. */
function amplitude(parameters: Parameters): number {
  const [low, high, steps] = [Math.log(1e-4), Math.log(20), 1200];
  const step = (high - low) / steps;
  let variance = 0;
  for (let i = 0; i < steps; i += 1) {
    const k = Math.exp(low + (i + 0.5) * step);
    const x = 8 * k;
    const window = (3 * (Math.sin(x) - x * Math.cos(x))) / x ** 3;
    variance += (step * k ** 3 * shapeAt(parameters, k) * window ** 2) / (2 * Math.PI ** 2);
  }
  return parameters.sigma_8 ** 2 / variance;
}

/** Gas that is driven out of haloes takes power from small scales: 1 - b x / (1 + x), x = (k / (1 h/Mpc))^2. Invented. */
function feedbackFactor(strength: number, k: number): number {
  const x = k ** 2;
  return 1 - (strength * x) / (1 + x);
}

/**
 * Nonlinear matter spectrum P(k, z) in (Mpc/h)^3. With D = k^3 P / (2 pi^2), D_nl = D (1 + D^2)^(1/4): the linear spectrum
 * on large scales, D^(3/2) on small ones, the slope of stable clustering (Hamilton et al. 1991, Astrophys. J. 374, L1;
 * Peacock & Dodds 1996, MNRAS 280, L19). The way from one to the other is invented.
 */
export function matterSpectrum(parameters: Parameters): (k: number, z: number) => number {
  const today = amplitude(parameters);
  return (k, z) => {
    const linear = today * shapeAt(parameters, k) * growth(parameters.omega_m, z) ** 2;
    const contrast = (k ** 3 * linear) / (2 * Math.PI ** 2);
    return linear * (1 + contrast ** 2) ** 0.25 * feedbackFactor(parameters.feedback, k);
  };
}
