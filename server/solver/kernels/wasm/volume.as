/**
 * One step of a conserved concentration on a masked grid of square-on cells: transport by two sweeps of a limited
 * second-order upwind scheme (van Leer's harmonic limiter), then implicit diffusion along x and along y by factors made
 * beforehand. One pass goes up the grid in blocks of eight rows and does everything but the last back substitution:
 * rows stay in the first-level cache between the sweeps. A second pass comes down.
 *
 * Closed faces (land, walls) have Courant number 0 and no diffusion; no branch knows of land. A difference across a face
 * with Courant number exactly 0 counts as 0 in the limiter, so that nothing is reconstructed across a wall.
 *
 * Sweep 1 leaves c1 = (c - dF) / V1 with V1 = 1 - (fOut - fIn) the share of the cell's water after it; sweep 2 ends with
 * V1 c1 - dG at volume 1 again. A uniform concentration in a flow without divergence so stays uniform to rounding.
 *
 * Memory, f64: node (j, i) of any grid at base + 8 (j stride + i), base on a 16-byte boundary; stride even; each base has
 * two nodes of margin before and behind each row, and two rows of margin below and above. Faces: fx at
 * i is the right face of cell i (left outer face at -1), fy at j the upper face. Rows and nodes beyond nx, ny up to the
 * next multiples of 8 and 2 are closed cells, with 0 for the inverse volume, as on land. `window` holds 12 rows, `rows` 8,
 * `flux` 1, with the same margins in a row.
 */

// @ts-ignore: decorator
@inline
function shift1(left: v128, right: v128): v128 {
  return v128.shuffle<f64>(left, right, 1, 2);
}

/** a b / (a + b) where both have one sign, else 0: half of van Leer's harmonic slope. 0/0 is masked after the division. */
// @ts-ignore: decorator
@inline
function halfSlope(a: v128, b: v128): v128 {
  const product = f64x2.mul(a, b);
  return v128.and(f64x2.div(product, f64x2.add(a, b)), f64x2.gt(product, f64x2.splat(0.0)));
}

/** Flux through a face in cells: f cU + (|f| - f^2) hU, U the upwind side. */
// @ts-ignore: decorator
@inline
function faceFlux(f: v128, cBefore: v128, cAfter: v128, hBefore: v128, hAfter: v128): v128 {
  const backward = f64x2.lt(f, f64x2.splat(0.0));
  const c = v128.bitselect(cAfter, cBefore, backward);
  const h = v128.bitselect(hAfter, hBefore, backward);
  return f64x2.add(f64x2.mul(f, c), f64x2.mul(f64x2.sub(f64x2.abs(f), f64x2.mul(f, f)), h));
}

// @ts-ignore: decorator
@inline
function difference(high: v128, low: v128, face: v128): v128 {
  return v128.and(f64x2.sub(high, low), f64x2.ne(face, f64x2.splat(0.0)));
}

/**
 * Transport along one row. `first`: out = (c - dF) inverse. Otherwise out = V c - dF with V = 1 - (up - down), the faces
 * of the other direction. `out` may be `c`. Answers what left through the two ends, in cells.
 */
