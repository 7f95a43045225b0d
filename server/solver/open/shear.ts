import type { Mixing, OpenWater } from '../../../shared/schemas/estimate';
import { IntegralTable } from '../math/function-table';
import { exponential, growthRatePerS, type Gradient } from '../physics/matrix-exponential';
import type { Current } from './current';
import { mixingTensor, type Spread } from './spread';

/**
 * A current that changes evenly in space, u(x, t) = u0(t) + G (x - x_r): clouds stay normal, with
 *   centre  d mu/dt = u0 + G (mu - x_r),   covariance  dS/dt = G S + S G^T + 2 K.
 * Source: Okubo & Carter 1966, J. Geophys. Res. 71: 5267; the moments of a linear flow.
 */
export type Shear = {
  readonly gradient: Gradient;
  /** Where water that stood at (x, y) at `fromS` stands at `toS`, m. */
  place(fromS: number, toS: number, x: number, y: number, out: Float64Array): void;
  /** Bound on the speed at which centres move with their time of release, m/s, for water released at (x, y). */
  speedBound(ageS: number, x: number, y: number): number;
};

const TOLERANCE = 1e-11;

/** Pieces over which a table is made: enough for the shortest period, and to follow the gradient. */
const cutsOf = (current: Current, gradient: Gradient, fromS: number, toS: number): number[] => {
  const rate = Math.abs(gradient.ux) + Math.abs(gradient.uy) + Math.abs(gradient.vx);
  const step = Math.min(current.shortestPeriodS / 24, toS - fromS, 2 / Math.max(rate, 1e-12));
  const n = Math.min(20_000, Math.max(1, Math.ceil((toS - fromS) / step)));
  const even = Array.from({ length: n + 1 }, (_, i) => fromS + ((toS - fromS) * i) / n);
  return [...new Set([...even, ...current.kinksS.filter((t) => t > fromS && t < toS)])].sort((a, b) => a - b);
};

/**
 * mu(t) = x_r + e^(G t) (e^(-G s) (x - x_r) + V(t) - V(s)), V the integral of e^(-G r) u0(r), tabulated; times are counted from
 * `fromS`, so that the exponentials stay small.
 */
export function shearOf(gradient: Gradient, current: Current, fromS: number, toS: number, reference: { x: number; y: number }): Shear {
  const back = new Float64Array(4);
  const velocity = new Float64Array(2);
  const table = new IntegralTable(
    (t, out) => {
      exponential(gradient, fromS - t, back);
      current.velocity(t, velocity);
      out[0] = back[0]! * velocity[0]! + back[1]! * velocity[1]!;
      out[1] = back[2]! * velocity[0]! + back[3]! * velocity[1]!;
    },
    2,
    cutsOf(current, gradient, fromS, toS),
    TOLERANCE * Math.max(1e-3, current.maxSpeedMps),
  );
  const [start, end, forth, whole] = [new Float64Array(2), new Float64Array(2), new Float64Array(4), new Float64Array(4)];
  return {
    gradient,
    place(s, t, x, y, out) {
      table.at(s, start);
      table.at(t, end);
      exponential(gradient, t - fromS, forth);
      exponential(gradient, t - s, whole);
      const [dx, dy] = [x - reference.x, y - reference.y];
      const [vx, vy] = [end[0]! - start[0]!, end[1]! - start[1]!];
      out[0] = reference.x + whole[0]! * dx + whole[1]! * dy + forth[0]! * vx + forth[1]! * vy;
      out[1] = reference.y + whole[2]! * dx + whole[3]! * dy + forth[2]! * vx + forth[3]! * vy;
    },
    speedBound(ageS, x, y) {
      exponential(gradient, ageS, whole);
      const size = Math.hypot(whole[0]!, whole[1]!, whole[2]!, whole[3]!);
      const local = Math.hypot(gradient.ux, gradient.ux, gradient.uy, gradient.vx) * Math.hypot(x - reference.x, y - reference.y);
      return size * (current.maxSpeedMps + local);
    },
  };
}

/**
 * Spread in such a current with a constant tensor (xx, xy, yy, m2/s): S(a) = e^(G a) S0 e^(G a)^T + integral 2 e^(G r) K e^(G r)^T dr,
 * the integral tabulated by age; in simple shear it is a cubic and the table exact.
 */
