/**
 * Error functions in double precision, relative error below 1e-13 for erf, erfc (until it underflows) and erfcx.
 *   erf(z) = 2/sqrt(pi) * integral_0^z exp(-s^2) ds, erfc = 1 - erf, erfcx(z) = exp(z^2) erfc(z).
 * Below `SWITCH` the series with positive terms, above it the continued fraction of Laplace.
 * Source: Abramowitz & Stegun 1964, Handbook of Mathematical Functions, 7.1.6 and 7.1.14.
 */
const SQRT_PI = Math.sqrt(Math.PI);
const SWITCH = 1.75;

/** Series 7.1.6; z >= 0 and small. */
function erfSeries(z: number): number {
  const z2 = z * z;
  let term = z;
  let sum = z;
  for (let n = 1; n < 60; n++) {
    term *= (2 * z2) / (2 * n + 1);
    sum += term;
    if (term < 1e-17 * sum) break;
  }
  return (2 / SQRT_PI) * Math.exp(-z2) * sum;
}

/** Continued fraction 7.1.14 from the tail up; the number of levels reaches 1e-14 on each range. */
function erfcxFraction(z: number): number {
  const levels = z > 8 ? 12 : z > 4 ? 24 : z > 2.5 ? 60 : 120;
  let tail = z;
  for (let n = levels; n >= 1; n--) tail = z + n / 2 / tail;
  return 1 / (SQRT_PI * tail);
}

export function erf(z: number): number {
  if (z < 0) return -erf(-z);
  return z < SWITCH ? erfSeries(z) : 1 - erfcxFraction(z) * Math.exp(-z * z);
}

export function erfc(z: number): number {
  if (z < 0) return 2 - erfc(-z);
  return z < SWITCH ? 1 - erfSeries(z) : erfcxFraction(z) * Math.exp(-z * z);
}

/** Grows as 2 exp(z^2) for negative z: overflows below -26. */
export function erfcx(z: number): number {
  if (z < 0) return 2 * Math.exp(z * z) - erfcx(-z);
  return z < SWITCH ? (1 - erfSeries(z)) * Math.exp(z * z) : erfcxFraction(z);
}
