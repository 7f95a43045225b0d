import type { Feature, UnitResponse } from '../types';

const MOST_FEATURES = 12;

/**
 * The answer of a place from its step-by-step values: cubic pieces through them with fourth-order slopes, held monotone
 * between steps except over a smooth crest, never below zero.
 * Source: Fritsch & Carlson 1980, SIAM J. Numer. Anal. 17: 238 (monotone pieces).
 */
export function seriesResponse(startS: number, stepS: number, layers: readonly Float64Array[], capPerKg: number): UnitResponse {
  return {
    features: featuresOf(startS, stepS, layers[0]!),
    at: (tS, withLoss) => Math.min(capPerKg, valueAt(layers[withLoss ? layers.length - 1 : 0]!, (tS - startS) / stepS)),
  };
}

/** Value at a fractional step; zero before the first, the last value after the last. */
export function valueAt(values: Float64Array, at: number): number {
  const last = values.length - 1;
  if (at <= 0) return 0;
  if (at >= last) return values[last]!;
  const i = Math.floor(at);
  const z = at - i;
  const [a, b] = [values[i]!, values[i + 1]!];
  let [da, db] = [slope(values, i), slope(values, i + 1)];
  const rise = b - a;
  if (!isCrest(values, i)) {
    const limit = (d: number): number => (d * rise <= 0 ? 0 : Math.sign(rise) * Math.min(Math.abs(d), 3 * Math.abs(rise)));
    [da, db] = [limit(da), limit(db)];
  }
  const cubic = a + z * (da + z * (3 * rise - 2 * da - db + z * (da + db - 2 * rise)));
  return Math.max(0, cubic);
}

function slope(values: Float64Array, i: number): number {
  const at = (k: number): number => (k < 0 ? 0 : values[Math.min(values.length - 1, k)]!);
  return (8 * (at(i + 1) - at(i - 1)) - (at(i + 2) - at(i - 2))) / 12;
}

/** A crest or trough spread over several steps: the second differences on both sides agree. */
function isCrest(values: Float64Array, i: number): boolean {
  if (i < 1 || i + 2 >= values.length) return false;
  const left = values[i - 1]! - 2 * values[i]! + values[i + 1]!;
  const right = values[i]! - 2 * values[i + 1]! + values[i + 2]!;
  return left * right > 0 && Math.abs(left) < 4 * Math.abs(right) && Math.abs(right) < 4 * Math.abs(left);
}

/** Crests, and the rises and falls through half the largest value, each with the time scale of its change. */
function featuresOf(startS: number, stepS: number, values: Float64Array): Feature[] {
  let top = 0;
  for (const value of values) top = Math.max(top, value);
  if (top === 0) return [];
  const out: Feature[] = [];
  for (let i = 1; i + 1 < values.length && out.length < MOST_FEATURES; i++) {
    const [before, now, after] = [values[i - 1]!, values[i]!, values[i + 1]!];
    const bend = 2 * now - before - after;
    if (now > 0.01 * top && now >= before && now > after && bend > 0) out.push({ atS: startS + i * stepS, scaleS: stepS * Math.min(50, Math.sqrt(now / bend)) });
    else if ((now - top / 2) * (after - top / 2) < 0) out.push({ atS: startS + i * stepS, scaleS: stepS * Math.min(50, (0.6 * top) / Math.abs(after - now)) });
  }
  return out;
}
