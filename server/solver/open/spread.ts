import type { Mixing } from '../../../shared/schemas/estimate';
import { IntegralTable } from '../math/function-table';
import { fourThirdsLaw, grownVarianceM2, lakeSizeLaw, okuboSizeLaw, type GrowthLaw } from '../physics/growing-spread';
import { okuboVarianceM2 } from '../physics/spreading';
import type { Current } from './current';

/** Covariance a cloud gains between its release and a later time, in fixed axes (east, north), m2; `out` is xx, xy, yy. */
export type Spread = {
  gained(releasedS: number, atS: number, out: Float64Array): void;
  /** Largest and smallest variance along any axis after the given age, m2; bounds for the adaptive integral. */
  largest(ageS: number): number;
  smallest(ageS: number): number;
  /** Where `gained` follows from the age and two running sums: the sums up to a time, and the covariance from their growth. */
  readonly running?: { at(tS: number, out: Float64Array): void; gained(ageS: number, first: number, second: number, out: Float64Array): void };
  /** The same for a first cloud of that variance along each axis, m2, where growth depends on it. */
  from?(startVarianceM2: number): Spread;
};

/** Fixed-axes share of the along-axis direction: cos 2a and sin 2a, a anticlockwise from east. */
export type AxisDirection = (tS: number, out: Float64Array) => void;

const RAD = Math.PI / 180;

/**
 * Constant diffusivities whose axes turn: V(t) = 2 integral R diag(K_L, K_T) R^T dt, summed in fixed axes.
 * With a the angle of the long axis, V_xx, V_yy = (K_L + K_T) t +- (K_L - K_T) I_c and V_xy = (K_L - K_T) I_s, where
 * I_c, I_s are the integrals of cos 2a and sin 2a, tabulated to 1e-10 of their length.
 * Source: Fischer et al. 1979, section 2.4; the table's error is its own.
 */
export function turningSpread(alongM2s: number, acrossM2s: number, direction: AxisDirection, cutsS: readonly number[]): Spread {
  const table = new IntegralTable(direction, 2, cutsS, 1e-10);
  const sum = alongM2s + acrossM2s;
  const difference = alongM2s - acrossM2s;
  const start = new Float64Array(2);
  const end = new Float64Array(2);
  let endS = Number.NaN;
  const gained = (ageS: number, cos: number, sin: number, out: Float64Array): void => {
    out[0] = sum * ageS + difference * cos;
    out[1] = difference * sin;
    out[2] = sum * ageS - difference * cos;
  };
  return {
    gained(releasedS, atS, out) {
      table.at(releasedS, start);
      // An integral over release times asks for one moment many times.
      if (atS !== endS) table.at(atS, end);
      endS = atS;
      gained(atS - releasedS, end[0]! - start[0]!, end[1]! - start[1]!, out);
    },
    running: { at: (tS, out) => table.at(tS, out), gained },
    ...boundsOf(alongM2s, acrossM2s),
  };
}

/** Constant diffusivities along fixed axes: V = 2 K age. */
export function fixedSpread(alongM2s: number, acrossM2s: number, cos2: number, sin2: number): Spread {
  const xx = alongM2s + acrossM2s + (alongM2s - acrossM2s) * cos2;
  const yy = alongM2s + acrossM2s - (alongM2s - acrossM2s) * cos2;
  const xy = (alongM2s - acrossM2s) * sin2;
  return {
    gained(releasedS, atS, out) {
      const age = atS - releasedS;
      out[0] = xx * age;
      out[1] = xy * age;
      out[2] = yy * age;
    },
    ...boundsOf(alongM2s, acrossM2s),
  };
}

/** Spread that grows with age alike in all directions, after Okubo 1971, times a factor. */
export function okuboSpread(varianceFactor: number): Spread {
  const variance = (ageS: number): number => varianceFactor * okuboVarianceM2(ageS);
  return {
    gained(releasedS, atS, out) {
      const v = variance(atS - releasedS);
      out[0] = v;
      out[1] = 0;
      out[2] = v;
    },
    largest: variance,
    smallest: variance,
  };
}

/** Spread that grows with the size of the cloud alike in all directions. */
export function sizeSpread(law: GrowthLaw, startVarianceM2 = 0): Spread {
  const variance = (ageS: number): number => grownVarianceM2(law, startVarianceM2, ageS) - startVarianceM2;
  return {
    gained(releasedS, atS, out) {
      const v = variance(atS - releasedS);
      out[0] = v;
      out[1] = 0;
      out[2] = v;
    },
    largest: variance,
    smallest: variance,
    from: (start) => sizeSpread(law, start),
  };
}

