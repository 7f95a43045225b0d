/** One-dimensional steps of a Wiener process and what happens at walls; SI. */

/** Puts a position back between two walls by reflection, as often as it takes. */
export function fold(x: number, low: number, high: number): number {
  const width = high - low;
  const turned = Math.abs((x - low) % (2 * width));
  return low + (turned > width ? 2 * width - turned : turned);
}

/** A diffusivity along a line, its slope, and the share by which the section grows: (1/A) dA/dx. */
export type LineDiffusivity = {
  /** m2/s */
  at(x: number): number;
  /** dK/dx, m/s */
  slope(x: number): number;
  /** (1/A) dA/dx, 1/m; leave out where the section is constant. */
  sectionGrowth?(x: number): number;
};

/**
 * One step of dC/dt = (1/A) d/dx (A K dC/dx) for a particle: drift (1/A) d(AK)/dx, without which particles gather where
 * K is small, and the diffusivity taken half a drift step ahead. Needs dtS well below 1 / |K''|.
 * Source: Visser 1997, Mar. Ecol. Prog. Ser. 158: 275, for constant A; the Ito reading of the flux form for A(x).
 */
export function diffusiveStep(x: number, diffusivity: LineDiffusivity, dtS: number, normal: number): number {
  const slope = diffusivity.slope(x);
  const growth = diffusivity.sectionGrowth ? diffusivity.sectionGrowth(x) * diffusivity.at(x) : 0;
  const ahead = Math.max(0, diffusivity.at(x + 0.5 * slope * dtS));
  return x + (slope + growth) * dtS + normal * Math.sqrt(2 * ahead * dtS);
}