// @ts-ignore: decorator
@inline
function sweepX(first: bool, out: usize, c: usize, f: usize, inverse: usize, up: usize, down: usize, nx: i32): f64 {
  const end = c + ((<usize>nx) << 3);
  const left = load<f64>(f - 8);
  const right = load<f64>(f + ((<usize>(nx - 1)) << 3));
  // A neighbour outside: the same value where water leaves, clean water where it enters.
  store<f64>(c - 8, left < 0.0 ? load<f64>(c) : 0.0);
  store<f64>(c - 16, 0.0);
  store<f64>(end, right > 0.0 ? load<f64>(end - 8) : 0.0);
  store<f64>(end + 8, 0.0);
  const lost = max(0.0, right) * load<f64>(end - 8) - min(0.0, left) * load<f64>(c);

  let at = c;
  let before = v128.load(at - 16); // c[-2], c[-1]
  let here = v128.load(at); // c[0], c[1]
  let fBefore = v128.load(f - 16); // f[-2], f[-1]
  let fHere = v128.load(f);
  // d at i is the difference across the right face of i.
  let dBefore = difference(shift1(before, here), before, fBefore); // d[-2], d[-1]
  let next = v128.load(at + 16);
  let dHere = difference(shift1(here, next), here, fHere); // d[0], d[1]
  let hHere = halfSlope(shift1(dBefore, dHere), dHere); // h[0], h[1]
  // Flux at -1: only f[-1] < 0 (water leaving) carries anything, with h = 0 outside and inside difference 0.
  let fluxBefore = f64x2.mul(fBefore, before);
  while (at < end) {
    const fNext = v128.load(f + 16);
    const after = v128.load(at + 32);
    const dNext = difference(shift1(next, after), next, fNext);
    const hNext = halfSlope(shift1(dHere, dNext), dNext);
    const flux = faceFlux(fHere, here, shift1(here, next), hHere, shift1(hHere, hNext));
    const change = f64x2.sub(flux, shift1(fluxBefore, flux));
    if (first) v128.store(out, f64x2.mul(f64x2.sub(here, change), v128.load(inverse)));
    else {
      const volume = f64x2.sub(f64x2.splat(1.0), f64x2.sub(v128.load(up), v128.load(down)));
      v128.store(out, f64x2.sub(f64x2.mul(here, volume), change));
    }
    fluxBefore = flux;
    here = next;
    next = after;
    fHere = fNext;
    dHere = dNext;
    hHere = hNext;
    at += 16;
    out += 16;
    f += 16;
    if (first) inverse += 16;
    else {
      up += 16;
      down += 16;
    }
  }
  // Of an odd row the last vector's second node lies outside.
  if ((nx & 1) === 1) store<f64>(out - 8, 0.0);
  return lost;
}

/**
 * Transport along y of eight rows, two columns at a time. `c` is the lowest of them; rows c - 1 to c + 9 are read.
 * `flux` holds the fluxes through the lower faces and is left with those of the upper ones.
 * `first`: out = (c - dG) inverse. Otherwise out = V c - dG with V = 1 - (fx[i] - fx[i-1]).
 */
// @ts-ignore: decorator
@inline
function sweepY(first: bool, out: usize, outStride: usize, c: usize, f: usize, inverse: usize, fx: usize, flux: usize, stride: usize, nx: i32): void {
  const end = c + ((<usize>nx) << 3);
  while (c < end) {
    let at = c;
    let here = v128.load(at);
    let next = v128.load(at + stride);
    let face = f;
    let fHere = v128.load(face);
    let dHere = difference(next, here, fHere);
    let hHere = halfSlope(difference(here, v128.load(at - stride), v128.load(face - stride)), dHere);
    let below = v128.load(flux);
    let to = out;
    let scale = first ? inverse : fx;
    for (let row = 0; row < 8; row++) {
      const after = v128.load(at + 2 * stride);
      const fNext = v128.load(face + stride);
      const dNext = difference(after, next, fNext);
      const hNext = halfSlope(dHere, dNext);
      const above = faceFlux(fHere, here, next, hHere, hNext);
      const change = f64x2.sub(above, below);
      if (first) v128.store(to, f64x2.mul(f64x2.sub(here, change), v128.load(scale)));
      else {
        const volume = f64x2.sub(f64x2.splat(1.0), f64x2.sub(v128.load(scale), v128.load(scale - 8)));
        v128.store(to, f64x2.sub(f64x2.mul(here, volume), change));
      }
      below = above;
      here = next;
      next = after;
      fHere = fNext;
      dHere = dNext;
      hHere = hNext;
      at += stride;
      face += stride;
      to += outStride;
      scale += stride;
    }
    v128.store(flux, below);
    c += 16;
    f += 16;
    out += 16;
    flux += 16;
    if (first) inverse += 16;
    else fx += 16;
  }
}

/**
 * Clean water or the last row's own value beyond an outer face row; answers what leaves through it, in cells, and puts
 * its flux into `flux`. `sign` is 1 for the upper end and -1 for the lower one.
 */
