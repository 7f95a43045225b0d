import type { ActionAnswer, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import type { Weights } from '../release-profile';
import type { Curve } from './curve';
import type { SiteResponse } from './sampling';

const MOST_POINTS = 300;

/** The curve to be drawn: samples, peak, and every crossing at its own value; thinned where it is long. */
export function thinned(response: SiteResponse, curve: Curve, sets: { low: Weights | null; high: Weights | null }, answers: readonly ActionAnswer[]): ReceptorAnswer['series'] {
  const crossings = answers.flatMap((answer) => answer.pulses.flatMap((pulse) => [pulse.startS, pulse.endS]));
  const points = new Map(curve.timesS.map((t, i) => [t, curve.values[i]!] as const));
  for (const t of crossings) if (!points.has(t)) points.set(t, curve.f(t));
  const kept = new Set([curve.peakS, ...crossings]);
  let timesS = [...points.keys()].sort((a, b) => a - b);
  while (timesS.length > MOST_POINTS) timesS = timesS.filter((t, i) => i % 2 === 0 || i === timesS.length - 1 || kept.has(t));
  const likely = timesS.map((t) => points.get(t)!);
  const scaled = (set: Weights | null): number[] | null => (set === null ? null : timesS.map((t) => response.at(t, set)));
  return { timesS, likely, low: scaled(sets.low), high: scaled(sets.high) };
}
