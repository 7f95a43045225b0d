import type { OpenWater } from '../../../shared/schemas/estimate';
import { betweenWalls } from '../physics/two-walls';

/** How much stronger than the mean over the depth a cloud of some age is at a depth, plain. */
export type DepthFactor = (ageS: number) => number;

/** A cloud younger than this has no thickness that could be told from zero, in shares of h^2/Kz. */
const LEAST_TAU = 1e-9;

/**
 * Mixing over depth between the surface and the bed, or the bottom of the mixed layer, neither of which lets anything
 * through: h c / (mass over area) = r(z/h; z0/h, tau), tau = Kz t / h^2, by images below tau = 0.16 and cosines above.
 * Null where the water is taken as mixed over depth at once, or the depth of the receptor is not known (the mean over the depth stands for it).
 * Source: Fischer et al. 1979, section 2.3.5 and 5.1.
 */
export function depthFactor(water: OpenWater, releaseDepthM: number, receptorDepthM: number | null): DepthFactor | null {
  const { vertical, mixingDepthM: h } = water;
  if (!vertical || receptorDepthM === null) return null;
  if (receptorDepthM > h) return () => 0;
  const [from, at] = [releaseDepthM / h, receptorDepthM / h];
  return (ageS) => betweenWalls(at, from, Math.max(LEAST_TAU, (vertical.kzM2s * ageS) / (h * h)));
}
