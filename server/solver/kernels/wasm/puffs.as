/**
 * Sums of rotated normal clouds on a grid, by "table times geometric".
 * A cut along a row through a cloud is always the same curve T(k) = exp(-a k^2), a = 1 / (2 row variance), moved by a
 * shift s of at most half a node: exp(-a (k - s)^2) = exp(-a s^2) T(k) rho^k with rho = exp(2 a s). So a node costs two
 * products and a sum, and a row two exponentials and a square root, done for two rows at once. Row limits are those of
 * the ellipse at exp(-r^2/2) = 1e-7, widened to whole vectors; what lies beyond them inside a vector is exact too.
 *
 * Memory. A grid starts on a 16-byte boundary and has rows of `stride` nodes, a multiple of 4 (f32) or 2 (f64) not below
 * nx. A puff is six f64 in units of the grid: x, y (node numbers), sxx, sxy, syy (nodes squared), peak value.
 * `table` points at the middle (k = 0) of a scratch table with room for `row limit + 8` entries on each side.
 */
import { exp2lanes, exp2lanesShort } from './exp';

/** -2 ln(1e-7): squared distance of the cut in standard deviations. */
const CUT2: f64 = 32.23619130191664;

/** T(k) for |k| <= last, f32. Four f64 chains T(k+4) = T(k) R(k), R(k+4) = R(k) S; relative error (last/4)^2 2^-54. */
function fillTable32(table: usize, a: f64, last: i32): void {
  const minusA = f64x2.splat(-a);
  const k01 = f64x2(0.0, 1.0);
  const k23 = f64x2(2.0, 3.0);
  let t01 = exp2lanes(f64x2.mul(minusA, f64x2.mul(k01, k01)));
  let t23 = exp2lanes(f64x2.mul(minusA, f64x2.mul(k23, k23)));
  let r01 = exp2lanes(f64x2.mul(minusA, f64x2(16.0, 24.0)));
  let r23 = exp2lanes(f64x2.mul(minusA, f64x2(32.0, 40.0)));
  const s = exp2lanes(f64x2.splat(-32.0 * a));
  for (let k = 0; k <= last; k += 4) {
    const four = v128.shuffle<f32>(f32x4.demote_f64x2_zero(t01), f32x4.demote_f64x2_zero(t23), 0, 1, 4, 5);
    v128.store(table + ((<usize>k) << 2), four);
    v128.store(table - ((<usize>(k + 3)) << 2), v128.shuffle<f32>(four, four, 3, 2, 1, 0));
    t01 = f64x2.mul(t01, r01);
    t23 = f64x2.mul(t23, r23);
    r01 = f64x2.mul(r01, s);
    r23 = f64x2.mul(r23, s);
  }
}

/** T(k) for |k| <= last, f64, an exponential for each: exact to rounding. */
function fillTable64(table: usize, a: f64, last: i32): void {
  const minusA = f64x2.splat(-a);
  for (let k = 0; k <= last; k += 2) {
    const at = f64x2(<f64>k, <f64>(k + 1));
    const two = exp2lanes(f64x2.mul(minusA, f64x2.mul(at, at)));
    v128.store(table + ((<usize>k) << 3), two);
    v128.store(table - ((<usize>(k + 1)) << 3), v128.shuffle<f64>(two, two, 1, 0));
  }
}

// @ts-ignore: decorator
@inline
function spread(v: v128, lane: i32): v128 {
  return lane === 0 ? v128.shuffle<f32>(v, v, 0, 0, 0, 0) : v128.shuffle<f32>(v, v, 1, 1, 1, 1);
}

