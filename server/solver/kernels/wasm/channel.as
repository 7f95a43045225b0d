/**
 * One step of a channel of equal cells along the water and tubes across it, at Courant number 1: the water moves on by one
 * cell, which is a move of the ring's start and costs nothing; then dispersion along each tube (implicit, factors made
 * beforehand and shared by the tubes), exchange between neighbouring tubes and first-order loss.
 * The tubes of a cell lie side by side, so that each is a lane of its own in the elimination and its chain hides behind the others.
 *
 * Memory, f64: ring rows of `stride` bytes (tubes rounded up to 4, with zeros), exchange rows likewise, the share of tube k
 * and k + 1 at k and 0 at the last tube; q and w one value a cell; `row` a scratch row with one vector of zeros behind it.
 */

// @ts-ignore: decorator
@inline
function shift1(left: v128, right: v128): v128 {
  return v128.shuffle<f64>(left, right, 1, 2);
}

/** `first` is the ring row of cell 0; `rows` the ring, `end` its end. */
export function step(rows: usize, end: usize, first: usize, cells: i32, stride: usize, q: usize, w: usize, exchange: usize, row: usize, survivalOf: f64): void {
  // Forward: z_i = b_i + q_(i-1) z_(i-1), in place.
  let at = first;
  let before = row;
  memory.fill(row, 0, stride + 16);
  let qAt = q - 8;
  for (let i = 0; i < cells; i++) {
    const factor = i === 0 ? f64x2.splat(0.0) : v128.load_splat<f64>(qAt);
    for (let k: usize = 0; k < stride; k += 32) {
      const z0 = f64x2.add(v128.load(at + k), f64x2.mul(factor, v128.load(before + k)));
      const z1 = f64x2.add(v128.load(at + k, 16), f64x2.mul(factor, v128.load(before + k, 16)));
      v128.store(at + k, z0);
      v128.store(at + k, z1, 16);
    }
    before = at;
    at += stride;
    if (at === end) at = rows;
    qAt += 8;
  }
  // Back: x_i = w_i z_i + q_i x_(i+1), then x_k + e_k (x_(k+1) - x_k) - e_(k-1) (x_k - x_(k-1)), times the survival.
  const survival = f64x2.splat(survivalOf);
  at = before;
  qAt = q + ((<usize>(cells - 1)) << 3);
  let wAt = w + ((<usize>(cells - 1)) << 3);
  let eAt = exchange + <usize>(cells - 1) * stride;
  for (let i = 0; i < cells; i++) {
    const factor = v128.load_splat<f64>(qAt);
    const scale = v128.load_splat<f64>(wAt);
    let x = f64x2.add(f64x2.mul(scale, v128.load(at)), f64x2.mul(factor, v128.load(row)));
    v128.store(row, x);
    let fluxBefore = f64x2.splat(0.0);
    for (let k: usize = 0; k < stride; k += 32) {
      const middle = f64x2.add(f64x2.mul(scale, v128.load(at + k, 16)), f64x2.mul(factor, v128.load(row + k, 16)));
      v128.store(row + k, middle, 16);
      const flux0 = f64x2.mul(v128.load(eAt + k), f64x2.sub(shift1(x, middle), x));
      // Beyond the last tube: what is read belongs to another row, and its share of exchange is 0.
      const next = f64x2.add(f64x2.mul(scale, v128.load(at + k, 32)), f64x2.mul(factor, v128.load(row + k, 32)));
      if (k + 32 < stride) v128.store(row + k, next, 32);
      const flux1 = f64x2.mul(v128.load(eAt + k, 16), f64x2.sub(shift1(middle, next), middle));
      v128.store(at + k, f64x2.mul(survival, f64x2.sub(f64x2.add(x, flux0), shift1(fluxBefore, flux0))));
      v128.store(at + k, f64x2.mul(survival, f64x2.sub(f64x2.add(middle, flux1), shift1(flux0, flux1))), 16);
      x = next;
      fluxBefore = flux1;
    }
    at = at === rows ? end - stride : at - stride;
    qAt -= 8;
    wAt -= 8;
    eAt -= stride;
  }
}
