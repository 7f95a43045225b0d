import type { CurrentPart } from '../../../shared/schemas/estimate';

const RAD = Math.PI / 180;

/** A current uniform in space: velocity and its exact integral. East and north, m/s and m; `out` has length 2. */
export type Current = {
  velocity(tS: number, out: Float64Array): void;
  /** Integral of the velocity from T0 to t; t may be negative. */
  displacement(tS: number, out: Float64Array): void;
  /** No speed is above this, m/s, and no change of velocity faster than that, m/s2. */
  readonly maxSpeedMps: number;
  readonly maxAccelerationMps2: number;
  /** True where neither speed nor direction changes. */
  readonly isConstant: boolean;
  /** Kinks, where the velocity is not smooth. */
  readonly kinksS: readonly number[];
  /** Shortest period in it, s; Infinity without a tide. */
  readonly shortestPeriodS: number;
};

type Part = { velocity(tS: number, out: Float64Array): void; displacement(tS: number, out: Float64Array): void; maxMps: number; maxMps2: number };

/** Adds the parts up. Residual and wind drift are constant, the tide is an ellipse, a series is linear between its rows. */
export function currentOf(parts: readonly CurrentPart[]): Current {
  const steady = parts.filter((part) => part.kind === 'residual' || part.kind === 'wind');
  const varying = parts.filter((part) => part.kind === 'tide' || part.kind === 'series');
  const made = [constantPart(steady), ...varying.map((part) => (part.kind === 'tide' ? tidePart(part) : seriesPart(part.rows)))];
  const add = (which: 'velocity' | 'displacement') => (tS: number, out: Float64Array): void => {
    out[0] = 0;
    out[1] = 0;
    for (const part of made) part[which](tS, out);
  };
  return {
    velocity: add('velocity'),
    displacement: add('displacement'),
    maxSpeedMps: made.reduce((sum, part) => sum + part.maxMps, 0),
    maxAccelerationMps2: made.reduce((sum, part) => sum + part.maxMps2, 0),
    isConstant: varying.length === 0,
    kinksS: parts.flatMap((part) => (part.kind === 'series' ? part.rows.map((row) => row.atS) : [])).sort((a, b) => a - b),
    shortestPeriodS: parts.reduce((least, part) => (part.kind === 'tide' ? Math.min(least, part.periodS) : least), Infinity),
  };
}

type SteadyPart = Extract<CurrentPart, { kind: 'residual' | 'wind' }>;

/** Speed and direction of a part that does not change; wind drives water down the wind, turned by its stated angle. */
const steadyOf = (part: SteadyPart): [speedMps: number, towardDeg: number] =>
  part.kind === 'residual' ? [part.speedMps, part.towardDeg] : [part.windSpeedMps * part.driftFraction, part.windFromDeg + 180 + part.turnDeg];

function constantPart(parts: readonly SteadyPart[]): Part {
  let u = 0;
  let v = 0;
  for (const [speedMps, towardDeg] of parts.map(steadyOf)) {
    u += speedMps * Math.sin(towardDeg * RAD);
    v += speedMps * Math.cos(towardDeg * RAD);
  }
  return {
    velocity(_tS, out) {
      out[0]! += u;
      out[1]! += v;
    },
    displacement(tS, out) {
      out[0]! += u * tS;
      out[1]! += v * tS;
    },
    maxMps: Math.hypot(u, v),
    maxMps2: 0,
  };
}

