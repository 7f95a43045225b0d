/**
 * Factors of the symmetric tridiagonal matrix of one implicit diffusion step along a line of cells,
 * (1 + a_k + a_(k+1)) x_k - a_k x_(k-1) - a_(k+1) x_(k+1) = b_k, with a_k >= 0 the number of the face between k - 1 and k.
 * Then z_k = b_k + q_(k-1) z_(k-1) going up and x_k = w_k z_k + q_k x_(k+1) coming down solve it: w = 1/pivot, q = a/pivot.
 * Stable without pivoting, for the matrix is diagonally dominant. Exact to rounding.
 * Source: the Thomas algorithm, Press et al. 2007, Numerical Recipes, section 2.4.
 */
export function eliminationFactors(length: number, face: (k: number) => number): { q: Float64Array; w: Float64Array } {
  const q = new Float64Array(length);
  const w = new Float64Array(length);
  let below = 0;
  let carried = 0;
  for (let k = 0; k < length; k++) {
    const above = k + 1 < length ? face(k + 1) : 0;
    w[k] = 1 / (1 + below + above - below * carried);
    q[k] = above * w[k]!;
    carried = q[k]!;
    below = above;
  }
  return { q, w };
}
