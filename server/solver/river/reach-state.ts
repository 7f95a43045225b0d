import type { HydraulicsRow, Reach, RiverWater } from '../../../shared/schemas/estimate';
import { dispersionFischer, FALLBACK_U_OVER_USTAR, shearVelocityFromManning, shearVelocityFromSlope, transverseFischer } from '../physics/channel-mixing';

/** A reach at the discharge of the estimate. */
export type ReachState = {
  readonly reach: Reach;
  readonly index: number;
  readonly dischargeM3s: number;
  readonly widthM: number;
  readonly depthM: number;
  readonly speedMps: number;
  readonly shearMps: number;
  readonly dispersionM2s: number;
  readonly transverseM2s: number;
  /** How width, depth and velocity were found. */
  readonly flowHow: string;
  readonly shearHow: string;
};

/**
 * Exponents of width, depth and velocity with discharge at one place, used where only one flow is known. They add to 1.
 * Source: in the manner of Leopold & Maddock 1953, USGS Professional Paper 252 (these values from memory).
 */
export const STATION_EXPONENTS = { widthM: 0.12, depthM: 0.45, velocityMps: 0.43 } as const;
type Scaled = keyof typeof STATION_EXPONENTS;

/** Width, depth or velocity at a discharge: straight lines between the named flows on log-log paper, carried on at the ends. */
export function powerLaw(rows: readonly HydraulicsRow[], what: Scaled, dischargeM3s: number): number {
  const sorted = [...rows].sort((a, b) => a.dischargeM3s - b.dischargeM3s);
  if (sorted.length === 1) return sorted[0]![what] * (dischargeM3s / sorted[0]!.dischargeM3s) ** STATION_EXPONENTS[what];
  let i = 1;
  while (i < sorted.length - 1 && sorted[i]!.dischargeM3s < dischargeM3s) i++;
  const a = sorted[i - 1]!;
  const b = sorted[i]!;
  if (a.dischargeM3s === b.dischargeM3s) return a[what];
  const exponent = Math.log(b[what] / a[what]) / Math.log(b.dischargeM3s / a.dischargeM3s);
  return a[what] * (dischargeM3s / a.dischargeM3s) ** exponent;
}

function hydraulicsOf(reach: Reach, flow: RiverWater['flow']): { row: HydraulicsRow; how: string } {
  const set = flow.discharges.find((item) => item.reachId === reach.id)?.dischargeM3s;
  const named = reach.hydraulics.find((row) => row.flowName === flow.name);
  if (set === undefined && named) return { row: named, how: `named flow ${named.flowName}` };
  const dischargeM3s = set ?? reach.hydraulics[0]!.dischargeM3s;
  const value = (what: Scaled): number => powerLaw(reach.hydraulics, what, dischargeM3s);
  const how =
    reach.hydraulics.length > 1
      ? `discharge set; power laws through ${reach.hydraulics.map((row) => row.flowName).join(', ')}`
      : `discharge set; width, depth, velocity with Q^0.12, Q^0.45, Q^0.43 from ${reach.hydraulics[0]!.flowName} (from memory)`;
  return { row: { flowName: flow.name, exceededPercent: null, dischargeM3s, widthM: value('widthM'), depthM: value('depthM'), velocityMps: value('velocityMps') }, how };
}

function shearOf(reach: Reach, row: HydraulicsRow): { shearMps: number; how: string } {
  if (reach.slope !== null) return { shearMps: shearVelocityFromSlope(row.depthM, reach.slope), how: 'u* = √(g H S)' };
  if (reach.manningN !== null) return { shearMps: shearVelocityFromManning(row.velocityMps, reach.manningN, row.widthM, row.depthM), how: 'u* = U n √g / R^(1/6)' };
  return { shearMps: row.velocityMps / FALLBACK_U_OVER_USTAR, how: 'u* = U/10: neither slope nor roughness given (common practice, no source)' };
}

/** Every reach of the network at the flow of the estimate. */
export const reachStates = (water: RiverWater): ReachState[] =>
  water.reaches.map((reach, index) => {
    const { row, how: flowHow } = hydraulicsOf(reach, water.flow);
    const { shearMps, how: shearHow } = shearOf(reach, row);
    return {
      reach,
      index,
      dischargeM3s: row.dischargeM3s,
      widthM: row.widthM,
      depthM: row.depthM,
      speedMps: row.velocityMps,
      shearMps,
      dispersionM2s: reach.dispersionM2s ?? dispersionFischer(row.velocityMps, row.widthM, row.depthM, shearMps),
      transverseM2s: reach.transverseM2s ?? transverseFischer(row.depthM, shearMps),
      flowHow,
      shearHow,
    };
  });

export const topKm = (reach: Reach): number => reach.centreline[0]![2];
export const bottomKm = (reach: Reach): number => reach.centreline[reach.centreline.length - 1]![2];
