/** A curve on common times with its standard errors (zeros for a closed form). */
export type OpinionCurve = { readonly receptorId: string; readonly values: ArrayLike<number>; readonly errors: ArrayLike<number> };

/** Where a curve passes a level, read off straight lines between times; null where it stays below. */
export function frontAndEnd(timesS: readonly number[], values: ArrayLike<number>, level: number): { frontS: number; endS: number } | null {
  const n = timesS.length;
  let first = 0;
  while (first < n && values[first]! < level) first++;
  if (first === n) return null;
  let last = n - 1;
  while (values[last]! < level) last--;
  const cross = (i: number, j: number): number => timesS[i]! + ((level - values[i]!) / (values[j]! - values[i]!)) * (timesS[j]! - timesS[i]!);
  return { frontS: first === 0 ? timesS[0]! : cross(first - 1, first), endS: last === n - 1 ? timesS[last]! : cross(last, last + 1) };
}

/** The largest value with its place; -1 for a curve of zeros. */
export function peakAt(values: ArrayLike<number>): number {
  let best = -1;
  for (let k = 0; k < values.length; k++) if (values[k]! > 0 && (best < 0 || values[k]! > values[best]!)) best = k;
  return best;
}

/** The curve raised or lowered by so many standard errors, never below zero. */
export const shifted = ({ values, errors }: OpinionCurve, standardErrors: number): Float64Array =>
  Float64Array.from({ length: values.length }, (_, k) => Math.max(0, values[k]! + standardErrors * errors[k]!));

/** A sampled curve read at other times by straight lines. */
export function readAt(timesS: readonly number[], values: readonly number[], at: readonly number[]): Float64Array {
  let i = 0;
  return Float64Array.from(at, (t) => {
    while (i < timesS.length - 2 && timesS[i + 1]! < t) i++;
    const span = timesS[i + 1]! - timesS[i]!;
    const z = span > 0 ? Math.min(1, Math.max(0, (t - timesS[i]!) / span)) : 0;
    return values[i]! + z * (values[i + 1]! - values[i]!);
  });
}
