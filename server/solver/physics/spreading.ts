import { erf } from '../math/erf';

/**
 * Okubo's fit to dye patches in the sea: radial variance 0.0108 t^2.34 cm2, t in s; data from 1 h to 1 month and
 * from 100 m to 100 km. The variance along each axis is half the radial one.
 * Source: Okubo 1971, Deep-Sea Research 18: 789 (coefficient from memory; agrees with its apparent diffusivity 0.0103 l^1.15).
 */
const OKUBO_RADIAL_M2 = 0.0108e-4;
export const OKUBO_EXPONENT = 2.34;

/** Variance along each axis, m2, at the given age, s. */
export const okuboVarianceM2 = (ageS: number): number => (ageS <= 0 ? 0 : (OKUBO_RADIAL_M2 / 2) * ageS ** OKUBO_EXPONENT);

/** Apparent diffusivity, m2/s: radial variance over 4 t. */
export const okuboDiffusivityM2s = (ageS: number): number => (OKUBO_RADIAL_M2 / 4) * ageS ** (OKUBO_EXPONENT - 1);

/** How the diffusivity of a line of discharge grows with the width of its plume. */
export type WidthLaw = 'constant' | 'linear' | 'four-thirds';

/**
 * Centre-line concentration of a line of discharge of width b over its first concentration, x m down the current U.
 * Source: Brooks 1960, Diffusion of sewage effluent in an ocean current, Proc. 1st Conf. Waste Disposal in the Marine Environment.
 */
export function lineDischargeDilution(law: WidthLaw, xM: number, widthM: number, speedMps: number, startM2s: number): number {
  const growth = ((12 * startM2s) / (speedMps * widthM)) * (xM / widthM);
  if (law === 'constant') return erf(Math.sqrt(3 / (4 * growth)));
  const base = law === 'linear' ? (1 + growth) ** 2 : (1 + (2 / 3) * growth) ** 3;
  return erf(Math.sqrt(1.5 / (base - 1)));
}
