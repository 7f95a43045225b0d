/**
 * How figures, times and places are written, everywhere: pages, mails, documents. Full precision inside, rounding only here.
 * Rounding follows common practice in the trade (no source): concentrations and masses to 2 significant figures, distances to
 * 0.1 km, arrivals to 5 min under 2 h, 15 min under 12 h, else 1 h, always to the safe side.
 */
import { civilAt } from './civil';
import type { LonLat } from './schemas/basics';
import { displayUnitOf, toConcentrationUnit, unitLabel, type ConcentrationUnit } from './units';

export type Measure = 'mass' | 'count';
export type Written = { text: string; unit: string };

const NARROW_SPACE = '\u202f';
const MINUS = '\u2212';
const NO_FIGURE = 'no estimate';
const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';
const superscript = (n: number): string => (n < 0 ? '⁻' : '') + [...String(Math.abs(n))].map((digit) => superscripts[Number(digit)]).join('');

/** Thin spaces between thousands, a real minus sign. */
function grouped(text: string): string {
  const [whole = '', part] = text.replace('-', MINUS).split('.');
  const spaced = whole.replace(/\B(?=(\d{3})+(?!\d))/g, NARROW_SPACE);
  return part === undefined ? spaced : `${spaced}.${part}`;
}

/** The nearest number with so many significant figures. */
export const roundFigures = (value: number, figures: number): number => (value === 0 || !Number.isFinite(value) ? value : Number(value.toPrecision(figures)));

/** A number with so many significant figures; powers of ten from ten million on and below a hundred-thousandth. */
export function formatNumber(value: number, figures = 2): string {
  if (!Number.isFinite(value)) return NO_FIGURE;
  if (value === 0) return '0';
  const rounded = roundFigures(value, figures);
  const size = Math.abs(rounded);
  if (size >= 1e7 || size < 1e-5) {
    const [digits = '', exponent = '0'] = rounded.toExponential(figures - 1).split('e');
    return `${grouped(digits)} × 10${superscript(Number(exponent))}`;
  }
  const decimals = Math.max(0, figures - 1 - Math.floor(Math.log10(size) + 1e-12));
  return grouped(rounded.toFixed(decimals));
}

/** A number as somebody entered it: nothing rounded away, thousands spaced. */
export const formatEntered = (value: number): string => (Number.isFinite(value) ? grouped(String(value)) : NO_FIGURE);

/** Below this a result says no more than that it is below, in µg/l and counts/100 ml. */
const SMALLEST_SHOWN: Record<ConcentrationUnit, number> = { 'ug/l': 0.001, 'mg/l': 1e-6, 'counts/100ml': 1 };

/** Concentration from kg/m3 or counts/m3: µg/l, mg/l or counts/100 ml, 2 significant figures. */
export function formatConcentration(valueSi: number, measure: Measure, options: { unit?: ConcentrationUnit; figures?: number } = {}): Written {
  const figures = options.figures ?? 2;
  const unit = options.unit ?? displayUnitOf(roundFigures(valueSi, figures), measure);
  const value = toConcentrationUnit(valueSi, unit);
  const smallest = SMALLEST_SHOWN[unit];
  const text = value > 0 && roundFigures(value, figures) < smallest ? `below ${formatEntered(smallest)}` : formatNumber(value, figures);
  return { text, unit: unitLabel[unit] };
}

/** Amount from kg or a count: mg, g, kg, t or organisms, 2 significant figures. */
export function formatAmount(kgOrCount: number, measure: Measure): Written {
  if (measure === 'count') return { text: formatNumber(kgOrCount), unit: 'organisms' };
  const size = Math.abs(roundFigures(kgOrCount, 2));
  if (size >= 10_000) return { text: formatNumber(kgOrCount / 1_000), unit: 't' };
  if (size >= 1 || size === 0 || !Number.isFinite(size)) return { text: formatNumber(kgOrCount), unit: 'kg' };
  if (size >= 1e-3) return { text: formatNumber(kgOrCount * 1e3), unit: 'g' };
  return { text: formatNumber(kgOrCount * 1e6), unit: 'mg' };
}

/** Ratio to an action value: "about 3 times", "about 0.4 times". */
export function formatRatio(ratio: number): string {
  return Number.isFinite(ratio) ? `about ${formatNumber(ratio, ratio >= 2 && ratio < 10 ? 1 : ratio < 1 ? 1 : 2)} times` : NO_FIGURE;
}

/* ---------- times ---------- */

const weekdays = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'];
const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const two = (n: number): string => String(n).padStart(2, '0');

/** "06:40" */
export function formatTimeOfDay(ms: number, offset: string): string {
  if (!Number.isFinite(ms)) return NO_FIGURE;
  const at = civilAt(ms, offset);
  return `${two(at.hour)}:${two(at.minute)}`;
}