/** Adds one row from node `out` on, `vectors` of four nodes. The vectors hold the factor of the first node, rho, rho^2, rho^4, ... in `lane`, 0 or 1. */
// @ts-ignore: decorator
@inline
function addRow32(out: usize, table: usize, vectors: i32, lane: i32, first: v128, rho: v128, rho2: v128, rho4: v128, rho8: v128, rho16: v128): void {
  const r1 = spread(rho, lane);
  const r2 = spread(rho2, lane);
  const r4 = spread(rho4, lane);
  const r8 = spread(rho8, lane);
  const step = spread(rho16, lane);
  const f = spread(first, lane);
  const fr = f32x4.mul(f, r1);
  const low = v128.shuffle<f32>(f, fr, 0, 4, 1, 5); // f, f rho, f, f rho
  let g0 = v128.shuffle<f32>(low, f32x4.mul(low, r2), 0, 1, 4, 5);
  let g1 = f32x4.mul(g0, r4);
  let g2 = f32x4.mul(g0, r8);
  let g3 = f32x4.mul(g1, r8);
  const end4 = out + ((<usize>(vectors >> 2)) << 6);
  while (out < end4) {
    v128.store(out, f32x4.add(v128.load(out), f32x4.mul(g0, v128.load(table))));
    v128.store(out, f32x4.add(v128.load(out, 16), f32x4.mul(g1, v128.load(table, 16))), 16);
    v128.store(out, f32x4.add(v128.load(out, 32), f32x4.mul(g2, v128.load(table, 32))), 32);
    v128.store(out, f32x4.add(v128.load(out, 48), f32x4.mul(g3, v128.load(table, 48))), 48);
    g0 = f32x4.mul(g0, step);
    g1 = f32x4.mul(g1, step);
    g2 = f32x4.mul(g2, step);
    g3 = f32x4.mul(g3, step);
    out += 64;
    table += 64;
  }
  const rest = vectors & 3;
  if (rest > 0) {
    v128.store(out, f32x4.add(v128.load(out), f32x4.mul(g0, v128.load(table))));
    if (rest > 1) {
      v128.store(out, f32x4.add(v128.load(out, 16), f32x4.mul(g1, v128.load(table, 16))), 16);
      if (rest > 2) v128.store(out, f32x4.add(v128.load(out, 32), f32x4.mul(g2, v128.load(table, 32))), 32);
    }
  }
}

// @ts-ignore: decorator
@inline
function addRow64(out: usize, table: usize, vectors: i32, first: f64, rho: f64, rho2: f64, rho4: f64, rho8: f64): void {
  let g0 = f64x2.mul(f64x2.splat(first), f64x2(1.0, rho));
  const r2 = f64x2.splat(rho2);
  const r4 = f64x2.splat(rho4);
  let g1 = f64x2.mul(g0, r2);
  let g2 = f64x2.mul(g0, r4);
  let g3 = f64x2.mul(g1, r4);
  const step = f64x2.splat(rho8);
  const end4 = out + ((<usize>(vectors >> 2)) << 6);
  while (out < end4) {
    v128.store(out, f64x2.add(v128.load(out), f64x2.mul(g0, v128.load(table))));
    v128.store(out, f64x2.add(v128.load(out, 16), f64x2.mul(g1, v128.load(table, 16))), 16);
    v128.store(out, f64x2.add(v128.load(out, 32), f64x2.mul(g2, v128.load(table, 32))), 32);
    v128.store(out, f64x2.add(v128.load(out, 48), f64x2.mul(g3, v128.load(table, 48))), 48);
    g0 = f64x2.mul(g0, step);
    g1 = f64x2.mul(g1, step);
    g2 = f64x2.mul(g2, step);
    g3 = f64x2.mul(g3, step);
    out += 64;
    table += 64;
  }
  const rest = vectors & 3;
  if (rest > 0) {
    v128.store(out, f64x2.add(v128.load(out), f64x2.mul(g0, v128.load(table))));
    if (rest > 1) {
      v128.store(out, f64x2.add(v128.load(out, 16), f64x2.mul(g1, v128.load(table, 16))), 16);
      if (rest > 2) v128.store(out, f64x2.add(v128.load(out, 32), f64x2.mul(g2, v128.load(table, 32))), 32);
    }
  }
}

