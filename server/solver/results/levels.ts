import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { Level } from '../../../shared/schemas/estimate-result';
import { concentrationText } from '../format';

export const MOST_LEVELS = 7;
/** Decade ladders from fine to coarse: 1-2-5, half decades, decades. */
const LADDERS = [[1, 2, 5], [1, 3], [1]];

/**
 * Contour levels, ascending, at most seven: every distinct action value (the lowest seven), then round steps up to the
 * `top` concentration, as fine as fit. Without action values the steps run over three decades below the top.
 */
export function contourLevels(doc: EstimateDocument, top: number): Level[] {
  const label = (value: number): string => concentrationText(value, doc.substance.measure);
  const values = [...new Set(doc.receptors.flatMap((receptor) => receptor.actionValues.map((item) => item.value)))].sort((a, b) => a - b).slice(0, MOST_LEVELS);
  const actions = values.map((value): Level => ({ value, isActionValue: true, label: label(value) }));
  const ceiling = Math.max(top, (values[values.length - 1] ?? 0) * 1.5, 1e-30);
  const bottom = values.length > 0 ? Math.min(values[0]! / 12, ceiling / 2) : ceiling / 1_000;
  const round = roundSteps(bottom, ceiling, values, MOST_LEVELS - values.length);
  return [...actions, ...round.map((value): Level => ({ value, isActionValue: false, label: label(value) }))].sort((a, b) => a.value - b.value);
}

function roundSteps(bottom: number, top: number, taken: readonly number[], room: number): number[] {
  if (room <= 0) return [];
  const lists = LADDERS.map((ladder) => {
    const out: number[] = [];
    for (let decade = Math.floor(Math.log10(bottom)); decade <= Math.ceil(Math.log10(top)); decade++)
      for (const mantissa of ladder) {
        const value = Number(`${mantissa}e${decade}`);
        const isFree = taken.every((level) => Math.max(value / level, level / value) > 1.6);
        if (value >= bottom && value <= top && isFree) out.push(value);
      }
    return out;
  });
  const fitting = lists.find((list) => list.length <= room);
  // Even decades are too many: keep them spread over the range.
  if (fitting) return fitting;
  const decades = lists[lists.length - 1]!;
  return Array.from({ length: room }, (_, i) => decades[Math.round((i * (decades.length - 1)) / Math.max(1, room - 1))]!).filter((value, i, all) => all.indexOf(value) === i);
}
