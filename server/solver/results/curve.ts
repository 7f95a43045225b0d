import { findMaximum, findRoot } from '../math/roots';
import type { Weights } from '../release-profile';
import { RunningIntegral } from './running-integral';
import type { Samples, SiteResponse } from './sampling';

/** Crossings are found to this, s. */
const ROOT_TOLERANCE_S = 0.25;
const PEAK_TOLERANCE_S = 0.5;

export type Pulse = { startS: number; endS: number };

/** A concentration (or its moving mean) against time: sampled, with the function itself for refining. */
export type Curve = {
  readonly timesS: readonly number[];
  readonly values: readonly number[];
  readonly f: (tS: number) => number;
  readonly peak: number;
  readonly peakS: number;
};

/** The answer for one set of amounts, its humps refined and added to the samples. */
export function curveOf(response: SiteResponse, samples: Samples, weights: Weights): Curve {
  const values = samples.units.map((units) => response.total(units, weights));
  return withHumps(samples.timesS, values, (tS) => response.at(tS, weights));
}

/** The same curve for amounts that are `ratio` times as large; right while the larger one stays below the solubility or `cap` cuts it. */
export const scaledCurve = (curve: Curve, ratio: number, cap: number): Curve => ({
  timesS: curve.timesS,
  values: curve.values.map((value) => Math.min(cap, ratio * value)),
  f: (tS) => Math.min(cap, ratio * curve.f(tS)),
  peak: Math.min(cap, ratio * curve.peak),
  peakS: curve.peakS,
});

/** The moving mean over `windowS` of one set of amounts. */
export function meanCurveOf(response: SiteResponse, samples: Samples, weights: Weights, windowS: number): Curve {
  const integral = new RunningIntegral(samples, samples.units.map((units) => response.total(units, weights)));
  const horizonS = samples.timesS[samples.timesS.length - 1]!;
  const f = (tS: number): number => integral.mean(tS, windowS);
  const timesS = [...new Set([...samples.timesS, ...samples.timesS.map((t) => t + windowS)])].filter((t) => t <= horizonS).sort((a, b) => a - b);
  return withHumps(timesS, timesS.map(f), f);
}

/** Humps of at least a fifth of the largest value, or where the curve has none that large, are refined. */
function withHumps(timesS: readonly number[], values: readonly number[], f: (tS: number) => number): Curve {
  const largest = values.reduce((most, value) => Math.max(most, value), 0);
  const added: { t: number; value: number }[] = [];
  for (let i = 1; i + 1 < values.length && added.length < 24; i++) {
    const value = values[i]!;
    const isHump = value >= values[i - 1]! && value >= values[i + 1]! && value > (1 + 1e-7) * Math.min(values[i - 1]!, values[i + 1]!);
    if (!isHump || value < 1e-3 * largest) continue;
    const top = findMaximum(f, timesS[i - 1]!, timesS[i + 1]!, PEAK_TOLERANCE_S);
    if (top.value > value) added.push({ t: top.x, value: top.value });
  }
  const all = [...timesS.map((t, i) => ({ t, value: values[i]! })), ...added].sort((a, b) => a.t - b.t);
  const best = all.reduce((most, point) => (point.value > most.value ? point : most), all[0]!);
  return { timesS: all.map((point) => point.t), values: all.map((point) => point.value), f, peak: best.value, peakS: best.t };
}

/** Stretches of time above a level, their ends found by root finding on the function. */
export function pulsesAbove({ timesS, values, f }: Curve, level: number): Pulse[] {
  const out: Pulse[] = [];
  const last = timesS.length - 1;
  let startS: number | null = values[0]! > level ? timesS[0]! : null;
  for (let i = 1; i <= last; i++) {
    const [before, now] = [values[i - 1]! > level, values[i]! > level];
    if (before === now) continue;
    const root = findRoot((t) => f(t) - level, timesS[i - 1]!, timesS[i]!, values[i - 1]! - level, values[i]! - level, ROOT_TOLERANCE_S);
    if (now) startS = root;
    else if (startS !== null) {
      out.push({ startS, endS: root });
      startS = null;
    }
  }
  if (startS !== null) out.push({ startS, endS: timesS[last]! });
  return out;
}

/** First time a curve reaches a share of its peak; null for a curve of zeros. */
export function firstReach(curve: Curve, share: number): number | null {
  return curve.peak > 0 ? (pulsesAbove(curve, share * curve.peak)[0]?.startS ?? null) : null;
}