function outerRow(ghost: usize, inner: usize, f: usize, sign: f64, flux: usize, nx: i32): f64 {
  let lost: f64 = 0.0;
  for (let i = 0; i < nx; i++) {
    const at = (<usize>i) << 3;
    const value = load<f64>(f + at) * sign > 0.0 ? load<f64>(inner + at) : 0.0;
    store<f64>(ghost + at, value);
    const through = load<f64>(f + at) * value;
    lost += through * sign;
    if (flux !== 0) store<f64>(flux + at, through);
  }
  return lost;
}

/**
 * Implicit diffusion along x of eight rows (four pairs side by side), then forward elimination along y into z.
 * Along x: z_i = b_i + q_(i-1) z_(i-1) going right, x_i = w_i z_i + q_i x_(i+1) coming back, two rows in the lanes of a
 * vector: two by two nodes are transposed as they are read and as they are written, q and w are stored that way.
 * Along y: z_j = s x_j + q_(j-1) z_(j-1). `extra`: x is replaced by 2 x - b (trapezoidal rule; q, w of half the step).
 */
// @ts-ignore: decorator
@inline
function diffuseRows(extra: bool, rows: usize, stride: usize, qx: usize, wx: usize, z: usize, qy: usize, survival: v128, nx: i32): void {
  const pair = 2 * stride;
  let z0 = f64x2.splat(0.0);
  let z1 = f64x2.splat(0.0);
  let z2 = f64x2.splat(0.0);
  let z3 = f64x2.splat(0.0);
  let b = rows;
  let q = qx;
  const end = rows + ((<usize>((nx + 1) & ~1)) << 3);
  while (b < end) {
    z0 = eliminate(b, q, stride, z0);
    z1 = eliminate(b + pair, q + pair, stride, z1);
    z2 = eliminate(b + 2 * pair, q + 2 * pair, stride, z2);
    z3 = eliminate(b + 3 * pair, q + 3 * pair, stride, z3);
    b += 16;
    q += 16;
  }
  let x0 = f64x2.splat(0.0);
  let x1 = f64x2.splat(0.0);
  let x2 = f64x2.splat(0.0);
  let x3 = f64x2.splat(0.0);
  const across = b - rows;
  let w = wx + across;
  let zy = z + across;
  let qRow = qy + across;
  while (b > rows) {
    b -= 16;
    q -= 16;
    w -= 16;
    zy -= 16;
    qRow -= 16;
    const first = b === rows;
    let below = f64x2.mul(v128.load(qRow - stride), v128.load(zy - stride));
    x0 = substitute(extra, first, b, q, w, stride, x0);
    below = eliminatePair(zy, qRow, b, stride, survival, below);
    x1 = substitute(extra, first, b + pair, q + pair, w + pair, stride, x1);
    below = eliminatePair(zy + pair, qRow + pair, b + pair, stride, survival, below);
    x2 = substitute(extra, first, b + 2 * pair, q + 2 * pair, w + 2 * pair, stride, x2);
    below = eliminatePair(zy + 2 * pair, qRow + 2 * pair, b + 2 * pair, stride, survival, below);
    x3 = substitute(extra, first, b + 3 * pair, q + 3 * pair, w + 3 * pair, stride, x3);
    eliminatePair(zy + 3 * pair, qRow + 3 * pair, b + 3 * pair, stride, survival, below);
  }
}

/** Two nodes of two rows: reads b, leaves z transposed in its place. `carried` is q z of the node before. */
// @ts-ignore: decorator
@inline
function eliminate(b: usize, q: usize, stride: usize, carried: v128): v128 {
  const lower = v128.load(b);
  const upper = v128.load(b + stride);
  const za = f64x2.add(v128.shuffle<f64>(lower, upper, 0, 2), carried);
  const zb = f64x2.add(v128.shuffle<f64>(lower, upper, 1, 3), f64x2.mul(v128.load(q), za));
  v128.store(b, za);
  v128.store(b + stride, zb);
  return f64x2.mul(v128.load(q + stride), zb);
}