export function shearSpread(gradient: Gradient, tensor: readonly [number, number, number], longestS: number, startM2 = 0): Spread {
  const e = new Float64Array(4);
  const turned = (xx: number, xy: number, yy: number, out: Float64Array): void => {
    out[0] = e[0]! * e[0]! * xx + 2 * e[0]! * e[1]! * xy + e[1]! * e[1]! * yy;
    out[1] = e[0]! * e[2]! * xx + (e[0]! * e[3]! + e[1]! * e[2]!) * xy + e[1]! * e[3]! * yy;
    out[2] = e[2]! * e[2]! * xx + 2 * e[2]! * e[3]! * xy + e[3]! * e[3]! * yy;
  };
  const rate = Math.abs(gradient.ux) + Math.abs(gradient.uy) + Math.abs(gradient.vx);
  const panels = Math.min(5_000, Math.max(1, Math.ceil((longestS * rate) / 2)));
  const table = new IntegralTable(
    (age, out) => {
      exponential(gradient, age, e);
      turned(2 * tensor[0], 2 * tensor[1], 2 * tensor[2], out);
    },
    3,
    Array.from({ length: panels + 1 }, (_, i) => (longestS * i) / panels),
    TOLERANCE * (tensor[0] + tensor[2]),
  );
  const forStart = (start: number): Spread => {
    const now = new Float64Array(3);
    const first = new Float64Array(3);
    const gained = (fromS: number, atS: number, out: Float64Array): void => {
      const age = Math.max(0, atS - fromS);
      table.at(age, now);
      exponential(gradient, age, e);
      turned(start, 0, start, first);
      for (let k = 0; k < 3; k++) out[k] = now[k]! + first[k]! - (k === 1 ? 0 : start);
    };
    const principal = (ageS: number, sign: 1 | -1): number => {
      const s = new Float64Array(3);
      gained(0, ageS, s);
      return (s[0]! + s[2]!) / 2 + sign * Math.hypot((s[0]! - s[2]!) / 2, s[1]!);
    };
    return { gained, largest: (ageS) => principal(ageS, 1), smallest: (ageS) => principal(ageS, -1), from: forStart };
  };
  return forStart(startM2);
}

/** The stated gradient of a water, null where the current is the same everywhere. */
export function gradientOf({ velocityGradient }: OpenWater): Gradient | null {
  if (!velocityGradient) return null;
  const { eastByEastPerS: ux, eastByNorthPerS: uy, northByEastPerS: vx } = velocityGradient;
  return ux === 0 && uy === 0 && vx === 0 ? null : { ux, uy, vx };
}

/** Strain may draw a cloud out by this many e-foldings within an estimate; beyond it the closed form loses its digits. */
const MOST_FOLDINGS = 12;

/** Why a gradient cannot be solved with the rest of a water, or null. */
export function gradientProblem(water: OpenWater, spanS: number): { path: string; message: string } | null {
  const gradient = gradientOf(water);
  if (!gradient) return null;
  const folds = growthRatePerS(gradient) * spanS;
  if (folds > MOST_FOLDINGS) return { path: 'velocityGradient', message: `The gradient would draw the cloud out ${folds.toPrecision(3)} e-foldings long over the estimate, at most ${MOST_FOLDINGS} can be followed: lower it or shorten the estimate` };
  if (water.straightShore) return { path: 'straightShore', message: 'A straight shore and a velocity gradient cannot be met together: leave one of them out' };
  if (water.mixing.kind !== 'constant') return { path: 'mixing.kind', message: `A velocity gradient needs constant mixing, not "${water.mixing.kind}": give coefficients along and across` };
  if (water.mixing.turnsWithCurrent && water.mixing.alongM2s !== water.mixing.acrossM2s)
    return { path: 'mixing.turnsWithCurrent', message: 'With a velocity gradient every place has another current: state a fixed axis, or spread alike in all directions' };
  return null;
}

/** Spread of a document's constant mixing in a sheared current. */
export const spreadInShear = (mixing: Mixing, gradient: Gradient, longestS: number): Spread => shearSpread(gradient, mixingTensor(mixing), longestS);