/** "Mon 12 May" */
export function formatDay(ms: number, offset: string): string {
  if (!Number.isFinite(ms)) return NO_FIGURE;
  const at = civilAt(ms, offset);
  return `${weekdays[at.weekday]} ${at.day} ${months[at.month - 1]}`;
}

/** "Mon 12 May 2031" */
export const formatDayYear = (ms: number, offset: string): string => (Number.isFinite(ms) ? `${formatDay(ms, offset)} ${civilAt(ms, offset).year}` : NO_FIGURE);

/** "Mon 12 May 06:40" */
export const formatClock = (ms: number, offset: string): string => (Number.isFinite(ms) ? `${formatDay(ms, offset)} ${formatTimeOfDay(ms, offset)}` : NO_FIGURE);

/** "UTC-08:00" */
export const formatOffset = (offset: string): string => `UTC${offset === 'Z' ? '+00:00' : offset}`;

/** "Mon 12 May 06:40 (UTC-08:00)" */
export const formatClockOffset = (ms: number, offset: string): string => (Number.isFinite(ms) ? `${formatClock(ms, offset)} (${formatOffset(offset)})` : NO_FIGURE);

/** "Mon 12 May 08:55 to 10:40", or both days where they differ. */
export function formatClockSpan(fromMs: number, toMs: number, offset: string): string {
  const isOneDay = formatDayYear(fromMs, offset) === formatDayYear(toMs, offset);
  return `${formatClock(fromMs, offset)} to ${isOneDay ? formatTimeOfDay(toMs, offset) : formatClock(toMs, offset)}`;
}

/** Elapsed time beside clock time: "T+2:15", "T-0:10". */
export function formatElapsed(seconds: number): string {
  if (!Number.isFinite(seconds)) return NO_FIGURE;
  const minutes = Math.round(Math.abs(seconds) / 60);
  return `T${seconds < 0 && minutes > 0 ? '-' : '+'}${Math.floor(minutes / 60)}:${two(minutes % 60)}`;
}

/** "2 h 15 min", "3 d 4 h", "45 min", "20 s". */
export function formatDuration(seconds: number): string {
  if (!Number.isFinite(seconds)) return NO_FIGURE;
  const sign = seconds < 0 ? MINUS : '';
  const s = Math.abs(seconds);
  if (Math.round(s) < 60) return `${sign}${Math.round(s)} s`;
  const minutes = Math.round(s / 60);
  if (minutes < 48 * 60) return sign + joined([Math.floor(minutes / 60), 'h'], [minutes % 60, 'min']);
  const hours = Math.round(s / 3_600);
  return sign + joined([Math.floor(hours / 24), 'd'], [hours % 24, 'h']);
}

const joined = (...parts: [number, string][]): string =>
  parts
    .filter(([n]) => n > 0)
    .map(([n, unit]) => `${n} ${unit}`)
    .join(' ');

/** Rounding step of an arrival so long after the release, s. */
export const arrivalStepS = (seconds: number): number => (Math.abs(seconds) < 7_200 ? 300 : Math.abs(seconds) < 43_200 ? 900 : 3_600);

/** Times that the arithmetic left a millisecond beside a step count as being on it: rounding must not move them a whole step. */
const ON_STEP_S = 1e-3;

/** Rounds seconds after T0 to the safe side: arrivals early, ends late. */
export function roundArrival(seconds: number, side: 'early' | 'late'): number {
  if (!Number.isFinite(seconds)) return seconds;
  const step = arrivalStepS(seconds);
  const rounded = side === 'early' ? Math.floor((seconds + ON_STEP_S) / step) * step : Math.ceil((seconds - ON_STEP_S) / step) * step;
  return rounded === 0 ? 0 : rounded;
}

/* ---------- places ---------- */

/** "12.3 km"; a distance that rounds to nothing is "under 0.1 km". */
export function formatDistance(metres: number): string {
  if (!Number.isFinite(metres)) return NO_FIGURE;
  const km = Math.round(metres / 100) / 10;
  return km === 0 && metres !== 0 ? 'under 0.1 km' : `${grouped(km.toFixed(1))} km`;
}

/** "44.43070° S, 116.73210° W" or "44° 25.842′ S, 116° 43.926′ W": both good to about a metre or two. */
export function formatPosition([lon, lat]: LonLat, style: 'decimal' | 'minutes'): string {
  const write = style === 'decimal' ? (degrees: number) => `${degrees.toFixed(5)}°` : degreesMinutes;
  return `${write(Math.abs(lat))} ${lat < 0 ? 'S' : 'N'}, ${write(Math.abs(lon))} ${lon < 0 ? 'W' : 'E'}`;
}

function degreesMinutes(degrees: number): string {
  const thousandths = Math.round(degrees * 60_000);
  const minutes = (thousandths % 60_000) / 1_000;
  return `${Math.floor(thousandths / 60_000)}° ${minutes.toFixed(3).padStart(6, '0')}′`;
}
