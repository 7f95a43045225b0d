/**
 * Root of f between a and b, where f(a) and f(b) have opposite signs, by the Illinois form of false position with
 * bisection as a guard: it never leaves the bracket. Stops when the bracket is narrower than `tolerance`.
 * Source: Dahlquist & Bjorck 1974, Numerical Methods, section 6.3.
 */
export function findRoot(f: (x: number) => number, a: number, b: number, fa: number, fb: number, tolerance: number): number {
  if (fa === 0) return a;
  if (fb === 0) return b;
  let side = 0;
  for (let i = 0; i < 120 && Math.abs(b - a) > tolerance; i++) {
    const cut = (fb * a - fa * b) / (fb - fa);
    const inside = cut > Math.min(a, b) && cut < Math.max(a, b);
    // Every third step halves, so that flat functions cannot stall it.
    const x = inside && i % 3 !== 2 ? cut : (a + b) / 2;
    const fx = f(x);
    if (fx === 0) return x;
    if (fx > 0 === fb > 0) {
      b = x;
      fb = fx;
      if (side === 1) fa /= 2;
      side = 1;
    } else {
      a = x;
      fa = fx;
      if (side === -1) fb /= 2;
      side = -1;
    }
  }
  return (a + b) / 2;
}

const GOLDEN = (3 - Math.sqrt(5)) / 2;

/**
 * Largest value of f inside [a, b], with its place, by golden sections; f has one hump there.
 * Source: Kiefer 1953, Proc. Amer. Math. Soc. 4: 502.
 */
export function findMaximum(f: (x: number) => number, a: number, b: number, tolerance: number): { x: number; value: number } {
  let low = a;
  let high = b;
  let x1 = low + GOLDEN * (high - low);
  let x2 = high - GOLDEN * (high - low);
  let f1 = f(x1);
  let f2 = f(x2);
  for (let i = 0; i < 100 && high - low > tolerance; i++) {
    if (f1 >= f2) {
      high = x2;
      x2 = x1;
      f2 = f1;
      x1 = low + GOLDEN * (high - low);
      f1 = f(x1);
    } else {
      low = x1;
      x1 = x2;
      f1 = f2;
      x2 = high - GOLDEN * (high - low);
      f2 = f(x2);
    }
  }
  return f1 >= f2 ? { x: x1, value: f1 } : { x: x2, value: f2 };
}
