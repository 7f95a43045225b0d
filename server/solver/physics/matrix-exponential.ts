/** A velocity gradient without divergence: du/dx, du/dy, dv/dx, 1/s; dv/dy = -du/dx. */
export type Gradient = { readonly ux: number; readonly uy: number; readonly vx: number };

/**
 * e^(G a) for a 2 x 2 matrix without trace: G^2 = d I with d = ux^2 + uy vx, so e^(G a) = C I + S G with C, S = cosh, sinh/q
 * where d = q^2 > 0 (strain), cos, sin/q where d < 0 (rotation), 1, a where d = 0 (simple shear). Exact; `out` is row by row.
 */
export function exponential({ ux, uy, vx }: Gradient, ageS: number, out: Float64Array): void {
  const d = ux * ux + uy * vx;
  const q = Math.sqrt(Math.abs(d));
  const small = q * Math.abs(ageS) < 1e-8;
  const c = small ? 1 : d > 0 ? Math.cosh(q * ageS) : Math.cos(q * ageS);
  const s = small ? ageS : d > 0 ? Math.sinh(q * ageS) / q : Math.sin(q * ageS) / q;
  out[0] = c + s * ux;
  out[1] = s * uy;
  out[2] = s * vx;
  out[3] = c - s * ux;
}

/** Rate of strain left after rotation, 1/s: growth of the exponential; 0 in simple shear and rotation. */
export const growthRatePerS = ({ ux, uy, vx }: Gradient): number => Math.sqrt(Math.max(0, ux * ux + uy * vx));
