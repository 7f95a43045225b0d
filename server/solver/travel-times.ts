import type { TravelTime } from '../../shared/schemas/estimate-result';

/** Leading edge at this share of the peak; the end at this one (Kilpatrick & Wilson 1989, USGS TWRI 3-A9, cut tails at a tenth). */
const EDGE_SHARE = 0.02;
const END_SHARE = 0.1;
/** Places at most: every kilometre, or every second where that were more. */
const MOST_PLACES = 60;

/** Whole kilometres of a reach between two chainages, downstream. */
export function chainagesKm(fromKm: number, toKm: number, everyKm: number): number[] {
  const out: number[] = [];
  for (let km = Math.floor(fromKm / everyKm) * everyKm; km >= toKm - 1e-9; km -= everyKm) out.push(km);
  return out;
}

/** Spacing of the table for a way of the given length, km: 1, 2, 5, 10 ... */
export function tableStepKm(lengthKm: number): number {
  const ladder = [1, 2, 5, 10, 20, 50, 100, 200, 500];
  return ladder.find((step) => lengthKm / step <= MOST_PLACES) ?? 1_000;
}

/** One row from a section mean at ascending times; null where nothing comes by. */
export function travelRow(reachId: string, chainageKm: number, timesS: ArrayLike<number>, means: ArrayLike<number>): TravelTime | null {
  let top = 0;
  for (let i = 1; i < means.length; i++) if (means[i]! > means[top]!) top = i;
  const peak = means[top] ?? 0;
  if (!(peak > 0)) return null;
  const cross = (i: number, level: number): number => timesS[i]! + ((timesS[i + 1]! - timesS[i]!) * (level - means[i]!)) / (means[i + 1]! - means[i]!);
  let first = 0;
  while (means[first]! < EDGE_SHARE * peak) first++;
  let last = means.length - 1;
  while (means[last]! < END_SHARE * peak) last--;
  return {
    reachId,
    chainageKm,
    leadingEdgeS: first === 0 ? timesS[0]! : cross(first - 1, EDGE_SHARE * peak),
    peakS: crestS(timesS, means, top),
    endS: last === means.length - 1 ? null : cross(last, END_SHARE * peak),
    peak,
  };
}

/** Time of the parabola's crest through the largest value and its neighbours. */
function crestS(timesS: ArrayLike<number>, means: ArrayLike<number>, i: number): number {
  if (i === 0 || i === means.length - 1) return timesS[i]!;
  const [h, k] = [timesS[i]! - timesS[i - 1]!, timesS[i + 1]! - timesS[i]!];
  const [down, up] = [(means[i]! - means[i - 1]!) / h, (means[i + 1]! - means[i]!) / k];
  return down <= 0 || up >= 0 ? timesS[i]! : (timesS[i - 1]! + timesS[i]!) / 2 + (((h + k) / 2) * down) / (down - up);
}
