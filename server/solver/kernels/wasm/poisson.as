/**
 * Solves sum over the faces of k (p - p_neighbour) = b on a masked grid of cells by conjugate gradients in f64, with one
 * V-cycle in f32 as preconditioner: Chebyshev smoothing of degree 3 before and after, linear interpolation
 * between coarse cells that are open and its transpose, coarse faces with half the sum of the two fine ones. The smoother is a polynomial of the
 * diagonally scaled matrix, the same before and after, so that the cycle is symmetric as the method needs.
 * A face to the outside of the grid leads to p = 0. Closed faces have k = 0; where all faces of a cell are closed p is 0.
 *
 * Memory. A grid's address is that of cell (0, 0), on a 16-byte boundary (f64 grids: 32); cell (j, i) stands `stride`
 * cells a row and i cells on. One row of margin below and above and four cells before and behind each row are 0.
 * kx at i is the right face of cell i (left outer face at -1), ky the upper face.
 * A level is 12 i32: nx, ny, stride in bytes, kx, ky, diagonal, 1 / diagonal (0 where closed), x, y (scratch), b, share
 * (1 / the sum of the weights of open coarse cells in the interpolation at this cell; 0 where closed).
 */

// @ts-ignore: decorator
@inline
function field(level: usize, index: i32): i32 {
  return load<i32>(level + ((<usize>index) << 2));
}

const LEVEL_BYTES: usize = 48;

/** inverse (b + sum of k x at the neighbours) - x: the scaled residual of four cells. */
// @ts-ignore: decorator
@inline
function scaledResidual(x: usize, b: usize, inverse: usize, kx: usize, ky: usize, stride: usize, here: v128): v128 {
  const across = f32x4.add(f32x4.mul(v128.load(kx), v128.load(x, 4)), f32x4.mul(v128.load(kx - 4), v128.load(x - 4)));
  const along = f32x4.add(f32x4.mul(v128.load(ky), v128.load(x + stride)), f32x4.mul(v128.load(ky - stride), v128.load(x - stride)));
  return f32x4.sub(f32x4.mul(v128.load(inverse), f32x4.add(v128.load(b), f32x4.add(across, along))), here);
}

/** One row of a Chebyshev step: y = x + momentum (x - y) + gain r(x), y holding the iterate before x. */
function stepRow(x: usize, y: usize, b: usize, inverse: usize, kx: usize, ky: usize, stride: usize, width: usize, momentum: f32, gain: f32): void {
  const m = f32x4.splat(momentum);
  const g = f32x4.splat(gain);
  for (let i: usize = 0; i < width; i += 16) {
    const here = v128.load(x + i);
    const r = scaledResidual(x + i, b + i, inverse + i, kx + i, ky + i, stride, here);
    const moved = f32x4.add(here, f32x4.mul(m, f32x4.sub(here, v128.load(y + i))));
    v128.store(y + i, f32x4.add(moved, f32x4.mul(g, r)));
  }
}

/** The same where nothing went before: y = keep x + gain r(x). */
function firstStepRow(x: usize, y: usize, b: usize, inverse: usize, kx: usize, ky: usize, stride: usize, width: usize, keep: f32, gain: f32): void {
  const k = f32x4.splat(keep);
  const g = f32x4.splat(gain);
  for (let i: usize = 0; i < width; i += 16) {
    const here = v128.load(x + i);
    const r = scaledResidual(x + i, b + i, inverse + i, kx + i, ky + i, stride, here);
    v128.store(y + i, f32x4.add(f32x4.mul(k, here), f32x4.mul(g, r)));
  }
}

function scaleRow(y: usize, b: usize, inverse: usize, width: usize, gain: f32): void {
  const g = f32x4.splat(gain);
  for (let i: usize = 0; i < width; i += 16) v128.store(y + i, f32x4.mul(g, f32x4.mul(v128.load(b + i), v128.load(inverse + i))));
}

