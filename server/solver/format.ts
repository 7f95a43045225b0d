import { displayUnitOf, toConcentrationUnit, unitLabel } from '../../shared/units';

/** Four significant digits, plain where that is readable. */
export function sig(value: number, digits = 4): string {
  if (!Number.isFinite(value)) return String(value);
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e6 || size < 1e-4) return value.toExponential(digits - 1);
  return String(Number(value.toPrecision(digits)));
}

/** A concentration in its trade unit, for sentences. */
export function concentrationText(valueSi: number, measure: 'mass' | 'count'): string {
  const unit = displayUnitOf(valueSi, measure);
  return `${sig(toConcentrationUnit(valueSi, unit), 3)} ${unitLabel[unit]}`;
}

/** Elapsed time in words: minutes below two hours, hours below three days, then days. */
export function durationText(seconds: number): string {
  const size = Math.abs(seconds);
  if (size < 7_200) return `${sig(seconds / 60, 3)} min`;
  return size < 259_200 ? `${sig(seconds / 3_600, 3)} h` : `${sig(seconds / 86_400, 3)} d`;
}

export const lengthText = (metres: number): string => (Math.abs(metres) < 2_000 ? `${sig(metres, 3)} m` : `${sig(metres / 1_000, 3)} km`);
