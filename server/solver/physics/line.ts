/**
 * Exact solutions of the 1-D advection-diffusion equation with first-order loss,
 *   dC/dt + U dC/dx = D d2C/dx2 - k C,
 * for uniform U (m/s) and D (m2/s), k in 1/s, x in m, t in s. No allocation, no iteration beyond the error functions.
 */
import { erf, erfc, erfcx } from '../math/erf';

/**
 * Concentration of an instantaneous release spread as a normal curve, per unit of mass over cross-section:
 * exp(-(x - centre)^2 / 2 variance) / sqrt(2 pi variance), 1/m.
 * Source: Fischer, List, Koh, Imberger & Brooks 1979, Mixing in Inland and Coastal Waters, section 2.3.
 */
export const normalDensity = (x: number, centre: number, variance: number): number =>
  Math.exp(-((x - centre) ** 2) / (2 * variance)) / Math.sqrt(2 * Math.PI * variance);

/** The same for a start spread evenly over `length` m; `spread` is 2 D t. Source: Crank 1975, Mathematics of Diffusion, eq. 2.15. */
export function topHatDensity(x: number, centre: number, length: number, spread: number): number {
  const root = Math.sqrt(2 * spread);
  return (erf((x - centre + length / 2) / root) - erf((x - centre - length / 2) / root)) / (2 * length);
}

/**
 * J(x, t) = integral_0^t exp(-k a) (4 pi D a)^(-1/2) exp(-(x - U a)^2 / 4 D a) da, s/m: concentration per unit rate
 * over cross-section, t seconds after a constant release at x = 0 began. Zero for t <= 0; exact upstream as well.
 * Written with the scaled error function so that nothing overflows.
 * Source: closed form of Carslaw & Jaeger 1959, Conduction of Heat in Solids, section 10.5, with loss.
 */
export function steadyReleaseResponse(x: number, t: number, U: number, D: number, k: number): number {
  if (t <= 0) return 0;
  const gamma = Math.sqrt(U * U + 4 * D * k);
  const distance = Math.abs(x);
  const root = Math.sqrt(4 * D * t);
  const z1 = (distance - gamma * t) / root;
  const z2 = (distance + gamma * t) / root;
  const exponent = (x * U - distance * gamma) / (2 * D);
  // exp(X gamma / D) erfc(z2) = exp(-z1^2) erfcx(z2), because z2^2 - z1^2 = X gamma / D.
  return (Math.exp(exponent) / (2 * gamma)) * (erfc(z1) - Math.exp(-z1 * z1) * erfcx(z2));
}

/** Limit of the above for a release that never ends: exp((xU - |x| G)/2D)/G, s/m. */
export function steadyLimit(x: number, U: number, D: number, k: number): number {
  const gamma = Math.sqrt(U * U + 4 * D * k);
  return Math.exp((x * U - Math.abs(x) * gamma) / (2 * D)) / gamma;
}

/**
 * C/C0 downstream of an inlet held at C0 from t = 0. Source: Ogata & Banks 1961, USGS Professional Paper 411-A;
 * with loss van Genuchten & Alves 1982, USDA Technical Bulletin 1661.
 */
export function heldInlet(x: number, t: number, U: number, D: number, k: number): number {
  const gamma = Math.sqrt(U * U + 4 * D * k);
  const root = Math.sqrt(4 * D * t);
  const z1 = (x - gamma * t) / root;
  const z2 = (x + gamma * t) / root;
  return 0.5 * Math.exp((x * (U - gamma)) / (2 * D)) * (erfc(z1) + Math.exp(-z1 * z1) * erfcx(z2));
}

/** Time of the peak at a fixed place below an instantaneous release, s: d/dt of the normal solution set to zero. */
export function peakTimeAtStation(x: number, U: number, D: number, k: number): number {
  const a = U * U + 4 * D * k;
  return (-D + Math.sqrt(D * D + a * x * x)) / a;
}

/** The same for the flux (first-passage) concentration, s. */
export function fluxPeakTimeAtStation(x: number, U: number, D: number, k: number): number {
  const a = U * U + 4 * D * k;
  return (-3 * D + Math.sqrt(9 * D * D + a * x * x)) / a;
}

/** First-passage density of a drifting random walk, 1/s. Source: Schrodinger 1915; Folks & Chhikara 1978, J. R. Stat. Soc. B 40: 263. */
export const passageDensity = (L: number, t: number, U: number, D: number): number =>
  t <= 0 ? 0 : (L / Math.sqrt(4 * Math.PI * D * t ** 3)) * Math.exp(-((L - U * t) ** 2) / (4 * D * t));

/** Share that has passed L by time t; the form with the scaled error function never overflows. */
export function passedShare(L: number, t: number, U: number, D: number): number {
  if (t <= 0) return 0;
  const root = Math.sqrt(4 * D * t);
  const z1 = (L - U * t) / root;
  return 0.5 * erfc(z1) + 0.5 * Math.exp(-z1 * z1) * erfcx((L + U * t) / root);
}

/** Share of a release that passes L at all under first-order loss: exp((U L / 2 D)(1 - sqrt(1 + 4 k D / U^2))). */
export const recoveredShare = (L: number, U: number, D: number, k: number): number =>
  Math.exp(((U * L) / (2 * D)) * (1 - Math.sqrt(1 + (4 * k * D) / (U * U))));

export type PassageMoments = { meanS: number; varianceS2: number; thirdS3: number };

/** Cumulants of the passage through a chain of independent reaches: they add (transforms multiply). */
export function chainMoments(reaches: readonly { lengthM: number; speedMps: number; dispersionM2s: number }[]): PassageMoments {
  const sum: PassageMoments = { meanS: 0, varianceS2: 0, thirdS3: 0 };
  for (const { lengthM: L, speedMps: U, dispersionM2s: D } of reaches) {
    sum.meanS += L / U;
    sum.varianceS2 += (2 * D * L) / U ** 3;
    sum.thirdS3 += (12 * D * D * L) / U ** 5;
  }
  return sum;
}