/** x = share times the residual of y. */
function residualRow(y: usize, x: usize, b: usize, diagonal: usize, inverse: usize, share: usize, kx: usize, ky: usize, stride: usize, width: usize): void {
  for (let i: usize = 0; i < width; i += 16) {
    const r = scaledResidual(y + i, b + i, inverse + i, kx + i, ky + i, stride, v128.load(y + i));
    v128.store(x + i, f32x4.mul(r, f32x4.mul(v128.load(diagonal + i), v128.load(share + i))));
  }
}

/** 1, 3, 3, 1 sixteenths of four rows. */
// @ts-ignore: decorator
@inline
function fourRows(at: usize, stride: usize): v128 {
  const inner = f32x4.add(v128.load(at), v128.load(at + stride));
  const outer = f32x4.add(v128.load(at - stride), v128.load(at + 2 * stride));
  return f32x4.add(f32x4.mul(f32x4.splat(3.0 / 16.0), inner), f32x4.mul(f32x4.splat(1.0 / 16.0), outer));
}

/** The weighed residual, standing in x, brought to the coarser level's b: the transpose of `prolong`. */
function restrict(fine: usize, coarse: usize): void {
  const width = ((<usize>field(coarse, 0)) + 3 >> 2) << 4;
  const rows = field(coarse, 1);
  const stride = <usize>field(fine, 2);
  const coarseStride = <usize>field(coarse, 2);
  let from = <usize>field(fine, 7);
  let out = <usize>field(coarse, 9);
  const three = f32x4.splat(3.0);
  for (let j = 0; j < rows; j++) {
    let before = fourRows(from - 16, stride);
    let left = fourRows(from, stride);
    for (let i: usize = 0; i < width; i += 16) {
      const at = from + 2 * i;
      const right = fourRows(at + 16, stride);
      const after = fourRows(at + 32, stride);
      const inner = f32x4.add(v128.shuffle<f32>(left, right, 0, 2, 4, 6), v128.shuffle<f32>(left, right, 1, 3, 5, 7));
      const below = v128.shuffle<f32>(v128.shuffle<f32>(before, left, 3, 5, 7, 7), right, 0, 1, 2, 5);
      const above = v128.shuffle<f32>(v128.shuffle<f32>(left, right, 2, 4, 6, 6), after, 0, 1, 2, 4);
      // Nodes 2i - 1, 2i, 2i + 1, 2i + 2 weigh 1, 3, 3, 1.
      v128.store(out + i, f32x4.add(f32x4.mul(three, inner), f32x4.add(below, above)));
      before = right;
      left = after;
    }
    from += 2 * stride;
    out += coarseStride;
  }
}

/** Adds a coarse correction to a row: linear interpolation between coarse cells, `share` making up for closed ones. */
function prolongRow(x: usize, share: usize, near: usize, far: usize, width: usize): void {
  const most = f32x4.splat(0.75);
  const rest = f32x4.splat(0.25);
  for (let i: usize = 0; i < width; i += 32) {
    const n = near + (i >> 1);
    const f = far + (i >> 1);
    const c = f32x4.add(f32x4.mul(most, v128.load(n)), f32x4.mul(rest, v128.load(f)));
    const cLeft = f32x4.add(f32x4.mul(most, v128.load(n - 4)), f32x4.mul(rest, v128.load(f - 4)));
    const cRight = f32x4.add(f32x4.mul(most, v128.load(n, 4)), f32x4.mul(rest, v128.load(f, 4)));
    const even = f32x4.add(f32x4.mul(most, c), f32x4.mul(rest, cLeft));
    const odd = f32x4.add(f32x4.mul(most, c), f32x4.mul(rest, cRight));
    v128.store(x + i, f32x4.add(v128.load(x + i), f32x4.mul(v128.load(share + i), v128.shuffle<f32>(even, odd, 0, 4, 1, 5))));
    v128.store(x + i, f32x4.add(v128.load(x + i, 16), f32x4.mul(v128.load(share + i, 16), v128.shuffle<f32>(even, odd, 2, 6, 3, 7))), 16);
  }
}

/** Chebyshev coefficients for eigenvalues between `low` and 2 of the scaled matrix: the first gain, then momentum and gain of each step. */
const coefficients = memory.data(64);