/** Tensor of constant mixing about its stated axis, m2/s: xx, xy, yy. */
export function mixingTensor(mixing: Mixing): [number, number, number] {
  if (mixing.kind !== 'constant') return [0, 0, 0];
  const axis = doubled(Math.sin(mixing.axisTowardDeg * RAD), Math.cos(mixing.axisTowardDeg * RAD));
  const [mean, half] = [(mixing.alongM2s + mixing.acrossM2s) / 2, (mixing.alongM2s - mixing.acrossM2s) / 2];
  return [mean + half * axis.cos, half * axis.sin, mean - half * axis.cos];
}

type Growing = Extract<Mixing, { kind: 'growing' }>;
const sizeLaws = { 'four-thirds': fourThirdsLaw, okubo: okuboSizeLaw, lake: lakeSizeLaw };

export const growthLawOf = ({ law, coefficient, mostM2s }: Growing): GrowthLaw => sizeLaws[law](coefficient ?? undefined, mostM2s ?? undefined);

/** Variance along each axis at an age, m2, where mixing grows alike in all directions; null where it is constant. */
export function agedVariance(mixing: Mixing): ((ageS: number, startM2: number) => number) | null {
  if (mixing.kind === 'okubo') return (ageS, startM2) => startM2 + mixing.varianceFactor * okuboVarianceM2(ageS);
  if (mixing.kind === 'growing') return (ageS, startM2) => grownVarianceM2(growthLawOf(mixing), startM2, ageS);
  return null;
}

const boundsOf = (alongM2s: number, acrossM2s: number) => ({
  largest: (ageS: number): number => 2 * Math.max(alongM2s, acrossM2s) * ageS,
  smallest: (ageS: number): number => 2 * Math.min(alongM2s, acrossM2s) * ageS,
});

/** The spread of a document's mixing under its current; `shore` is the unit vector along a straight shore, or null. */
export function spreadOf(mixing: Mixing, current: Current, fromS: number, toS: number, shore: { ex: number; ey: number } | null): Spread {
  if (mixing.kind === 'okubo') return okuboSpread(mixing.varianceFactor);
  if (mixing.kind === 'growing') return sizeSpread(growthLawOf(mixing));
  const { alongM2s, acrossM2s } = mixing;
  const axis = doubled(Math.sin(mixing.axisTowardDeg * RAD), Math.cos(mixing.axisTowardDeg * RAD));
  if (!mixing.turnsWithCurrent || alongM2s === acrossM2s) return shore ? alignedWithShore(alongM2s, acrossM2s, axis, shore) : fixedSpread(alongM2s, acrossM2s, axis.cos, axis.sin);
  const out = new Float64Array(2);
  const direction: AxisDirection = (tS, angle) => {
    current.velocity(tS, out);
    const speed2 = out[0]! * out[0]! + out[1]! * out[1]!;
    // At dead slack there is no direction: the stated axis stands in.
    angle[0] = speed2 < 1e-24 ? axis.cos : (out[0]! * out[0]! - out[1]! * out[1]!) / speed2;
    angle[1] = speed2 < 1e-24 ? axis.sin : (2 * out[0]! * out[1]!) / speed2;
  };
  if (current.isConstant || shore) {
    const angle = new Float64Array(2);
    if (shore) {
      const along = doubled(shore.ex, shore.ey);
      return fixedSpread(alongM2s, acrossM2s, along.cos, along.sin);
    }
    direction(0, angle);
    return fixedSpread(alongM2s, acrossM2s, angle[0]!, angle[1]!);
  }
  return turningSpread(alongM2s, acrossM2s, direction, cutsFor(current, fromS, toS));
}

const doubled = (ex: number, ey: number): { cos: number; sin: number } => ({ cos: ex * ex - ey * ey, sin: 2 * ex * ey });

/** Along and normal diffusivities of a fixed tensor at a shore; the off-diagonal part, which a wall does not allow, is left out. */
function alignedWithShore(alongM2s: number, acrossM2s: number, axis: { cos: number; sin: number }, shore: { ex: number; ey: number }): Spread {
  const line = doubled(shore.ex, shore.ey);
  const cosBetween = axis.cos * line.cos + axis.sin * line.sin;
  const mean = (alongM2s + acrossM2s) / 2;
  const half = ((alongM2s - acrossM2s) / 2) * cosBetween;
  return fixedSpread(mean + half, mean - half, line.cos, line.sin);
}

function cutsFor(current: Current, fromS: number, toS: number): number[] {
  const cuts = [fromS, ...current.kinksS.filter((t) => t > fromS && t < toS), toS];
  const step = Math.min(current.shortestPeriodS / 96, toS - fromS);
  const out: number[] = [fromS];
  for (let i = 1; i < cuts.length; i++) {
    const n = Math.max(1, Math.ceil((cuts[i]! - cuts[i - 1]!) / step));
    for (let k = 1; k <= n; k++) out.push(cuts[i - 1]! + ((cuts[i]! - cuts[i - 1]!) * k) / n);
  }
  return out;
}
