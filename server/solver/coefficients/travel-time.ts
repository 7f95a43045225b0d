/**
 * Travel time and peak of a spill in an ungauged river, regressions of hundreds of dye tests: unit peaks of more than 60
 * rivers, velocities of more than 980 sub-reaches. Natural, ice-free rivers within their banks, without reservoirs, evenly
 * mixed across, conservative matter released at once; flow 0.1 to 5 times the mean, 1 to 200 h.
 * Source: Jobson 1996, USGS Water-Resources Investigations Report 96-4013; Jobson 1997, J. Hydraul. Eng. 123: 971.
 */
import { GRAVITY_MPS2 } from '../physics/channel-mixing';

export type Basin = {
  /** Drainage area above the reach, m2. */
  readonly drainageM2: number;
  /** Mean annual discharge, m3/s; null where not known. */
  readonly meanDischargeM3s: number | null;
  readonly dischargeM3s: number;
  readonly slope: number | null;
};

/** Equations by number in the report: 12 and 13 with slope, 14 and 15 without, 16 with neither slope nor mean flow. */
export type PeakVelocity = { readonly likelyMps: number; readonly fastestMps: number | null; readonly equations: string };

/** Velocity of the peak, m/s: likely, and so fast that 99 in 100 are slower. Uncalibrated it is good to a factor of 2. */
export function peakVelocity({ drainageM2, meanDischargeM3s, dischargeM3s, slope }: Basin, gravity = GRAVITY_MPS2): PeakVelocity {
  const perArea = dischargeM3s / drainageM2;
  const dimensionless = (flow: number): number => (drainageM2 ** 1.25 * Math.sqrt(gravity)) / flow;
  // Constant 8.1 from memory: copies are garbled there; its size agrees with equation 14.
  if (meanDischargeM3s === null) return { likelyMps: 0.152 + 8.1 * dimensionless(dischargeM3s) ** 0.595 * perArea, fastestMps: null, equations: '16' };
  const area = dimensionless(meanDischargeM3s);
  const relative = dischargeM3s / meanDischargeM3s;
  if (slope === null) {
    const factor = area ** 0.821 * relative ** -0.465 * perArea;
    return { likelyMps: 0.02 + 0.051 * factor, fastestMps: 0.2 + 0.093 * factor, equations: '14, 15' };
  }
  const factor = area ** 0.919 * relative ** -0.469 * slope ** 0.159 * perArea;
  return { likelyMps: 0.094 + 0.0143 * factor, fastestMps: 0.25 + 0.02 * factor, equations: '12, 13' };
}

/** Unit peak, 1e-6/s, at `peakH` hours after the spill: 857 T^(-0.760 (Q/Qa)^-0.079). Equation 7. */
export const unitPeak = (peakH: number, relativeFlow: number): number => 857 * peakH ** (-0.76 * relativeFlow ** -0.079);

export type SpillPassage = {
  readonly peakH: number;
  /** First detection: 0.890 of the time of the peak (equation 18). */
  readonly leadingEdgeH: number;
  readonly unitPeak: number;
  /** kg/m3 from the mass that arrives. */
  readonly peakKgM3: number;
  /** From the leading edge until a tenth of the peak is left: 2e6 / unit peak (equation 19), a triangle of the right area. */
  readonly tailH: number;
  readonly trailingEdgeH: number;
};

/** Passage of `massKg` at a distance, with the velocity of its peak and the flow there. */
export function spillPassage(distanceM: number, velocityMps: number, massKg: number, dischargeM3s: number, relativeFlow: number): SpillPassage {
  const peakH = distanceM / velocityMps / 3_600;
  const unit = unitPeak(peakH, relativeFlow);
  const leadingEdgeH = 0.89 * peakH;
  const tailH = 2e6 / unit / 3_600;
  return { peakH, leadingEdgeH, unitPeak: unit, peakKgM3: (1e-6 * unit * massKg) / dischargeM3s, tailH, trailingEdgeH: leadingEdgeH + tailH };
}
