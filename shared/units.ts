/** Conversions at the edge: SI inside (kg/m3, counts/m3), trade units where people read and type. */

export const concentrationUnits = ['ug/l', 'mg/l', 'counts/100ml'] as const;
export type ConcentrationUnit = (typeof concentrationUnits)[number];

/** kg/m3 in one ug/l or mg/l; counts/m3 in one count per 100 ml. 1 mg/l = 1 g/m3. */
const perUnit: Record<ConcentrationUnit, number> = { 'ug/l': 1e-6, 'mg/l': 1e-3, 'counts/100ml': 1e4 };

export const unitLabel: Record<ConcentrationUnit, string> = { 'ug/l': 'µg/l', 'mg/l': 'mg/l', 'counts/100ml': 'counts/100 ml' };

export const fromConcentrationUnit = (value: number, unit: ConcentrationUnit): number => value * perUnit[unit];
export const toConcentrationUnit = (valueSi: number, unit: ConcentrationUnit): number => valueSi / perUnit[unit];

/** µg/l below 1 mg/l, mg/l from there on; counts per 100 ml for organisms. */
export function displayUnitOf(valueSi: number, measure: 'mass' | 'count'): ConcentrationUnit {
  if (measure === 'count') return 'counts/100ml';
  return valueSi < 1e-3 ? 'ug/l' : 'mg/l';
}

/** First-order rate from a half-life, 1/s. */
export const rateFromHalfLife = (halfLifeS: number): number => Math.LN2 / halfLifeS;
/** First-order rate from T90, the time in which 90 % die, 1/s. */
export const rateFromT90 = (t90S: number): number => Math.LN10 / t90S;

export const KNOT_MPS = 1_852 / 3_600;
export const CUBIC_FOOT_M3 = 0.3048 ** 3;
