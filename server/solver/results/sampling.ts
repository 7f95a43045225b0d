import type { Feature, ReceptorSite } from '../types';
import type { Weights } from '../release-profile';

/** Times with the unit answers of every release; `parts` are stretches with their middle, for Simpson's rule. */
export type Samples = {
  readonly timesS: readonly number[];
  /** units[i][r]: concentration per kilogram of release r at time i. */
  readonly units: readonly Float64Array[];
  /** Positions in `timesS` of start, middle and end of each stretch. */
  readonly parts: readonly (readonly [number, number, number])[];
};

/** Unit answers of all releases at one place. */
export class SiteResponse {
  constructor(
    private readonly site: ReceptorSite,
    private readonly solubility: number,
    private readonly withLoss: boolean,
  ) {}

  units(tS: number): Float64Array {
    const out = new Float64Array(this.site.responses.length);
    this.site.responses.forEach((response, r) => (out[r] = response ? response.at(tS, this.withLoss) : 0));
    return out;
  }

  total(units: Float64Array, weights: Weights): number {
    let sum = 0;
    for (let r = 0; r < units.length; r++) sum += units[r]! * weights[r]!;
    return Math.min(sum, this.solubility);
  }

  at(tS: number, weights: Weights): number {
    let sum = 0;
    for (let r = 0; r < weights.length; r++) {
      const response = this.site.responses[r];
      if (response && weights[r] !== 0) sum += weights[r]! * response.at(tS, this.withLoss);
    }
    return Math.min(sum, this.solubility);
  }
}

const OFFSETS = [-6, -4, -3, -2, -1, 0, 1, 2, 3, 5, 8];
/** A stretch is halved while its middle is farther than this share of the peak from the straight line. */
const LINE_TOLERANCE = 0.004;

export type SamplingEffort = { readonly most: number; readonly even: number };

/**
 * Samples the answer over [0, horizon]: even times, the neighbourhood of each feature, then halving where a straight
 * line would show. Enough for a drawn curve, for brackets of every crossing, and for Simpson's rule on the dose.
 */
export function sampleSite(response: SiteResponse, features: readonly Feature[], weights: Weights, horizonS: number, effort: SamplingEffort): Samples {
  const known = new Map<number, Float64Array>();
  const at = (tS: number): number => {
    let units = known.get(tS);
    if (!units) {
      units = response.units(tS);
      known.set(tS, units);
    }
    return response.total(units, weights);
  };
  let stretches = pairs(startTimes(features, horizonS, effort)).map(([a, b]) => [a, (a + b) / 2, b] as const);
  const done: (readonly [number, number, number])[] = [];
  while (stretches.length > 0) {
    for (const stretch of stretches) stretch.forEach(at);
    const peak = Math.max(...[...known.values()].map((units) => response.total(units, weights)));
    const next: (readonly [number, number, number])[] = [];
    for (const stretch of stretches) {
      const [a, mid, b] = stretch;
      const isStraight = Math.abs(at(mid) - (at(a) + at(b)) / 2) <= LINE_TOLERANCE * peak;
      if (isStraight || known.size + next.length > effort.most || b - a < 1) done.push(stretch);
      else next.push([a, (a + mid) / 2, mid], [mid, (mid + b) / 2, b]);
    }
    stretches = next;
  }
  const timesS = [...known.keys()].sort((a, b) => a - b);
  const index = new Map(timesS.map((t, i) => [t, i] as const));
  const parts = done.sort((p, q) => p[0] - q[0]).map(([a, mid, b]) => [index.get(a)!, index.get(mid)!, index.get(b)!] as const);
  return { timesS, units: timesS.map((t) => known.get(t)!), parts };
}

const pairs = (times: readonly number[]): [number, number][] => times.slice(1).map((b, i) => [times[i]!, b]);

/** Even times and feature neighbourhoods, thinned where they crowd. */
function startTimes(features: readonly Feature[], horizonS: number, effort: SamplingEffort): number[] {
  const wanted: { t: number; gap: number }[] = [];
  for (let i = 0; i <= effort.even; i++) wanted.push({ t: (horizonS * i) / effort.even, gap: 0.4 * (horizonS / effort.even) });
  for (const { atS, scaleS } of features) for (const k of OFFSETS) wanted.push({ t: atS + k * scaleS, gap: 0.4 * scaleS });
  wanted.sort((a, b) => a.t - b.t || a.gap - b.gap);
  // Many passages crowd the list: the gaps grow with their number.
  const crowd = Math.max(1, (3 * wanted.length) / effort.most);
  const out = [0];
  for (const { t, gap } of wanted) if (t > 0 && t < horizonS && t - out[out.length - 1]! > Math.max(0.5, crowd * gap)) out.push(t);
  if (horizonS - out[out.length - 1]! < 0.5) out.pop();
  out.push(horizonS);
  return out;
}
