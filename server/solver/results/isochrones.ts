import { Outliner } from '../../../shared/outlines';
import type { Level, Reached } from '../../../shared/schemas/estimate-result';
import { reachStates } from '../river/reach-state';
import type { GriddedField, PreparedField, RunInput } from '../types';

/** Round steps between lines, s: 1 min to 5 d. */
const STEPS_S = [60, 120, 300, 600, 900, 1_200, 1_800, 3_600, 5_400, 7_200, 10_800, 14_400, 21_600, 43_200, 86_400, 172_800, 432_000];
const MOST_LINES = 8;

/** The smallest round step that needs at most eight lines between the two times, and its multiples there. */
export function isochroneTimes(fromS: number, toS: number): number[] {
  const from = Math.max(0, fromS);
  const stepS = STEPS_S.find((step) => Math.floor(toS / step) - Math.floor(from / step) <= MOST_LINES) ?? STEPS_S[STEPS_S.length - 1]!;
  const out: number[] = [];
  for (let t = (Math.floor(from / stepS) + 1) * stepS; t <= toS; t += stepS) out.push(t);
  return out.slice(0, MOST_LINES);
}

const MOST_KEPT = 48;

/** Round times over a whole estimate at which a solver that steps keeps its state, so that lines of first arrival fall on them. */
export function evenRoundTimes(horizonS: number): number[] {
  const stepS = STEPS_S.find((step) => horizonS / step <= MOST_KEPT) ?? STEPS_S[STEPS_S.length - 1]!;
  return Array.from({ length: Math.floor(horizonS / stepS) }, (_, k) => (k + 1) * stepS);
}

/** The level whose first arrival is drawn: the lowest action value, or without one the lowest level. */
export const reachedLevel = (levels: readonly Level[]): Level | null => levels.find((level) => level.isActionValue) ?? levels[0] ?? null;

/** Largest value at each node up to each of the times, ascending. */
export function envelopesUntil(field: PreparedField, untilS: readonly number[], frameTimesS: readonly number[], input: RunInput): GriddedField[] {
  const weights = input.weights.likely;
  if (field.envelopes) return field.envelopes(untilS, weights);
  return untilS.map((until) => {
    input.meter.assertWanted();
    return field.envelope([...frameTimesS.filter((t) => t < until), until], weights);
  });
}

/** Outlines of what has been at or above the level by each time; a line that adds hardly anything to the one before is left out. */
export function reachedOf(input: RunInput, level: Level, timesS: readonly number[], fields: readonly GriddedField[], whole: GriddedField): Reached {
  const { water } = input.doc;
  const widths = new Map(water.kind === 'river' ? reachStates(water).map((state) => [state.reach.id, state.widthM] as const) : []);
  const outliner = new Outliner(water, (reach) => widths.get(reach.id) ?? 1);
  const isochrones: Reached['isochrones'] = [];
  let before = '';
  fields.forEach((field, k) => {
    input.meter.assertWanted();
    const outline = outliner.above(field.grid, field.values, level.value);
    const now = JSON.stringify([outline.lines, outline.fronts]);
    if (outline.polygons.length > 0 && now !== before) isochrones.push({ timeS: timesS[k]!, ...outline });
    before = now;
  });
  return { value: level.value, isActionValue: level.isActionValue, isochrones, envelopePolygons: outliner.above(whole.grid, whole.values, level.value).polygons };
}