/** Two nodes of two rows: reads z transposed, leaves x in its place; answers x of the left node. */
// @ts-ignore: decorator
@inline
function substitute(extra: bool, first: bool, b: usize, q: usize, w: usize, stride: usize, xAfter: v128): v128 {
  const za = v128.load(b);
  const zb = v128.load(b + stride);
  const qa = v128.load(q);
  const xb = f64x2.add(f64x2.mul(v128.load(w + stride), zb), f64x2.mul(v128.load(q + stride), xAfter));
  const xa = f64x2.add(f64x2.mul(v128.load(w), za), f64x2.mul(qa, xb));
  let outA = xa;
  let outB = xb;
  if (extra) {
    // b is got back from z: b_i = z_i - q_(i-1) z_(i-1).
    const carried = first ? f64x2.splat(0.0) : f64x2.mul(v128.load(q - 16 + stride), v128.load(b - 16 + stride));
    outA = f64x2.sub(f64x2.add(xa, xa), f64x2.sub(za, carried));
    outB = f64x2.sub(f64x2.add(xb, xb), f64x2.sub(zb, f64x2.mul(qa, za)));
  }
  v128.store(b, v128.shuffle<f64>(outA, outB, 0, 2));
  v128.store(b + stride, v128.shuffle<f64>(outA, outB, 1, 3));
  return xa;
}

/** Forward elimination along y of two rows just finished; answers q z of the upper one. */
// @ts-ignore: decorator
@inline
function eliminatePair(z: usize, q: usize, rows: usize, stride: usize, survival: v128, below: v128): v128 {
  const lower = f64x2.add(f64x2.mul(survival, v128.load(rows)), below);
  v128.store(z, lower);
  const upper = f64x2.add(f64x2.mul(survival, v128.load(rows + stride)), f64x2.mul(v128.load(q), lower));
  v128.store(z + stride, upper);
  return f64x2.mul(v128.load(q + stride), upper);
}

/** Back substitution along y over the whole grid: c_j = w_j z_j + q_j c_(j+1), or 2 x - b with `extra`. Nodes from..to (even). */
// @ts-ignore: decorator
@inline
function backY(extra: bool, c: usize, z: usize, qy: usize, wy: usize, stride: usize, nx: i32, rowsAll: i32, above: usize): void {
  const width = (<usize>((nx + 1) & ~1)) << 3;
  memory.fill(above, 0, width);
  for (let j = rowsAll - 1; j >= 0; j--) {
    const at = <usize>j * stride;
    for (let i: usize = 0; i < width; i += 16) {
      const zHere = v128.load(z + at + i);
      const x = f64x2.add(f64x2.mul(v128.load(wy + at + i), zHere), f64x2.mul(v128.load(qy + at + i), v128.load(above + i)));
      v128.store(above + i, x);
      if (extra) {
        const b = f64x2.sub(zHere, f64x2.mul(v128.load(qy + at - stride + i), v128.load(z + at - stride + i)));
        v128.store(c + at + i, f64x2.sub(f64x2.add(x, x), b));
      } else v128.store(c + at + i, x);
    }
  }
}

/** Carries the last four rows of the window to its start. */
// @ts-ignore: decorator
@inline
function slide(window: usize, stride: usize): void {
  memory.copy(window - 16, window + 8 * stride - 16, 4 * stride);
}