export function setSmoother(low: f64): void {
  const theta = 0.5 * (2.0 + low);
  const delta = 0.5 * (2.0 - low);
  const sigma = theta / delta;
  const rho0 = 1.0 / sigma;
  const rho1 = 1.0 / (2.0 * sigma - rho0);
  const rho2 = 1.0 / (2.0 * sigma - rho1);
  store<f32>(coefficients, <f32>(1.0 / theta));
  store<f32>(coefficients, <f32>(rho1 * rho0), 4);
  store<f32>(coefficients, <f32>(2.0 * rho1 / delta), 8);
  store<f32>(coefficients, <f32>(rho2 * rho1), 12);
  store<f32>(coefficients, <f32>(2.0 * rho2 / delta), 16);
}

/**
 * Three smoothing steps from 0 into y; then, unless the level is the coarsest, the weighed residual into x. Each step runs
 * one row behind the one before it, so that a row comes from memory once for all of them.
 */
function smoothDown(level: usize, withResidual: bool): void {
  const nx = <usize>field(level, 0);
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  const width = ((nx + 3) >> 2) << 4;
  const kx = <usize>field(level, 3);
  const ky = <usize>field(level, 4);
  const diagonal = <usize>field(level, 5);
  const inverse = <usize>field(level, 6);
  const x = <usize>field(level, 7);
  const y = <usize>field(level, 8);
  const b = <usize>field(level, 9);
  const share = <usize>field(level, 10);
  const gain0 = load<f32>(coefficients);
  const momentum1 = load<f32>(coefficients, 4);
  const gain1 = load<f32>(coefficients, 8);
  const momentum2 = load<f32>(coefficients, 12);
  const gain2 = load<f32>(coefficients, 16);
  for (let j = 0; j < ny + 3; j++) {
    const at = <usize>j * stride;
    if (j < ny) scaleRow(y + at, b + at, inverse + at, width, gain0);
    if (j >= 1 && j < ny + 1) {
      const o = at - stride;
      firstStepRow(y + o, x + o, b + o, inverse + o, kx + o, ky + o, stride, width, <f32>1.0 + momentum1, gain1);
    }
    if (j >= 2 && j < ny + 2) {
      const o = at - 2 * stride;
      stepRow(x + o, y + o, b + o, inverse + o, kx + o, ky + o, stride, width, momentum2, gain2);
    }
    if (j >= 3 && withResidual) {
      const o = at - 3 * stride;
      residualRow(y + o, x + o, b + o, diagonal + o, inverse + o, share + o, kx + o, ky + o, stride, width);
    }
  }
}

/** Adds the coarser level's correction (`coarse` 0: none) to y and takes three smoothing steps; the result stands in x. */
function smoothUp(level: usize, coarse: usize): void {
  const nx = <usize>field(level, 0);
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  const width = ((nx + 3) >> 2) << 4;
  const kx = <usize>field(level, 3);
  const ky = <usize>field(level, 4);
  const inverse = <usize>field(level, 6);
  const x = <usize>field(level, 7);
  const y = <usize>field(level, 8);
  const b = <usize>field(level, 9);
  const share = <usize>field(level, 10);
  const gain0 = load<f32>(coefficients);
  const momentum1 = load<f32>(coefficients, 4);
  const gain1 = load<f32>(coefficients, 8);
  const momentum2 = load<f32>(coefficients, 12);
  const gain2 = load<f32>(coefficients, 16);
  const coarseStride = coarse === 0 ? 0 : <usize>field(coarse, 2);
  const correction = coarse === 0 ? 0 : <usize>field(coarse, 7);
  for (let j = 0; j < ny + 3; j++) {
    const at = <usize>j * stride;
    if (j < ny && coarse !== 0) {
      const near = correction + <usize>(j >> 1) * coarseStride;
      prolongRow(y + at, share + at, near, (j & 1) === 0 ? near - coarseStride : near + coarseStride, ((nx + 7) >> 3) << 5);
    }
    if (j >= 1 && j < ny + 1) {
      const o = at - stride;
      firstStepRow(y + o, x + o, b + o, inverse + o, kx + o, ky + o, stride, width, 1.0, gain0);
    }
    if (j >= 2 && j < ny + 2) {
      const o = at - 2 * stride;
      stepRow(x + o, y + o, b + o, inverse + o, kx + o, ky + o, stride, width, momentum1, gain1);
    }
    if (j >= 3) {
      const o = at - 3 * stride;
      stepRow(y + o, x + o, b + o, inverse + o, kx + o, ky + o, stride, width, momentum2, gain2);
    }
  }
}

