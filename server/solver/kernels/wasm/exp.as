/**
 * exp of two f64 at once. x = n ln 2 + r with |r| <= ln 2 / 2; exp(r) by its Taylor polynomial in Estrin order, times 2^n
 * put together from the bits of n. Below -690 it answers exp(-690), 1e-300. Valid for x <= 700.
 * Constants are loaded and spread from memory: engines build vector constants from two integers each time they are used.
 * Source of method: Muller, Elementary Functions, 3rd ed. 2016, sections 11.1 and 5.3 (two-part reduction).
 */
const C = memory.data<f64>([
  -690.0, 1.4426950408889634, 6755399441055744.0, 6.93147180369123816490e-01, 1.90821492927058770002e-10,
  1.0, 0.5, 0.16666666666666666, 0.041666666666666664, 0.008333333333333333, 0.001388888888888889, 1.984126984126984e-4,
  2.48015873015873e-5, 2.7557319223985893e-6, 2.755731922398589e-7, 2.505210838544172e-8, 2.08767569878681e-9,
]);

// @ts-ignore: decorator
@inline
function c(index: usize): v128 {
  return v128.load_splat<f64>(C + (index << 3));
}

/** Degree 12: relative error below 4e-16 for |x| < 1, growing by half an ulp of x beyond. */
// @ts-ignore: decorator
@inline
export function exp2lanes(xIn: v128): v128 {
  const x = f64x2.pmax(xIn, c(0));
  const magic = c(2); // 1.5 * 2^52: its low bits hold the nearest integer
  const shifted = f64x2.add(f64x2.mul(x, c(1)), magic);
  const n = f64x2.sub(shifted, magic);
  const r = f64x2.sub(f64x2.sub(x, f64x2.mul(n, c(3))), f64x2.mul(n, c(4)));
  const r2 = f64x2.mul(r, r);
  const r4 = f64x2.mul(r2, r2);
  const p01 = f64x2.add(c(5), r);
  const p23 = f64x2.add(c(6), f64x2.mul(r, c(7)));
  const p45 = f64x2.add(c(8), f64x2.mul(r, c(9)));
  const p67 = f64x2.add(c(10), f64x2.mul(r, c(11)));
  const p89 = f64x2.add(c(12), f64x2.mul(r, c(13)));
  const pab = f64x2.add(c(14), f64x2.mul(r, c(15)));
  const low = f64x2.add(f64x2.add(p01, f64x2.mul(r2, p23)), f64x2.mul(r4, f64x2.add(p45, f64x2.mul(r2, p67))));
  const high = f64x2.add(f64x2.add(p89, f64x2.mul(r2, pab)), f64x2.mul(r4, c(16)));
  return i64x2.add(f64x2.add(low, f64x2.mul(f64x2.mul(r4, r4), high)), i64x2.shl(shifted, 52));
}

/** Degree 7, for results kept in 32 bits: relative error below 7e-9. */
// @ts-ignore: decorator
@inline
export function exp2lanesShort(xIn: v128): v128 {
  const x = f64x2.pmax(xIn, c(0));
  const magic = c(2);
  const shifted = f64x2.add(f64x2.mul(x, c(1)), magic);
  const n = f64x2.sub(shifted, magic);
  const r = f64x2.sub(x, f64x2.mul(n, c(3)));
  const r2 = f64x2.mul(r, r);
  const p01 = f64x2.add(c(5), r);
  const p23 = f64x2.add(c(6), f64x2.mul(r, c(7)));
  const p45 = f64x2.add(c(8), f64x2.mul(r, c(9)));
  const p67 = f64x2.add(c(10), f64x2.mul(r, c(11)));
  const p = f64x2.add(f64x2.add(p01, f64x2.mul(r2, p23)), f64x2.mul(f64x2.mul(r2, r2), f64x2.add(p45, f64x2.mul(r2, p67))));
  return i64x2.add(p, i64x2.shl(shifted, 52));
}
