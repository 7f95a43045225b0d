/**
 * Wiener steps of many paths with exact normals: Box and Muller's polar form on 32-bit uniforms from xoshiro128+ (four
 * generators side by side, two such sets), in f32. A block of paths takes all its steps before the next one starts, so it
 * stays in the first-level cache; each block has generators of its own, so blocks may run anywhere in any order.
 *
 * Memory: x and y are f32, a multiple of 8 of them; `state` is 128 bytes: four words of four lanes for each set.
 */

/** Constants, each spread from memory: engines build vector constants from two integers each time they are used. */
const C = memory.data<f32>([
  0.6931471824645996, // 0: ln 2
  // -2 ln((1 + s) / (1 - s)) = -4 s (1 + s^2/3 + s^4/5 + s^6/7 + s^8/9), s = (m - 1) / (m + 1) for m in [sqrt(1/2), sqrt 2): |s| < 0.1716, rest 1e-9.
  -4.0, -1.3333333730697632, -0.800000011920929, -0.5714285969734192, -0.4444444477558136, // 1..5
  4.656612873077393e-10, // 6: 2^-31
  3.6572917e-10, // 7: pi / 2 * 2^-32, a signed 32-bit angle within a quarter turn
  // Taylor coefficients of sine and cosine on +-pi/4: rests 3e-9 and 2e-9.
  -0.1666666716337204, 0.008333333767950535, -0.0001984127011382952, 2.7557318844628753e-06, // 8..11
  -0.5, 0.0416666679084301, -0.0013888889225199819, 2.4801587642286904e-05, -2.755731998149713e-07, // 12..16
  1.0, -1.3862943649291992, // 17, 18: 1, -2 ln 2
]);
const BITS = memory.data<u32>([1, 0x3f3504f3, 0x007fffff, 0xffffff00, 0x80000000, 0x7fffffff]);

// @ts-ignore: decorator
@inline
function c(index: usize): v128 {
  return v128.load_splat<f32>(C + (index << 2));
}

// @ts-ignore: decorator
@inline
function bits(index: usize): v128 {
  return v128.load_splat<u32>(BITS + (index << 2));
}

// @ts-ignore: decorator
@inline
function rotate11(v: v128): v128 {
  return v128.or(i32x4.shl(v, 11), i32x4.shr_u(v, 21));
}

/** sqrt(-2 ln u), u = the upper 31 bits, the lowest of them set, times 2^-31: the radius of two normals, 6.56 at most. */
// @ts-ignore: decorator
@inline
function radius(random: v128): v128 {
  const u = f32x4.mul(f32x4.convert_i32x4_s(v128.or(i32x4.shr_u(random, 1), bits(0))), c(6));
  // u = 2^exponent m with m in [sqrt(1/2), sqrt 2), by its bits.
  const shifted = i32x4.sub(u, bits(1));
  const exponent = f32x4.convert_i32x4_s(i32x4.shr_s(shifted, 23));
  const m = i32x4.add(v128.and(shifted, bits(2)), bits(1));
  const s = f32x4.div(f32x4.sub(m, c(17)), f32x4.add(m, c(17)));
  const z = f32x4.mul(s, s);
  const high = f32x4.add(c(3), f32x4.mul(z, f32x4.add(c(4), f32x4.mul(z, c(5)))));
  const series = f32x4.add(f32x4.add(c(1), f32x4.mul(z, c(2))), f32x4.mul(f32x4.mul(z, z), high));
  // u may round to 1: what is under the root is then rounding of either sign.
  return f32x4.sqrt(f32x4.pmax(f32x4.add(f32x4.mul(exponent, c(18)), f32x4.mul(s, series)), i32x4.splat(0)));
}

/** Sine of an angle within a quarter turn round 0, from it and its square. */
// @ts-ignore: decorator
@inline
function sine(a: v128, a2: v128): v128 {
  const p = f32x4.add(f32x4.add(c(8), f32x4.mul(a2, c(9))), f32x4.mul(f32x4.mul(a2, a2), f32x4.add(c(10), f32x4.mul(a2, c(11)))));
  return f32x4.add(a, f32x4.mul(f32x4.mul(a, a2), p));
}