/** y = x, to go on smoothing from there. */
function copyBack(level: usize): void {
  const stride = <usize>field(level, 2);
  memory.copy(<usize>field(level, 8), <usize>field(level, 7), <usize>field(level, 1) * stride - 32);
}

/** One V-cycle from 0 on the finest level's b; the result stands in its x. */
function cycle(levels: usize, count: i32): void {
  const last = levels + <usize>(count - 1) * LEVEL_BYTES;
  for (let level = levels; level < last; level += LEVEL_BYTES) {
    smoothDown(level, true);
    restrict(level, level + LEVEL_BYTES);
  }
  // The coarsest level has at most 4 x 4 cells: smoothing alone solves it well enough.
  smoothDown(last, false);
  for (let k = 0; k < 4; k++) {
    smoothUp(last, 0);
    copyBack(last);
  }
  smoothUp(last, 0);
  for (let level = last - LEVEL_BYTES; level >= levels; level -= LEVEL_BYTES) smoothUp(level, level + LEVEL_BYTES);
}

/** Diagonals of a level from its faces; answers whether all faces are finite and not negative. */
export function sumFaces(level: usize): bool {
  const nx = <usize>field(level, 0);
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  const width = ((nx + 3) >> 2) << 4;
  let kx = <usize>field(level, 3);
  let ky = <usize>field(level, 4);
  let diagonal = <usize>field(level, 5);
  let inverse = <usize>field(level, 6);
  const one = f32x4.splat(1.0);
  const zero = f32x4.splat(0.0);
  const most = f32x4.splat(f32.MAX_VALUE);
  let good = i32x4.splat(-1);
  for (let j = 0; j < ny; j++) {
    for (let i: usize = 0; i < width; i += 16) {
      const right = v128.load(kx + i);
      const left = v128.load(kx + i - 4);
      const up = v128.load(ky + i);
      const down = v128.load(ky + i - stride);
      const sum = f32x4.add(f32x4.add(right, left), f32x4.add(up, down));
      const least = f32x4.pmin(f32x4.pmin(right, left), f32x4.pmin(up, down));
      // No number compares: a face that is none spoils the sum.
      good = v128.and(good, v128.and(f32x4.ge(least, zero), f32x4.le(sum, most)));
      v128.store(diagonal + i, sum);
      v128.store(inverse + i, v128.and(f32x4.div(one, sum), f32x4.gt(sum, zero)));
    }
    // Beyond the row's end stands the other side of its outer face, which is no unknown.
    for (let i: usize = nx << 2; i < width; i += 4) {
      store<f32>(diagonal + i, 0.0);
      store<f32>(inverse + i, 0.0);
    }
    kx += stride;
    ky += stride;
    diagonal += stride;
    inverse += stride;
  }
  return i32x4.all_true(good);
}