/** One puff on a grid; LANES is 4 (f32) or 2 (f64). */
// @ts-ignore: decorator
@inline
function addPuff(lanes: i32, grid: usize, stride: i32, nx: i32, ny: i32, puff: usize, table: usize): void {
  const x = load<f64>(puff);
  const y = load<f64>(puff, 8);
  const sxy = load<f64>(puff, 24);
  const syy = load<f64>(puff, 32);
  const peak = load<f64>(puff, 40);
  const slope = sxy / syy;
  const variance = load<f64>(puff, 16) - sxy * slope;
  const a = 0.5 / variance;
  const widest = sqrt(CUT2 * variance);
  const reach = sqrt(CUT2 * syy);
  const j0 = <i32>max(0.0, Math.ceil(y - reach));
  const j1 = <i32>min(<f64>(ny - 1), Math.floor(y + reach));
  if (j0 > j1) return;
  const last = <i32>Math.ceil(widest) + 6;
  if (lanes === 4) fillTable32(table, a, last);
  else fillTable64(table, a, last);
  const shiftNode: i32 = lanes === 4 ? 2 : 3;
  const vCut = f64x2.splat(CUT2);
  const vVariance = f64x2.splat(variance);
  const vInverse = f64x2.splat(1.0 / syy);
  const vSlope = f64x2.splat(slope);
  const vA = f64x2.splat(a);
  const vPeak = f64x2.splat(peak);
  const vX = f64x2.splat(x);
  const vLast = f64x2.splat(<f64>(nx - 1));
  const vLanes = f64x2.splat(<f64>lanes);
  const vPerLane = f64x2.splat(lanes === 4 ? 0.25 : 0.5);
  const zero = f64x2.splat(0.0);
  for (let j = j0; j <= j1; j += 2) {
    const dy = f64x2(<f64>j - y, <f64>j + 1.0 - y);
    const down = f64x2.mul(f64x2.mul(dy, dy), vInverse);
    const centre = f64x2.add(vX, f64x2.mul(dy, vSlope));
    const half = f64x2.sqrt(f64x2.mul(f64x2.pmax(f64x2.sub(vCut, down), zero), vVariance));
    // Limits are brought inside the grid, and a row that misses it altogether gets its last below its first.
    const from = f64x2.pmax(f64x2.ceil(f64x2.sub(centre, half)), zero);
    const to = f64x2.pmin(f64x2.floor(f64x2.add(centre, half)), vLast);
    const block = f64x2.floor(f64x2.mul(from, vPerLane));
    const fromBlock = f64x2.mul(block, vLanes);
    const middle = f64x2.nearest(centre);
    const s = f64x2.sub(centre, middle);
    const k0 = f64x2.sub(fromBlock, middle);
    const as = f64x2.mul(s, vA);
    // -down/2 - a s^2 + 2 a s k0 = -down/2 + a s (2 k0 - s)
    const exponent = f64x2.sub(f64x2.mul(as, f64x2.sub(f64x2.add(k0, k0), s)), f64x2.mul(down, f64x2.splat(0.5)));
    // Counts below one mark a row that misses the grid.
    const counts = i32x4.trunc_sat_f64x2_s_zero(v128.andnot(f64x2.add(f64x2.sub(f64x2.floor(f64x2.mul(to, vPerLane)), block), f64x2.splat(1.0)), f64x2.lt(to, from)));
    const starts = i32x4.trunc_sat_f64x2_s_zero(fromBlock);
    const offsets = i32x4.trunc_sat_f64x2_s_zero(k0);
    const count0 = i32x4.extract_lane(counts, 0);
    const count1 = j < j1 ? i32x4.extract_lane(counts, 1) : 0;
    const row = grid + ((<usize>(j * stride)) << shiftNode);
    const out0 = row + ((<usize>i32x4.extract_lane(starts, 0)) << shiftNode);
    const out1 = row + ((<usize>(stride + i32x4.extract_lane(starts, 1))) << shiftNode);
    const table0 = table + ((<usize>i32x4.extract_lane(offsets, 0)) << shiftNode);
    const table1 = table + ((<usize>i32x4.extract_lane(offsets, 1)) << shiftNode);
    if (lanes === 4) {
      const first = f64x2.mul(exp2lanesShort(exponent), vPeak);
      const rho = exp2lanesShort(f64x2.add(as, as));
      const rho2 = f64x2.mul(rho, rho);
      const rho4 = f64x2.mul(rho2, rho2);
      const rho8 = f64x2.mul(rho4, rho4);
      const f = f32x4.demote_f64x2_zero(first);
      const q1 = f32x4.demote_f64x2_zero(rho);
      const q2 = f32x4.demote_f64x2_zero(rho2);
      const q4 = f32x4.demote_f64x2_zero(rho4);
      const q8 = f32x4.demote_f64x2_zero(rho8);
      const q16 = f32x4.demote_f64x2_zero(f64x2.mul(rho8, rho8));
      if (count0 > 0) addRow32(out0, table0, count0, 0, f, q1, q2, q4, q8, q16);
      if (count1 > 0) addRow32(out1, table1, count1, 1, f, q1, q2, q4, q8, q16);
    } else {
      const first = f64x2.mul(exp2lanes(exponent), vPeak);
      const rho = exp2lanes(f64x2.add(as, as));
      const rho2 = f64x2.mul(rho, rho);
      const rho4 = f64x2.mul(rho2, rho2);
      const rho8 = f64x2.mul(rho4, rho4);
      if (count0 > 0) addRow64(out0, table0, count0, f64x2.extract_lane(first, 0), f64x2.extract_lane(rho, 0), f64x2.extract_lane(rho2, 0), f64x2.extract_lane(rho4, 0), f64x2.extract_lane(rho8, 0));
      if (count1 > 0) addRow64(out1, table1, count1, f64x2.extract_lane(first, 1), f64x2.extract_lane(rho, 1), f64x2.extract_lane(rho2, 1), f64x2.extract_lane(rho4, 1), f64x2.extract_lane(rho8, 1));
    }
  }
}