// @ts-ignore: decorator
@inline
function cosine(a2: v128): v128 {
  const a4 = f32x4.mul(a2, a2);
  const p = f32x4.add(f32x4.add(c(13), f32x4.mul(a2, c(14))), f32x4.mul(a4, f32x4.add(c(15), f32x4.mul(a2, c(16)))));
  return f32x4.add(f32x4.add(c(17), f32x4.mul(a2, c(12))), f32x4.mul(a4, p));
}

/**
 * The direction's 32 bits: the upper 24 are the angle within a quarter turn round an axis, bit 4 chooses the axis's side,
 * bit 5 the axis.
 */
// @ts-ignore: decorator
@inline
function angleOf(random: v128): v128 {
  return f32x4.mul(f32x4.convert_i32x4_s(v128.and(random, bits(3))), c(7));
}

// @ts-ignore: decorator
@inline
function sided(r: v128, random: v128): v128 {
  return v128.xor(r, v128.and(i32x4.shl(random, 27), bits(4)));
}

// @ts-ignore: decorator
@inline
function axisOf(random: v128): v128 {
  return i32x4.shr_s(i32x4.shl(random, 26), 31);
}

/** Into [0, length] by one mirror at each wall. */
// @ts-ignore: decorator
@inline
function reflect(x: v128, length: v128): v128 {
  const positive = bits(5);
  return f32x4.sub(length, v128.and(f32x4.sub(length, v128.and(x, positive)), positive));
}

/**
 * `steps` steps of `count` paths (a multiple of 8): x += driftX + spreadX N, y likewise, then mirrored at 0 and at the
 * length of each side. Step k uses the four f32 at parameters + 16 k: drift x, drift y, spread x, spread y.
 */
export function walk(x: usize, y: usize, count: i32, parameters: usize, steps: i32, lengthX: f32, lengthY: f32, state: usize): void {
  let a0 = v128.load(state);
  let a1 = v128.load(state, 16);
  let a2 = v128.load(state, 32);
  let a3 = v128.load(state, 48);
  let b0 = v128.load(state, 64);
  let b1 = v128.load(state, 80);
  let b2 = v128.load(state, 96);
  let b3 = v128.load(state, 112);
  const lx = f32x4.splat(lengthX);
  const ly = f32x4.splat(lengthY);
  const bytes = (<usize>count) << 2;
  for (let k = 0; k < steps; k++) {
    const dx = v128.load_splat<f32>(parameters);
    const dy = v128.load_splat<f32>(parameters, 4);
    const sx = v128.load_splat<f32>(parameters, 8);
    const sy = v128.load_splat<f32>(parameters, 12);
    parameters += 16;
    for (let i: usize = 0; i < bytes; i += 16) {
      const radiusBits = i32x4.add(a0, a3);
      const ta = i32x4.shl(a1, 9);
      a2 = v128.xor(a2, a0);
      a3 = v128.xor(a3, a1);
      a1 = v128.xor(a1, a2);
      a0 = v128.xor(a0, a3);
      a2 = v128.xor(a2, ta);
      a3 = rotate11(a3);
      const angleBits = i32x4.add(b0, b3);
      const tb = i32x4.shl(b1, 9);
      b2 = v128.xor(b2, b0);
      b3 = v128.xor(b3, b1);
      b1 = v128.xor(b1, b2);
      b0 = v128.xor(b0, b3);
      b2 = v128.xor(b2, tb);
      b3 = rotate11(b3);
      const r = sided(radius(radiusBits), angleBits);
      const angle = angleOf(angleBits);
      const square = f32x4.mul(angle, angle);
      const along = f32x4.mul(r, cosine(square));
      const across = f32x4.mul(r, sine(angle, square));
      // Where the axis is y, the two change places.
      const exchange = v128.and(v128.xor(along, across), axisOf(angleBits));
      v128.store(x + i, reflect(f32x4.add(f32x4.add(v128.load(x + i), dx), f32x4.mul(sx, v128.xor(along, exchange))), lx));
      v128.store(y + i, reflect(f32x4.add(f32x4.add(v128.load(y + i), dy), f32x4.mul(sy, v128.xor(across, exchange))), ly));
    }
  }
  v128.store(state, a0);
  v128.store(state, a1, 16);
  v128.store(state, a2, 32);
  v128.store(state, a3, 48);
  v128.store(state, b0, 64);
  v128.store(state, b1, 80);
  v128.store(state, b2, 96);
  v128.store(state, b3, 112);
}