/** Coarse faces: half the sum of the two fine faces each covers, which is twice the length over twice the distance. */
export function coarsenFaces(coarse: usize, fine: usize): void {
  const nx = field(coarse, 0);
  const ny = field(coarse, 1);
  const stride = <usize>field(coarse, 2);
  const fineNx = field(fine, 0);
  const fineNy = field(fine, 1);
  const fineStride = <usize>field(fine, 2);
  const width = ((<usize>nx) + 3 >> 2) << 4;
  const half = f32x4.splat(0.5);
  let out = <usize>field(coarse, 3);
  let from = <usize>field(fine, 3);
  for (let j = 0; j < ny; j++) {
    for (let i: usize = 0; i < width; i += 16) {
      const at = from + 2 * i;
      const left = f32x4.add(v128.load(at), v128.load(at + fineStride));
      const right = f32x4.add(v128.load(at, 16), v128.load(at + fineStride, 16));
      v128.store(out + i, f32x4.mul(half, v128.shuffle<f32>(left, right, 1, 3, 5, 7)));
    }
    store<f32>(out - 4, <f32>0.5 * (load<f32>(from - 4) + load<f32>(from + fineStride - 4)));
    if ((fineNx & 1) === 1) {
      const at = from + ((<usize>(fineNx - 1)) << 2);
      store<f32>(out + ((<usize>(nx - 1)) << 2), <f32>0.5 * (load<f32>(at) + load<f32>(at + fineStride)));
    }
    out += stride;
    from += 2 * fineStride;
  }
  for (let j = -1; j < ny; j++) {
    const row = min(2 * j + 1, fineNy - 1);
    const to = <usize>(field(coarse, 4) + j * field(coarse, 2));
    const at = <usize>(field(fine, 4) + row * field(fine, 2));
    for (let i: usize = 0; i < width; i += 16) {
      const left = v128.load(at + 2 * i);
      const right = v128.load(at + 2 * i, 16);
      v128.store(to + i, f32x4.mul(half, f32x4.add(v128.shuffle<f32>(left, right, 0, 2, 4, 6), v128.shuffle<f32>(left, right, 1, 3, 5, 7))));
    }
  }
}

/** 1 where open. */
// @ts-ignore: decorator
@inline
function openAt(inverse: usize): v128 {
  return v128.and(f32x4.splat(1.0), f32x4.ne(v128.load(inverse), f32x4.splat(0.0)));
}

/** Shares of a level: 1 / the weights of the open coarse cells, 0 where closed. */
export function weighInterpolation(fine: usize, coarse: usize): void {
  const nx = field(fine, 0);
  const ny = field(fine, 1);
  const stride = <usize>field(fine, 2);
  const coarseStride = <usize>field(coarse, 2);
  const width = ((<usize>nx) + 7 >> 3) << 5;
  let inverse = <usize>field(fine, 6);
  let share = <usize>field(fine, 10);
  let near = <usize>field(coarse, 6);
  const most = f32x4.splat(0.75);
  const rest = f32x4.splat(0.25);
  const one = f32x4.splat(1.0);
  for (let j = 0; j < ny; j++) {
    const far = (j & 1) === 0 ? near - coarseStride : near + coarseStride;
    for (let i: usize = 0; i < width; i += 32) {
      const n = near + (i >> 1);
      const f = far + (i >> 1);
      const c = f32x4.add(f32x4.mul(most, openAt(n)), f32x4.mul(rest, openAt(f)));
      const cLeft = f32x4.add(f32x4.mul(most, openAt(n - 4)), f32x4.mul(rest, openAt(f - 4)));
      const cRight = f32x4.add(f32x4.mul(most, openAt(n + 4)), f32x4.mul(rest, openAt(f + 4)));
      const even = f32x4.add(f32x4.mul(most, c), f32x4.mul(rest, cLeft));
      const odd = f32x4.add(f32x4.mul(most, c), f32x4.mul(rest, cRight));
      const left = f32x4.div(one, v128.shuffle<f32>(even, odd, 0, 4, 1, 5));
      const right = f32x4.div(one, v128.shuffle<f32>(even, odd, 2, 6, 3, 7));
      v128.store(share + i, v128.and(left, f32x4.ne(v128.load(inverse + i), f32x4.splat(0.0))));
      v128.store(share + i, v128.and(right, f32x4.ne(v128.load(inverse + i, 16), f32x4.splat(0.0))), 16);
    }
    inverse += stride;
    share += stride;
    if ((j & 1) === 1) near += coarseStride;
  }
}

// @ts-ignore: decorator
@inline
function low(v: v128): v128 {
  return f64x2.promote_low_f32x4(v);
}

// @ts-ignore: decorator
@inline
function high(v: v128): v128 {
  return f64x2.promote_low_f32x4(v128.shuffle<f32>(v, v, 2, 3, 2, 3));
}

