import { CUBIC_FOOT_M3, KNOT_MPS } from '../../../../shared/units';

/** Units people type in, each with its size in SI. The first is the usual one. */
export type UnitScale = { unit: string; perUnit: number };

export const unitScales = {
  mass: [{ unit: 'kg', perUnit: 1 }, { unit: 't', perUnit: 1_000 }, { unit: 'g', perUnit: 1e-3 }],
  volume: [{ unit: 'm³', perUnit: 1 }, { unit: 'litres', perUnit: 1e-3 }],
  strength: [{ unit: 'g/l', perUnit: 1 }, { unit: '% w/v', perUnit: 10 }, { unit: 'mg/l', perUnit: 1e-3 }],
  density: [{ unit: 'kg/m³', perUnit: 1 }, { unit: 'kg/l', perUnit: 1_000 }],
  countDensity: [{ unit: 'counts/100 ml', perUnit: 1e4 }, { unit: 'counts/l', perUnit: 1e3 }],
  count: [{ unit: 'organisms', perUnit: 1 }],
  duration: [{ unit: 'min', perUnit: 60 }, { unit: 'h', perUnit: 3_600 }, { unit: 'd', perUnit: 86_400 }],
  discharge: [{ unit: 'm³/s', perUnit: 1 }, { unit: 'Ml/d', perUnit: 1_000 / 86_400 }, { unit: 'cfs', perUnit: CUBIC_FOOT_M3 }],
  speed: [{ unit: 'm/s', perUnit: 1 }, { unit: 'cm/s', perUnit: 0.01 }, { unit: 'knots', perUnit: KNOT_MPS }],
} as const satisfies Record<string, readonly UnitScale[]>;

/** Twelve figures are more than anybody types and fewer than binary rounding shows. */
const tidy = (value: number): number => Number(value.toPrecision(12));
export const toUnit = (si: number | null, scale: UnitScale): number | null => (si === null ? null : tidy(si / scale.perUnit));
export const fromUnit = (typed: number | null, scale: UnitScale): number | null => (typed === null ? null : tidy(typed * scale.perUnit));

/** The unit in which a stored figure reads shortest: the largest one that leaves it at 1 or more. */
export function readableScale(si: number | null, scales: readonly UnitScale[]): UnitScale {
  const usual = scales[0]!;
  if (si === null || si === 0) return usual;
  const fitting = [...scales].filter((scale) => Math.abs(si / scale.perUnit) >= 1).sort((a, b) => b.perUnit - a.perUnit);
  return Math.abs(si / usual.perUnit) >= 1 && Math.abs(si / usual.perUnit) < 1e4 ? usual : (fitting[0] ?? usual);
}
