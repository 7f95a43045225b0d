import { formatClock, formatConcentration, formatDuration, formatElapsed, formatTimeOfDay, roundArrival, type Measure } from '../../../../shared/format';
import type { ActionAnswer, ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { displayUnitOf } from '../../../../shared/units';
import { decidingAnswer, latestEndS } from './rail-lanes';

/** Keeps a figure on the line of its unit. */
const NO_BREAK = '\u00a0';

export type Clock = { startMs: number; offset: string };
export type Written = { clock: string; elapsed: string };

/** A time rounded to the safe side: arrivals early, ends late. */
export const writeTime = ({ startMs, offset }: Clock, s: number | null, side: 'early' | 'late'): Written | null => {
  if (s === null) return null;
  const rounded = roundArrival(s, side);
  return { clock: formatClock(startMs + rounded * 1_000, offset), elapsed: formatElapsed(rounded) };
};

export type ArrivalWords = { earliest: Written | null; likely: Written | null; latest: Written | null; end: Written | null; endOpen: boolean; timeAbove: string };

/** Earliest, likely and latest arrival and the end of one action answer. The latest arrival too is rounded early: nobody is hurt by that. */
export function arrivalWords(clock: Clock, answer: ActionAnswer): ArrivalWords {
  const { early, likely, late } = answer.arrivalS;
  const longest = answer.timeAboveS.high ?? answer.timeAboveS.likely;
  return {
    earliest: writeTime(clock, early ?? likely ?? late, 'early'),
    likely: writeTime(clock, likely, 'early'),
    latest: writeTime(clock, late, 'early'),
    end: writeTime(clock, latestEndS(answer), 'late'),
    endOpen: answer.endOpen,
    timeAbove: longest === null ? '–' : `up to ${formatDuration(Math.ceil(longest / 300) * 300)}`,
  };
}

/** "08:55 to 10:40, likely 09:50", with the day where it is not that of T0. */
export function arrivalSpan(clock: Clock, answer: ReceptorAnswer): string | null {
  const deciding = decidingAnswer(answer);
  if (deciding?.verdict !== 'may exceed') return null;
  const from = deciding.arrivalS.early ?? deciding.arrivalS.likely ?? deciding.arrivalS.late;
  if (from === null) return null;
  const at = (s: number) => clock.startMs + roundArrival(s, 'early') * 1_000;
  const { late } = deciding.arrivalS;
  const first = formatClock(at(from), clock.offset);
  if (late === null || at(late) === at(from)) return first;
  const isSameDay = formatClock(at(late), clock.offset).slice(0, -5) === first.slice(0, -5);
  return `${first} to ${isSameDay ? formatTimeOfDay(at(late), clock.offset) : formatClock(at(late), clock.offset)}`;
}

export const sayConcentration = (value: number | null, measure: Measure): string => {
  if (value === null) return '–';
  const { text, unit } = formatConcentration(value, measure);
  return `${text}${NO_BREAK}${unit}`;
};

/** "11 to 42 mg/l, likely 21 mg/l": one unit, that of the largest. */
export function sayRange({ low, likely, high }: { low: number | null; likely: number | null; high: number | null }, measure: Measure): string {
  if (likely === null) return 'no estimate';
  if (likely === 0 && (high ?? 0) === 0) return 'not reached in this estimate';
  if (low === null && high === null) return sayConcentration(likely, measure);
  const largest = formatConcentration(high ?? likely, measure);
  const inUnit = (value: number) => formatConcentration(value, measure, { unit: displayUnitOf(high ?? likely, measure) }).text;
  if (largest.text.startsWith('below')) return `${largest.text}${NO_BREAK}${largest.unit}`;
  return `${inUnit(low ?? likely)} to ${inUnit(high ?? likely)}${NO_BREAK}${largest.unit}, likely ${inUnit(likely)}${NO_BREAK}${largest.unit}`;
}

/** Dose as concentration times hours: "86 mg/l·h". */
export function sayDose(dose: number | null, measure: Measure): string {
  if (dose === null) return '–';
  const { text, unit } = formatConcentration(dose / 3_600, measure);
  return `${text} ${unit}·h`;
}