// @ts-ignore: decorator
@inline
function sumOf(v: v128): f64 {
  return f64x2.extract_lane(v, 0) + f64x2.extract_lane(v, 1);
}

/** sum of k (p - p_neighbour) of two cells. */
// @ts-ignore: decorator
@inline
function apply2(p: usize, stride: usize, right: v128, left: v128, up: v128, down: v128): v128 {
  const here = v128.load(p);
  const across = f64x2.add(f64x2.mul(right, f64x2.sub(here, v128.load(p, 8))), f64x2.mul(left, f64x2.sub(here, v128.load(p - 8))));
  const along = f64x2.add(f64x2.mul(up, f64x2.sub(here, v128.load(p + stride))), f64x2.mul(down, f64x2.sub(here, v128.load(p - stride))));
  return f64x2.add(across, along);
}

/** p = scale z + beta p on one row. */
// @ts-ignore: decorator
@inline
function renewRow(p: usize, z: usize, cells: usize, scale: v128, beta: v128): void {
  for (let i: usize = 0; i < cells; i += 4) {
    const four = v128.load(z + (i << 2));
    const at = p + (i << 3);
    v128.store(at, f64x2.add(f64x2.mul(scale, low(four)), f64x2.mul(beta, v128.load(at))));
    v128.store(at, f64x2.add(f64x2.mul(scale, high(four)), f64x2.mul(beta, v128.load(at, 16))), 16);
  }
}

/** p = scale z + beta p and q = A p; answers p q. Row j + 1 of p is renewed just before row j of q needs it. */
function renewAndApply(level: usize, p: usize, q: usize, scaleOf: f64, betaOf: f64): f64 {
  const nx = <usize>field(level, 0);
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  const cells = ((nx + 3) >> 2) << 2;
  const scale = f64x2.splat(scaleOf);
  const beta = f64x2.splat(betaOf);
  let kx = <usize>field(level, 3);
  let ky = <usize>field(level, 4);
  let z = <usize>field(level, 7);
  const stride64 = stride << 1;
  let sum = f64x2.splat(0.0);
  renewRow(p, z, cells, scale, beta);
  for (let j = 0; j < ny; j++) {
    if (j + 1 < ny) renewRow(p + stride64, z + stride, cells, scale, beta);
    for (let i: usize = 0; i < cells; i += 4) {
      const at = i << 2;
      const right = v128.load(kx + at);
      const left = v128.load(kx + at - 4);
      const up = v128.load(ky + at);
      const down = v128.load(ky + at - stride);
      const here = p + (i << 3);
      const first = apply2(here, stride64, low(right), low(left), low(up), low(down));
      const second = apply2(here + 16, stride64, high(right), high(left), high(up), high(down));
      v128.store(q + (i << 3), first);
      v128.store(q + (i << 3), second, 16);
      sum = f64x2.add(sum, f64x2.add(f64x2.mul(first, v128.load(here)), f64x2.mul(second, v128.load(here, 16))));
    }
    // Beyond the row's end stands the other side of its outer face, which is no unknown.
    for (let i = nx; i < cells; i++) store<f64>(q + (i << 3), 0.0);
    p += stride64;
    q += stride64;
    z += stride;
    kx += stride;
    ky += stride;
  }
  return sumOf(sum);
}

