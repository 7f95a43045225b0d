/**
 * Two- and three-dimensional solutions in a uniform current along x with constant diffusivities; SI.
 * Source: Fischer et al. 1979, chapters 2 and 3; Carslaw & Jaeger 1959, chapter 10.
 */
import { besselK0e } from '../math/bessel';

/**
 * Density of a normal cloud in two dimensions, 1/m2, at (dx, dy) m from its centre, with covariance (sxx, sxy, syy), m2.
 * Multiply by mass over depth. The covariance must be positive definite.
 */
export function normalDensity2(dx: number, dy: number, sxx: number, sxy: number, syy: number): number {
  const det = sxx * syy - sxy * sxy;
  const q = (syy * dx * dx - 2 * sxy * dx * dy + sxx * dy * dy) / det;
  return Math.exp(-q / 2) / (2 * Math.PI * Math.sqrt(det));
}

/** Steady plume of a point release in water of depth h, per unit rate, s/m3. Unbounded as U goes to 0 without loss. */
export function steadyPlume2(x: number, y: number, h: number, U: number, Kx: number, Ky: number, k: number): number {
  const rho = Math.sqrt((x * x) / Kx + (y * y) / Ky);
  const z = Math.sqrt((U * U) / (4 * Kx) + k) * rho;
  return (Math.exp((U * x) / (2 * Kx) - z) * besselK0e(z)) / (2 * Math.PI * h * Math.sqrt(Kx * Ky));
}

/** The slender limit: spreading along the current neglected; good to 1 % where U x / Kx > 30 on the axis. */
export const slenderPlume2 = (x: number, y: number, h: number, U: number, Ky: number, k: number): number =>
  Math.exp((-U * y * y) / (4 * Ky * x) - (k * x) / U) / (h * Math.sqrt(4 * Math.PI * Ky * U * x));

/** Steady plume in three dimensions without boundaries, per unit rate, s/m3. */
export function steadyPlume3(x: number, y: number, z: number, U: number, Kx: number, Ky: number, Kz: number, k: number): number {
  const rho = Math.sqrt((x * x) / Kx + (y * y) / Ky + (z * z) / Kz);
  return Math.exp((U * x) / (2 * Kx) - Math.sqrt((U * U) / (4 * Kx) + k) * rho) / (4 * Math.PI * rho * Math.sqrt(Kx * Ky * Kz));
}

/**
 * Covariance of a point release after t seconds in a simple shear u = G y: spread across feeds spread along.
 * Source: Okubo & Carter 1966, J. Geophys. Res. 71: 5267.
 */
export const shearCovariance = (t: number, shearPerS: number, Kx: number, Ky: number): { sxx: number; sxy: number; syy: number } => ({
  sxx: 2 * Kx * t + (2 / 3) * shearPerS * shearPerS * Ky * t ** 3,
  sxy: shearPerS * Ky * t * t,
  syy: 2 * Ky * t,
});
