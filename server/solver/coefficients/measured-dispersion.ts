import type { ChannelFlow } from './longitudinal';

export type MeasuredDispersion = ChannelFlow & { readonly river: string; readonly dispersionM2s: number };

const row = (river: string, widthM: number, depthM: number, speedMps: number, shearMps: number, dispersionM2s: number): MeasuredDispersion => ({ river, widthM, depthM, speedMps, shearMps, dispersionM2s });

/**
 * Dispersion measured in natural streams, and in one canal.
 * Source: Fischer et al. 1979, table 5.3 (originals Godfrey & Frederick 1970, Fischer 1968, McQuivey & Keefer 1974, Yotsukura
 * et al. 1970 and others). Rows are from memory; K/(H u*) of each agrees with the printed column to its rounding.
 */
export const measuredDispersion: readonly MeasuredDispersion[] = [
  row('Copper Creek below gauge, Virginia', 16, 0.49, 0.27, 0.08, 20),
  row('Copper Creek below gauge, Virginia', 18, 0.85, 0.6, 0.1, 21),
  row('Copper Creek below gauge, Virginia', 16, 0.49, 0.26, 0.08, 9.5),
  row('Copper Creek above gauge, Virginia', 19, 0.4, 0.16, 0.116, 9.9),
  row('Clinch River, Tennessee', 47, 0.85, 0.32, 0.067, 14),
  row('Clinch River, Tennessee', 60, 2.1, 0.94, 0.104, 54),
  row('Clinch River, Tennessee', 53, 2.1, 0.83, 0.107, 47),
  row('Powell River, Tennessee', 34, 0.85, 0.15, 0.055, 9.5),
  row('Clinch River, Virginia', 36, 0.58, 0.21, 0.049, 8.1),
  row('Coachella Canal, California', 24, 1.56, 0.71, 0.043, 9.6),
  row('Bayou Anacoco, Louisiana', 26, 0.94, 0.34, 0.067, 33),
  row('Bayou Anacoco, Louisiana', 37, 0.91, 0.4, 0.067, 39),
  row('Nooksack River, Washington', 64, 0.76, 0.67, 0.27, 35),
  row('Wind and Bighorn Rivers, Wyoming', 59, 1.1, 0.88, 0.12, 42),
  row('Wind and Bighorn Rivers, Wyoming', 69, 2.16, 1.55, 0.17, 160),
  row('John Day River, Oregon', 25, 0.58, 1.01, 0.14, 14),
  row('John Day River, Oregon', 34, 2.47, 0.82, 0.18, 65),
  row('Comite River, Louisiana', 16, 0.43, 0.37, 0.05, 14),
  row('Sabine River, Louisiana', 104, 2.04, 0.58, 0.05, 315),
  row('Sabine River, Louisiana', 127, 4.75, 0.64, 0.08, 670),
  row('Yadkin River, North Carolina', 70, 2.33, 0.43, 0.1, 110),
  row('Yadkin River, North Carolina', 72, 3.84, 0.76, 0.13, 260),
  row('Missouri River, Sioux City to Plattsmouth', 200, 2.7, 1.55, 0.074, 1_500),
];

/** Chicago Ship Canal, artificial: what regressions of natural streams miss by ten and a hundred times. Source: as above. */
export const measuredShipCanal: MeasuredDispersion = row('Chicago Ship Canal, artificial', 48.8, 8.07, 0.27, 0.0191, 3);
