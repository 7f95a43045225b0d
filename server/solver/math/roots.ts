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
 * Largest value of f inside [a, b], with its place, by parabolas through the best three points, guarded by golden
 * sections; f has one hump there. Stops when the place is known to about `tolerance`.
 * Source: Brent 1973, Algorithms for Minimization without Derivatives, chapter 5.
 */
export function findMaximum(f: (x: number) => number, a: number, b: number, tolerance: number): { x: number; value: number } {
  let [low, high] = [a, b];
  let best = low + GOLDEN * (high - low);
  let second = best;
  let third = best;
  let fBest = f(best);
  let fSecond = fBest;
  let fThird = fBest;
  let step = 0;
  let before = 0;
  for (let i = 0; i < 100; i++) {
    const middle = (low + high) / 2;
    if (Math.abs(best - middle) <= tolerance - (high - low) / 2) break;
    const r = (best - second) * (fBest - fThird);
    const q = (best - third) * (fBest - fSecond);
    const over = 2 * (q - r);
    const jump = over === 0 ? Infinity : ((best - third) * q - (best - second) * r) / -over;
    const isUsable = Math.abs(before) > tolerance / 2 && Math.abs(jump) < Math.abs(before) / 2 && best + jump > low + tolerance / 4 && best + jump < high - tolerance / 4;
    before = isUsable ? step : (best < middle ? high : low) - best;
    step = isUsable ? jump : GOLDEN * before;
    // Never nearer to a known point than half the tolerance: rounding would decide.
    const x = best + (Math.abs(step) >= tolerance / 2 ? step : Math.sign(step || 1) * (tolerance / 2));
    const fx = f(x);
    if (fx >= fBest) {
      if (x < best) high = best;
      else low = best;
      [third, fThird, second, fSecond, best, fBest] = [second, fSecond, best, fBest, x, fx];
    } else {
      if (x < best) low = x;
      else high = x;
      if (fx >= fSecond || second === best) [third, fThird, second, fSecond] = [second, fSecond, x, fx];
      else if (fx >= fThird || third === best || third === second) [third, fThird] = [x, fx];
    }
  }
  return { x: best, value: fBest };
}
