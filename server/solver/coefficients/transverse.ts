/** Transverse mixing over depth times shear velocity, e/(H u*), by kind of channel: likely value and range, plain. */
export type TransverseRatio = { readonly channel: string; readonly likely: number; readonly low: number; readonly high: number; readonly source: string };

export const transverseRatios: readonly TransverseRatio[] = [
  { channel: 'straight laboratory channel', likely: 0.15, low: 0.1, high: 0.2, source: 'Fischer et al. 1979, section 5.1.3' },
  { channel: 'logarithmic plane', likely: 0.23, low: 0.23, high: 0.23, source: 'Elder 1959, J. Fluid Mech. 5: 544' },
  { channel: 'straight natural channel or canal', likely: 0.22, low: 0.15, high: 0.3, source: 'Rutherford 1994, River Mixing (from memory)' },
  { channel: 'gently meandering, moderate irregularity', likely: 0.6, low: 0.3, high: 0.9, source: 'Fischer et al. 1979, section 5.1.3: 0.6 within a half' },
  { channel: 'meandering', likely: 0.6, low: 0.3, high: 0.9, source: 'Rutherford 1994, River Mixing (from memory)' },
  { channel: 'sharp bends, groynes', likely: 2, low: 1, high: 3, source: 'Rutherford 1994, River Mixing (from memory)' },
];

export type MeasuredTransverse = { readonly river: string; readonly widthM: number; readonly depthM: number; readonly speedMps: number; readonly shearMps: number; readonly transverseM2s: number };

const row = (river: string, widthM: number, depthM: number, speedMps: number, shearMps: number, transverseM2s: number): MeasuredTransverse => ({ river, widthM, depthM, speedMps, shearMps, transverseM2s });

/**
 * Measured transverse mixing. Sources: Fischer et al. 1979, tables 5.1 and 5.2; Beltaos 1980, Can. J. Civ. Eng. 7: 575; Holley &
 * Abraham 1973, J. Hydraul. Div. ASCE 99: 2313; Missouri: Yotsukura, Fischer & Sayre 1970, USGS WSP 1899-G. Rows from memory but the Missouri's.
 */
export const measuredTransverse: readonly MeasuredTransverse[] = [
  row('Atrisco Canal, New Mexico, straight', 18.3, 0.67, 0.645, 0.062, 0.0102),
  row('Bernardo Conveyance Channel, New Mexico', 20.1, 0.7, 1.25, 0.061, 0.013),
  row('South River, Virginia, few bends', 18.2, 0.4, 0.21, 0.04, 0.0047),
  row('IJssel, Netherlands', 69.5, 4, 0.96, 0.075, 0.15),
  row('Missouri River near Blair, Nebraska', 183, 2.74, 1.74, 0.073, 0.12),
  row('Mackenzie River, Fort Simpson to Norman Wells', 1_240, 6.7, 1.77, 0.152, 0.67),
  row('Athabasca River below Fort McMurray', 373, 2.2, 0.95, 0.056, 0.092),
  row('Athabasca River below Athabasca', 320, 2.05, 0.86, 0.079, 0.067),
  row('North Saskatchewan River', 213, 1.55, 0.58, 0.08, 0.031),
  row('Bow River at Calgary', 104, 1, 1.05, 0.139, 0.085),
  row('Beaver River near Cold Lake', 42.7, 0.96, 0.5, 0.044, 0.042),
  row('Grand River below Kitchener', 59.2, 0.506, 0.352, 0.069, 0.009),
];
