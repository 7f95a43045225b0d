import type { Feature, UnitResponse } from '../types';
import type { LossClock } from '../loss';
import type { MonotoneSeries } from './monotone-series';

const MOST_FEATURES = 24;
/** Humps below this share of the highest are left to the even samples. */
const LEAST_HUMP = 1e-3;

/** Answer of one place from recorded concentrations, 1/m3 a kilogram. `lossy` null: the same times the survival since an instant. */
export function recordedResponse(plain: MonotoneSeries, lossy: MonotoneSeries | null, instant: { atS: number; loss: LossClock } | null, capPerKg: number): UnitResponse {
  return {
    features: humpsOf(plain),
    at(tS, withLoss) {
      if (!withLoss) return Math.min(capPerKg, plain.at(tS));
      if (lossy) return Math.min(capPerKg, lossy.at(tS));
      const survival = instant ? Math.exp(instant.loss.exposure(instant.atS) - instant.loss.exposure(tS)) : 1;
      return Math.min(capPerKg, plain.at(tS) * survival);
    },
  };
}

/** Peaks of a recorded series, as wide as where it has fallen to 0.6 of each: a standard deviation of a normal curve. */
export function humpsOf({ timesS, values }: MonotoneSeries): Feature[] {
  const most = values.reduce((m, value) => Math.max(m, value), 0);
  const out: { feature: Feature; value: number }[] = [];
  for (let i = 1; i < values.length; i++) {
    const value = values[i]!;
    const isHump = value > values[i - 1]! && (i + 1 === values.length || value >= values[i + 1]!) && value > LEAST_HUMP * most;
    if (!isHump) continue;
    let before = i;
    while (before > 0 && values[before]! > 0.6 * value) before--;
    out.push({ feature: { atS: timesS[i]!, scaleS: Math.max(1, timesS[i]! - timesS[before]!) }, value });
  }
  return out.sort((a, b) => b.value - a.value).slice(0, MOST_FEATURES).map(({ feature }) => feature).sort((a, b) => a.atS - b.atS);
}
