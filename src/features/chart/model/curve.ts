import type { ReceptorAnswer } from '../../../../shared/schemas/estimate-result';

type Series = ReceptorAnswer['series'];

/** Value of a series at a time, linear between its rows; 0 outside them. */
export function seriesAt(timesS: readonly number[], values: readonly number[], atS: number): number {
  if (timesS.length === 0 || atS < timesS[0]! || atS > timesS[timesS.length - 1]!) return 0;
  let low = 0;
  let high = timesS.length - 1;
  while (high - low > 1) {
    const mid = (low + high) >> 1;
    if (timesS[mid]! <= atS) low = mid;
    else high = mid;
  }
  const span = timesS[high]! - timesS[low]!;
  return span === 0 ? values[high]! : values[low]! + ((values[high]! - values[low]!) * (atS - timesS[low]!)) / span;
}

/** Every so many rows, with the largest kept: enough for a table that people read. */
export function tableRows(series: Series, most: number): number[] {
  const n = series.timesS.length;
  if (n <= most) return Array.from({ length: n }, (_, i) => i);
  const step = Math.ceil(n / most);
  const peak = series.likely.indexOf(Math.max(...series.likely));
  return [...new Set([...Array.from({ length: Math.ceil(n / step) }, (_, i) => i * step), peak, n - 1])].sort((a, b) => a - b);
}

/** Part of the time axis worth drawing: where the curve is above a thousandth of its peak; all of it when there is next to nothing. */
export function drawnSpan(series: Series, horizonS: number, actionValue: number | null): [number, number] {
  const upper = series.high ?? series.likely;
  const floor = Math.max(...upper, 0) * 1e-3;
  const from = upper.findIndex((value) => value > floor && floor > 0);
  if (from === -1 || actionValue === null || floor < actionValue * 1e-6) return [0, horizonS];
  const last = upper.length - 1 - [...upper].reverse().findIndex((value) => value > floor);
  const margin = Math.max(900, (series.timesS[last]! - series.timesS[from]!) * 0.08);
  return [Math.max(0, series.timesS[from]! - margin), Math.min(horizonS, series.timesS[last]! + margin)];
}