/** major cos(w (t - tm)) along the flood, minor sin(w (t - tm)) at right angles to its left: positive minor turns anticlockwise. */
function tidePart(part: Extract<CurrentPart, { kind: 'tide' }>): Part {
  const w = (2 * Math.PI) / part.periodS;
  const ex = Math.sin(part.floodTowardDeg * RAD);
  const ey = Math.cos(part.floodTowardDeg * RAD);
  const phase = w * part.maxFloodS;
  const [sinPhase, cosPhase] = [Math.sin(phase), Math.cos(phase)];
  const addTurned = (out: Float64Array, along: number, left: number): void => {
    out[0]! += along * ex - left * ey;
    out[1]! += along * ey + left * ex;
  };
  return {
    velocity: (tS, out) => addTurned(out, part.majorMps * Math.cos(w * tS - phase), part.minorMps * Math.sin(w * tS - phase)),
    displacement: (tS, out) =>
      addTurned(out, (part.majorMps / w) * (Math.sin(w * tS - phase) + sinPhase), part.minorMps === 0 ? 0 : (part.minorMps / w) * (cosPhase - Math.cos(w * tS - phase))),
    maxMps: Math.max(part.majorMps, Math.abs(part.minorMps)),
    maxMps2: w * Math.max(part.majorMps, Math.abs(part.minorMps)),
  };
}

/** Linear between rows, so that the displacement is a parabola between them; the ends are held. */
function seriesPart(rows: readonly { atS: number; eastMps: number; northMps: number }[]): Part {
  const n = rows.length;
  const sumX = new Float64Array(n);
  const sumY = new Float64Array(n);
  for (let i = 1; i < n; i++) {
    const h = rows[i]!.atS - rows[i - 1]!.atS;
    sumX[i] = sumX[i - 1]! + (h * (rows[i]!.eastMps + rows[i - 1]!.eastMps)) / 2;
    sumY[i] = sumY[i - 1]! + (h * (rows[i]!.northMps + rows[i - 1]!.northMps)) / 2;
  }
  const rowBefore = (t: number): number => {
    let low = 0;
    let high = n - 2;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (rows[mid]!.atS <= t) low = mid;
      else high = mid - 1;
    }
    return low;
  };
  const first = rows[0]!;
  const last = rows[n - 1]!;
  const velocity = (t: number, out: Float64Array): void => {
    const held = t <= first.atS ? first : t >= last.atS ? last : null;
    if (held) {
      out[0]! += held.eastMps;
      out[1]! += held.northMps;
      return;
    }
    const i = rowBefore(t);
    const a = rows[i]!;
    const b = rows[i + 1]!;
    const z = (t - a.atS) / (b.atS - a.atS);
    out[0]! += a.eastMps + z * (b.eastMps - a.eastMps);
    out[1]! += a.northMps + z * (b.northMps - a.northMps);
  };
  const now = new Float64Array(2);
  const sinceFirst = (t: number, out: Float64Array, sign: number): void => {
    const i = t <= first.atS ? 0 : t >= last.atS ? n - 1 : rowBefore(t);
    now.fill(0);
    velocity(t, now);
    const h = t - rows[i]!.atS;
    out[0]! += sign * (sumX[i]! + (h * (rows[i]!.eastMps + now[0]!)) / 2);
    out[1]! += sign * (sumY[i]! + (h * (rows[i]!.northMps + now[1]!)) / 2);
  };
  const atT0 = new Float64Array(2);
  sinceFirst(0, atT0, 1);
  return {
    velocity,
    displacement(t, out) {
      sinceFirst(t, out, 1);
      out[0]! -= atT0[0]!;
      out[1]! -= atT0[1]!;
    },
    maxMps2: rows.slice(1).reduce((most, row, i) => Math.max(most, Math.hypot(row.eastMps - rows[i]!.eastMps, row.northMps - rows[i]!.northMps) / (row.atS - rows[i]!.atS)), 0),
    maxMps: rows.reduce((most, row) => Math.max(most, Math.hypot(row.eastMps, row.northMps)), 0),
  };
}

/** Keeps the part of a current along a direction (unit vector): what a straight shore allows. */
export function alongShore(current: Current, ex: number, ey: number): Current {
  const project = (out: Float64Array): void => {
    const along = out[0]! * ex + out[1]! * ey;
    out[0] = along * ex;
    out[1] = along * ey;
  };
  return {
    ...current,
    velocity(tS, out) {
      current.velocity(tS, out);
      project(out);
    },
    displacement(tS, out) {
      current.displacement(tS, out);
      project(out);
    },
  };
}