/** x first, then y. Answers what left through the outer faces, in cells. */
// @ts-ignore: decorator
@inline
function stepXY(extra: bool, c: usize, z: usize, window: usize, rows: usize, flux: usize, fx: usize, fy: usize, inverse: usize, qx: usize, wx: usize, qy: usize, wy: usize, bytes: usize, nx: i32, ny: i32, survival: v128): f64 {
  const blocks = (ny + 7) >> 3;
  let lost: f64 = 0.0;
  // Window rows 0 to 3 are grid rows -2 to 1 of the first block.
  memory.fill(window - 16, 0, 12 * bytes);
  for (let j = 0; j < 2 && j < ny; j++) {
    const at = <usize>j * bytes;
    lost += sweepX(true, window + at + 2 * bytes, c + at, fx + at, inverse + at, 0, 0, nx);
  }
  memory.fill(flux - 16, 0, bytes);
  lost += outerRow(window + bytes, window + 2 * bytes, fy - bytes, -1.0, flux, nx);
  if (ny === 1) lost += outerRow(window + 3 * bytes, window + 2 * bytes, fy, 1.0, 0, nx);
  for (let block = 0; block < blocks; block++) {
    const j0 = block << 3;
    for (let row = 0; row < 8; row++) {
      const j = j0 + 2 + row;
      const to = window + <usize>(4 + row) * bytes;
      const at = <usize>j * bytes;
      if (j < ny) lost += sweepX(true, to, c + at, fx + at, inverse + at, 0, 0, nx);
      else if (j === ny) lost += outerRow(to, to - bytes, fy + at - bytes, 1.0, 0, nx);
      else memory.fill(to - 16, 0, bytes);
    }
    const at = <usize>j0 * bytes;
    sweepY(false, rows, bytes, window + 2 * bytes, fy + at, 0, fx + at, flux, bytes, nx);
    // The row outside holds water only for the flux through the outer faces.
    if (ny - j0 < 8) memory.fill(rows + <usize>(ny - j0) * bytes - 16, 0, <usize>(8 - ny + j0) * bytes);
    diffuseRows(extra, rows, bytes, qx + at, wx + at, z + at, qy + at, survival, nx);
    slide(window, bytes);
  }
  backY(extra, c, z, qy, wy, bytes, nx, blocks << 3, flux);
  return lost;
}

/** y first, then x. */
// @ts-ignore: decorator
@inline
function stepYX(extra: bool, c: usize, z: usize, window: usize, rows: usize, flux: usize, fx: usize, fy: usize, inverse: usize, qx: usize, wx: usize, qy: usize, wy: usize, bytes: usize, nx: i32, ny: i32, survival: v128): f64 {
  const blocks = (ny + 7) >> 3;
  memory.fill(flux - 16, 0, bytes);
  memory.fill(c + <usize>(ny) * bytes - 16, 0, bytes);
  let lost = outerRow(c - bytes, c, fy - bytes, -1.0, flux, nx);
  lost += outerRow(c + <usize>ny * bytes, c + <usize>(ny - 1) * bytes, fy + <usize>(ny - 1) * bytes, 1.0, 0, nx);
  for (let block = 0; block < blocks; block++) {
    const at = <usize>(block << 3) * bytes;
    sweepY(true, rows, bytes, c + at, fy + at, inverse + at, 0, flux, bytes, nx);
    for (let row = 0; row < 8; row++) {
      const rowAt = rows + <usize>row * bytes;
      const gridAt = at + <usize>row * bytes;
      if ((block << 3) + row < ny) lost += sweepX(false, rowAt, rowAt, fx + gridAt, 0, fy + gridAt, fy + gridAt - bytes, nx);
    }
    diffuseRows(extra, rows, bytes, qx + at, wx + at, z + at, qy + at, survival, nx);
  }
  backY(extra, c, z, qy, wy, bytes, nx, blocks << 3, flux);
  return lost;
}

export function step(order: i32, extra: i32, c: usize, z: usize, window: usize, rows: usize, flux: usize, fx: usize, fy: usize, inverse: usize, qx: usize, wx: usize, qy: usize, wy: usize, bytes: usize, nx: i32, ny: i32, survival: f64): f64 {
  const s = f64x2.splat(survival);
  if (order === 0) return extra === 0 ? stepXY(false, c, z, window, rows, flux, fx, fy, inverse, qx, wx, qy, wy, bytes, nx, ny, s) : stepXY(true, c, z, window, rows, flux, fx, fy, inverse, qx, wx, qy, wy, bytes, nx, ny, s);
  return extra === 0 ? stepYX(false, c, z, window, rows, flux, fx, fy, inverse, qx, wx, qy, wy, bytes, nx, ny, s) : stepYX(true, c, z, window, rows, flux, fx, fy, inverse, qx, wx, qy, wy, bytes, nx, ny, s);
}
