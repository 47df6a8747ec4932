import { expansion, hubbleDistance, matterSpectrum } from './matter.js';
import type { Parameters } from './parameters.js';

/** All galaxies at one redshift: simple, and invented. */
const sourceRedshift = 1;
const slices = 64;
const shareOfEmptyBeam = 0.25;

/** One slice of the line of sight: distance chi and thickness in Mpc/h, redshift, and (1 - chi/chi_s) / a. */
interface Slice {
  readonly distance: number;
  readonly thickness: number;
  readonly redshift: number;
  readonly efficiency: number;
}

/** The line of sight by the midpoint rule in redshift: d chi = (c / H) dz. */
function lineOfSight(omegaM: number): readonly Slice[] {
  const step = sourceRedshift / slices;
  let distance = 0;
  const passed = Array.from({ length: slices }, (_, i) => {
    const redshift = (i + 0.5) * step;
    const thickness = (hubbleDistance * step) / expansion(omegaM, redshift);
    distance += thickness;
    return { redshift, thickness, distance: distance - thickness / 2 };
  });
  return passed.map((slice) => ({ ...slice, efficiency: (1 - slice.distance / distance) * (1 + slice.redshift) }));
}

/**
 * Angular power spectrum of the convergence, in Limber's approximation (Kaiser 1992, Astrophys. J. 388, 272; from memory):
 * C(l) = (9/4) Omega_m^2 (H_0/c)^4 int dchi [(1 - chi/chi_s) / a]^2 P(l / chi, z).
 */
export function convergenceSpectrum(parameters: Parameters): (multipole: number) => number {
  const sight = lineOfSight(parameters.omega_m);
  const matter = matterSpectrum(parameters);
  const factor = (9 / 4) * parameters.omega_m ** 2 * hubbleDistance ** -4;
  return (multipole) =>
    factor * sum(sight, ({ distance, thickness, redshift, efficiency }) => thickness * efficiency ** 2 * matter(multipole / distance, redshift));
}

/**
 * Shift of the lognormal maps, the least that a map can hold with its sign turned: a share of the convergence of an empty
 * line of sight, (3/2) Omega_m (H_0/c)^2 int dchi chi (1 - chi/chi_s) / a (Taruya et al. 2002, Astrophys. J. 571, 638;
 * Hilbert, Hartlap & Schneider 2011, Astron. Astrophys. 536, A85; both from memory). Lines of sight as empty as that do not
 * occur: fits to maps ask for less. The share is invented.
 */
export function lognormalShift({ omega_m }: Parameters): number {
  const empty = 1.5 * omega_m * hubbleDistance ** -2 * sum(lineOfSight(omega_m), ({ distance, thickness, efficiency }) => thickness * distance * efficiency);
  return shareOfEmptyBeam * empty;
}

function sum<T>(items: readonly T[], term: (item: T) => number): number {
  return items.reduce((total, item) => total + term(item), 0);
}
