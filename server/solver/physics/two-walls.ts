/**
 * Spreading between two walls that let nothing through, on the unit interval.
 *   tau = variance / (2 width^2) = K t / width^2.
 * Density of a source at y0 relative to the even spread (mean 1): by mirror images where tau is small, by the cosine
 * series where it is large. Both are exact and equal (Jacobi's theta identity, Poisson summation).
 * Source: Fischer et al. 1979, section 5.1.3; Carslaw & Jaeger 1959, section 10.5.
 */

/** Below this the images need three terms or fewer for 1e-10, above it the cosines do. */
export const THETA_SWITCH = 0.16;

/** Images: never loses relative accuracy in the tail. */
export function wallsByImages(y: number, y0: number, tau: number): number {
  const scale = 1 / (4 * tau);
  let sum = 0;
  // exp(-37) = 1e-16: images farther than sqrt(37 * 4 tau) cannot be seen.
  const reach = Math.ceil(0.5 + Math.sqrt(37 * 4 * tau) / 2);
  for (let n = -reach; n <= reach; n++) {
    const a = y - y0 - 2 * n;
    const b = y + y0 - 2 * n;
    sum += Math.exp(-a * a * scale) + Math.exp(-b * b * scale);
  }
  return sum / Math.sqrt(4 * Math.PI * tau);
}

/** Cosine series: as many terms as exp(-m^2 pi^2 tau) > 1e-17 asks for. */
export function wallsByCosines(y: number, y0: number, tau: number): number {
  const terms = Math.ceil(Math.sqrt(39 / (Math.PI * Math.PI * tau)));
  let sum = 1;
  for (let m = 1; m <= terms; m++) sum += 2 * Math.exp(-m * m * Math.PI * Math.PI * tau) * Math.cos(m * Math.PI * y0) * Math.cos(m * Math.PI * y);
  return sum;
}

export const betweenWalls = (y: number, y0: number, tau: number): number => (tau < THETA_SWITCH ? wallsByImages(y, y0, tau) : wallsByCosines(y, y0, tau));