export function add32(grid: usize, stride: i32, nx: i32, ny: i32, puffs: usize, count: i32, table: usize): void {
  for (let p = 0; p < count; p++) addPuff(4, grid, stride, nx, ny, puffs + <usize>(p * 48), table);
}

export function add64(grid: usize, stride: i32, nx: i32, ny: i32, puffs: usize, count: i32, table: usize): void {
  for (let p = 0; p < count; p++) addPuff(2, grid, stride, nx, ny, puffs + <usize>(p * 48), table);
}

/** Midpoint between nodes 3 and 4 of eight: (-5, 49, -245, 1225, 1225, -245, 49, -5) / 2048, exact for polynomials of degree 7. */
// @ts-ignore: decorator
@inline
function midpoint(at: usize, step: usize, c3: v128): v128 {
  const near = f32x4.mul(f32x4.splat(1225.0 / 2048.0), f32x4.add(c3, v128.load(at + step)));
  const second = f32x4.mul(f32x4.splat(-245.0 / 2048.0), f32x4.add(v128.load(at - step), v128.load(at + 2 * step)));
  const third = f32x4.mul(f32x4.splat(49.0 / 2048.0), f32x4.add(v128.load(at - 2 * step), v128.load(at + 3 * step)));
  const far = f32x4.mul(f32x4.splat(-5.0 / 2048.0), f32x4.add(v128.load(at - 3 * step), v128.load(at + 4 * step)));
  return f32x4.add(f32x4.add(near, second), f32x4.add(third, far));
}

/**
 * Adds a grid of twice the spacing along x to one with the same rows. Memory node c of a coarse row lies on memory node
 * 2 (c - shift) of the fine row. Rows rowFrom..rowTo and fine nodes from..to, widened to whole eights.
 */
export function refineX(fine: usize, fineStride: i32, coarse: usize, coarseStride: i32, shift: i32, rowFrom: i32, rowTo: i32, from: i32, to: i32): void {
  const from8 = from & ~7;
  for (let j = rowFrom; j <= rowTo; j++) {
    let out = fine + ((<usize>(j * fineStride + from8)) << 2);
    const end = fine + ((<usize>(j * fineStride + to)) << 2);
    let at = coarse + ((<usize>(j * coarseStride + (from8 >> 1) + shift)) << 2);
    while (out <= end) {
      const even = v128.load(at);
      const odd = midpoint(at, 4, even);
      v128.store(out, f32x4.add(v128.load(out), v128.shuffle<f32>(even, odd, 0, 4, 1, 5)));
      v128.store(out, f32x4.add(v128.load(out, 16), v128.shuffle<f32>(even, odd, 2, 6, 3, 7)), 16);
      out += 32;
      at += 16;
    }
  }
}

/** The same along y: both grids have the same nodes in a row; coarse memory row c lies on fine memory row 2 (c - shift). */
export function refineY(fine: usize, coarse: usize, stride: i32, shift: i32, rowFrom: i32, rowTo: i32, from: i32, to: i32): void {
  const start = from & ~3;
  const step = (<usize>stride) << 2;
  for (let j = rowFrom & ~1; j <= rowTo; j += 2) {
    let out = fine + ((<usize>(j * stride + start)) << 2);
    const end = fine + ((<usize>(j * stride + to)) << 2);
    let at = coarse + ((<usize>(((j >> 1) + shift) * stride + start)) << 2);
    while (out <= end) {
      const even = v128.load(at);
      v128.store(out, f32x4.add(v128.load(out), even));
      v128.store(out + step, f32x4.add(v128.load(out + step), midpoint(at, step, even)));
      out += 16;
      at += 16;
    }
  }
}
