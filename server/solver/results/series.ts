import type { ActionAnswer, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import type { Curve } from './curve';

const MOST_POINTS = 300;

/** The curves to be drawn: samples, peak, and every crossing at its own value; thinned where they are long. */
export function thinned(curves: { low: Curve | null; likely: Curve; high: Curve | null }, answers: readonly ActionAnswer[]): ReceptorAnswer['series'] {
  const { likely } = curves;
  const crossings = answers.flatMap((answer) => answer.pulses.flatMap((pulse) => [pulse.startS, pulse.endS]));
  const kept = new Set([likely.peakS, ...crossings]);
  let timesS = [...new Set([...likely.timesS, ...crossings])].sort((a, b) => a - b);
  // Peak and crossings always stay, even where they alone are more than that.
  while (timesS.length > Math.max(MOST_POINTS, 2 * kept.size)) timesS = timesS.filter((t, i) => i % 2 === 0 || i === timesS.length - 1 || kept.has(t));
  const along = (curve: Curve): number[] => {
    const known = new Map(curve.timesS.map((t, i) => [t, curve.values[i]!] as const));
    return timesS.map((t) => known.get(t) ?? curve.f(t));
  };
  return { timesS, likely: along(likely), low: curves.low && along(curves.low), high: curves.high && along(curves.high) };
}
