import type { OpenMotion } from '../open/puffs';

/** Drift and covariance of one step: dx, dy (m), then xx, xy, yy (m2). */
export const STEP_FIGURES = 5;

/** What carries and spreads a path on a plane, m east and north. */
export type PathMotion = {
  /** Writes drift and covariance of the step from `fromS` to `toS` for a path born at `bornS` that stands at (x, y). */
  step(x: number, y: number, bornS: number, fromS: number, toS: number, out: Float64Array): void;
  /** Longest step for which the above is good, s. */
  readonly longestStepS: number;
  /** True where the current knows no shore: what it carries onto land ends there. False where it runs along the shores. */
  readonly endsAtShore: boolean;
  /** Whether a place on the outline is open to other water: a path that comes there leaves. */
  readonly leavesAt?: (x: number, y: number) => boolean;
};

/** Steps of a path over an estimate of many tides. */
const MOST_STEPS = 400;

/**
 * Open water with a current uniform in space: drift is the exact integral of the current, covariance the exact gain of
 * a cloud of that age, so that any step is exact away from shores, with constant, turning and age-grown spread alike.
 */
export function uniformMotion({ current, spread, shear }: OpenMotion, horizonS: number): PathMotion {
  const before = new Float64Array(2);
  const after = new Float64Array(2);
  const gainedBefore = new Float64Array(3);
  const gained = new Float64Array(3);
  let [atS, ofS] = [Number.NaN, Number.NaN];
  return {
    // A tide carries paths to and fro within a period: shores on that way would not be seen by longer steps.
    longestStepS: Math.max(current.shortestPeriodS / 12, horizonS / MOST_STEPS),
    endsAtShore: true,
    step(x, y, bornS, fromS, toS, out) {
      if (shear) {
        // A path stands anywhere in its cloud: it is carried from where it is, and gains what a point does in that time.
        shear.place(fromS, toS, x, y, after);
        spread.gained(fromS, toS, gained);
        out[0] = after[0]! - x;
        out[1] = after[1]! - y;
        for (let k = 0; k < 3; k++) out[2 + k] = gained[k]!;
        return;
      }
      // A halved step asks again from the same time: the figures of its start are kept.
      if (fromS !== atS || bornS !== ofS) {
        current.displacement(fromS, before);
        spread.gained(bornS, fromS, gainedBefore);
        [atS, ofS] = [fromS, bornS];
      }
      current.displacement(toS, after);
      spread.gained(bornS, toS, gained);
      out[0] = after[0]! - before[0]!;
      out[1] = after[1]! - before[1]!;
      for (let k = 0; k < 3; k++) out[2 + k] = gained[k]! - gainedBefore[k]!;
    },
  };
}

/** What a solver of bounded water tells of its current and mixing at a place and time. */
export type WaterField = {
  /** Writes u, v (m/s), Kxx, Kxy, Kyy (m2/s), and the divergence of the tensor dKxx/dx + dKxy/dy, dKxy/dx + dKyy/dy (m/s). */
  sample(x: number, y: number, tS: number, out: Float64Array): void;
  /** Time in which a path sees the field change: cell size over largest speed, or a share of the tide, s. */
  readonly longestStepS: number;
};
export const FIELD_FIGURES = 7;

/**
 * Water whose current and mixing vary in space: drift u + div K (Ito's reading of div(K grad C)) and the tensor, both
 * taken half a step ahead of the path (midpoint rule, second order in the drift).
 * Source: Visser 1997, Mar. Ecol. Prog. Ser. 158: 275; Gardiner 1985, Handbook of Stochastic Methods, section 4.3.
 */
export function fieldMotion(field: WaterField): PathMotion {
  const here = new Float64Array(FIELD_FIGURES);
  return {
    longestStepS: field.longestStepS,
    endsAtShore: false,
    step(x, y, _bornS, fromS, toS, out) {
      const h = toS - fromS;
      field.sample(x, y, fromS, here);
      field.sample(x + 0.5 * h * (here[0]! + here[5]!), y + 0.5 * h * (here[1]! + here[6]!), fromS + 0.5 * h, here);
      out[0] = h * (here[0]! + here[5]!);
      out[1] = h * (here[1]! + here[6]!);
      for (let k = 0; k < 3; k++) out[2 + k] = 2 * h * here[2 + k]!;
    },
  };
}
