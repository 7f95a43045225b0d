/**
 * Concentration at points below a source that has worked from age `oldest` to age `youngest`, in a uniform current along x:
 * c = Q / (2 pi h) integral of exp(-(x - U a)^2 / (2 sx^2) - y^2 / (2 sy^2) - k a) / (sx sy) da, s^2 = s0^2 + 2 K a.
 * With w the integral of da / sx, that is sx = s0 + Kx w and a = s0 w + Kx w^2 / 2, the integrand over w is close to a normal
 * curve of width 1/U wherever a cloud passes a point, and smooth at the source. Each point gets the stretch of w in which the
 * clouds' centres are within REACH standard deviations of it, cut to the release, in panels of Gauss and Legendre with evened nodes.
 *
 * Memory, f64: out, x, y of `count`; nodes and weights of `half` pairs of lanes each.
 * Parameters, f64: U, Kx, Ky, s0, youngest, oldest, decay, Q / (2 pi h), the two panel lengths.
 */
import { exp2lanesShort } from './exp';

/** exp(-5.6^2 / 2) = 1.5e-7 of a cloud's peak is where it is cut off on each side. */
const REACH: f64 = 5.6;

/** w at an age: the root of Kx w^2 / 2 + s0 w = a. */
// @ts-ignore: decorator
@inline
function gradedAge(a: f64, k: f64, s0: f64): f64 {
  return a > 0.0 ? (2.0 * a) / (s0 + sqrt(s0 * s0 + 2.0 * k * a)) : 0.0;
}

/** Larger root of A w^2 + B w = C with A >= 0; NaN where there is none. */
// @ts-ignore: decorator
@inline
function largerRoot(a: f64, b: f64, c: f64): f64 {
  const root = sqrt(b * b + 4.0 * a * c);
  return b > 0.0 ? (2.0 * c) / (b + root) : (root - b) / (2.0 * a);
}

export function atPoints(out: usize, x: usize, y: usize, count: i32, parameters: usize, nodes: usize, weights: usize, half: i32): void {
  const u = load<f64>(parameters);
  const kx = load<f64>(parameters, 8);
  const ky = load<f64>(parameters, 16);
  const s0 = load<f64>(parameters, 24);
  const decay = load<f64>(parameters, 48);
  const amplitude = load<f64>(parameters, 56);
  // Longest panel in w: so many passing widths 1/U, and so many times the cloud's size at its start over its growth.
  const passing = load<f64>(parameters, 64) / u;
  const growing = load<f64>(parameters, 72);
  const wFrom = gradedAge(load<f64>(parameters, 32), kx, s0);
  const wTo = gradedAge(load<f64>(parameters, 40), kx, s0);
  const quadratic = 0.5 * u * kx;
  const nodeBytes = (<usize>half) << 4;
  const vU = f64x2.splat(u);
  const vKx = f64x2.splat(kx);
  const vS0 = f64x2.splat(s0);
  const vHalfKx = f64x2.splat(0.5 * kx);
  const vTwoKy = f64x2.splat(2.0 * ky);
  const vS02 = f64x2.splat(s0 * s0);
  const vDecay = f64x2.splat(decay);
  const minusHalf = f64x2.splat(-0.5);
  const one = f64x2.splat(1.0);
  for (let p = 0; p < count; p++) {
    const at = (<usize>p) << 3;
    const px = load<f64>(x + at);
    const py = load<f64>(y + at);
    let from = wFrom;
    let to = wTo;
    if (u > 0.0) {
      // Clouds behind x - U a = REACH sx have not come so far; those past x - U a = -REACH sx have gone.
      const ahead = px - REACH * s0;
      if (ahead > 0.0) from = max(from, largerRoot(quadratic, u * s0 + REACH * kx, ahead));
      const b = u * s0 - REACH * kx;
      const c = px + REACH * s0;
      const last = largerRoot(quadratic, b, c);
      to = last === last ? min(to, last) : from;
      // Upstream of the source clouds arrive by spreading alone, after the smaller root, whose product with the larger is -C / A.
      if (c < 0.0) from = b < 0.0 && to > from ? max(from, -c / (quadratic * last)) : to;
    }
    if (!(to > from)) {
      store<f64>(out + at, 0.0);
      continue;
    }
    const vX = f64x2.splat(px);
    const vY2 = f64x2.splat(py * py);
    let sum = f64x2.splat(0.0);
    let left = from;
    while (left < to) {
      // A panel is as long as passing clouds allow and as their growth allows; a short rest joins the last one.
      const longest = min(passing, growing * (s0 / kx + left));
      const right = to - left < 1.2 * longest ? to : left + longest;
      const halfWidth = 0.5 * (right - left);
      const middle = f64x2.splat(left + halfWidth);
      const vHalf = f64x2.splat(halfWidth);
      let panel = f64x2.splat(0.0);
      left = right;
      for (let n: usize = 0; n < nodeBytes; n += 16) {
        const w = f64x2.add(middle, f64x2.mul(vHalf, v128.load(nodes + n)));
        const sx = f64x2.add(vS0, f64x2.mul(vKx, w));
        const age = f64x2.mul(w, f64x2.add(vS0, f64x2.mul(vHalfKx, w)));
        const sy2 = f64x2.add(vS02, f64x2.mul(vTwoKy, age));
        // One division and one root for both: 1 / (sx sy^2), then what is wanted of it.
        const sx2 = f64x2.mul(sx, sx);
        const inverse = f64x2.div(one, f64x2.mul(sx2, sy2));
        const away = f64x2.sub(vX, f64x2.mul(vU, age));
        const along = f64x2.mul(f64x2.mul(away, away), f64x2.mul(inverse, sy2));
        const inverseY2 = f64x2.mul(inverse, sx2);
        const exponent = f64x2.sub(f64x2.mul(minusHalf, f64x2.add(along, f64x2.mul(vY2, inverseY2))), f64x2.mul(vDecay, age));
        panel = f64x2.add(panel, f64x2.mul(f64x2.mul(v128.load(weights + n), f64x2.sqrt(inverseY2)), exp2lanesShort(exponent)));
      }
      sum = f64x2.add(sum, f64x2.mul(vHalf, panel));
    }
    store<f64>(out + at, amplitude * (f64x2.extract_lane(sum, 0) + f64x2.extract_lane(sum, 1)));
  }
}