/** x += alpha p, r -= alpha q, and b of the finest level = scale r in f32; answers r r. */
function advance(level: usize, x: usize, r: usize, p: usize, q: usize, alphaOf: f64, scaleOf: f64): f64 {
  const cells = ((<usize>field(level, 0) + 3) >> 2) << 2;
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  let b = <usize>field(level, 9);
  const alpha = f64x2.splat(alphaOf);
  const scale = f64x2.splat(scaleOf);
  let sum = f64x2.splat(0.0);
  for (let j = 0; j < ny; j++) {
    for (let i: usize = 0; i < cells; i += 4) {
      const at = i << 3;
      v128.store(x + at, f64x2.add(v128.load(x + at), f64x2.mul(alpha, v128.load(p + at))));
      v128.store(x + at, f64x2.add(v128.load(x + at, 16), f64x2.mul(alpha, v128.load(p + at, 16))), 16);
      const first = f64x2.sub(v128.load(r + at), f64x2.mul(alpha, v128.load(q + at)));
      const second = f64x2.sub(v128.load(r + at, 16), f64x2.mul(alpha, v128.load(q + at, 16)));
      v128.store(r + at, first);
      v128.store(r + at, second, 16);
      sum = f64x2.add(sum, f64x2.add(f64x2.mul(first, first), f64x2.mul(second, second)));
      v128.store(b + (i << 2), v128.shuffle<f32>(f32x4.demote_f64x2_zero(f64x2.mul(scale, first)), f32x4.demote_f64x2_zero(f64x2.mul(scale, second)), 0, 1, 4, 5));
    }
    x += stride << 1;
    r += stride << 1;
    p += stride << 1;
    q += stride << 1;
    b += stride;
  }
  return sumOf(sum);
}

/** r r of the right side, after clearing it where all faces are closed. */
function clearAndMeasure(level: usize, r: usize): f64 {
  const cells = ((<usize>field(level, 0) + 3) >> 2) << 2;
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  let inverse = <usize>field(level, 6);
  const zero = f64x2.splat(0.0);
  let sum = zero;
  for (let j = 0; j < ny; j++) {
    for (let i: usize = 0; i < cells; i += 4) {
      const four = v128.load(inverse + (i << 2));
      const at = r + (i << 3);
      const first = v128.and(v128.load(at), f64x2.ne(low(four), zero));
      const second = v128.and(v128.load(at, 16), f64x2.ne(high(four), zero));
      v128.store(at, first);
      v128.store(at, second, 16);
      sum = f64x2.add(sum, f64x2.add(f64x2.mul(first, first), f64x2.mul(second, second)));
    }
    r += stride << 1;
    inverse += stride;
  }
  return sumOf(sum);
}

/** r z, z being the finest level's x. */
function dotWithCycle(level: usize, r: usize): f64 {
  const cells = ((<usize>field(level, 0) + 3) >> 2) << 2;
  const ny = field(level, 1);
  const stride = <usize>field(level, 2);
  let z = <usize>field(level, 7);
  let sum = f64x2.splat(0.0);
  for (let j = 0; j < ny; j++) {
    for (let i: usize = 0; i < cells; i += 4) {
      const four = v128.load(z + (i << 2));
      sum = f64x2.add(sum, f64x2.add(f64x2.mul(low(four), v128.load(r + (i << 3))), f64x2.mul(high(four), v128.load(r + (i << 3), 16))));
    }
    r += stride << 1;
    z += stride;
  }
  return sumOf(sum);
}

/**
 * Solves for x with b given in r (overwritten by the residual), x and p zero at the start. Stops at |r| <= tolerance |b| or
 * after `most` rounds. Answers the rounds taken, or -1 where the tolerance was not met. What |r| / |b| became stands at `report`.
 */
export function solve(levels: usize, count: i32, x: usize, r: usize, p: usize, q: usize, tolerance: f64, most: i32, report: usize): i32 {
  const start = sqrt(clearAndMeasure(levels, r));
  store<f64>(report, 0.0);
  if (start === 0.0) return 0;
  // The cycle sees the residual as a share of what it was a round ago, safe from underflow in 32 bits.
  let size = start;
  let next = sqrt(advance(levels, x, r, p, q, 0.0, 1.0 / size));
  let rzBefore = 0.0;
  for (let round = 1; round <= most; round++) {
    cycle(levels, count);
    const rz = size * dotWithCycle(levels, r);
    const pq = renewAndApply(levels, p, q, size, round === 1 ? 0.0 : rz / rzBefore);
    // Not above zero: the matrix is singular and this right side has no solution.
    if (!(pq > 0.0)) return -1;
    rzBefore = rz;
    size = next;
    next = sqrt(advance(levels, x, r, p, q, rz / pq, 1.0 / size));
    store<f64>(report, next / start);
    if (next <= tolerance * start) return round;
  }
  return -1;
}
