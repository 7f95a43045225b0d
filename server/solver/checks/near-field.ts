import type { EstimateDocument } from '../../../shared/schemas/estimate';
import { lengthText } from '../format';
import { jetLengths } from '../physics/buoyant-jet';
import { FRESH_KGM3 } from './place-water';

/** Within ten depths eddies and layers decide; a jet needs fifty, or ten of its own lengths (common practice, no source). */
const DEPTHS = 10;
const JET_DEPTHS = 50;
const JET_LENGTHS = 10;
/** Slower than this a current does not bend a jet within the water, m/s. */
const STILL_MPS = 0.01;

/** How near a release nothing is estimated, m, and what decides it. */
export function nearFieldOf({ conditions }: EstimateDocument, depthM: number, speedMps: number, radiusM: number): { leastM: number; why: string } {
  const plain = Math.max(radiusM, DEPTHS * depthM);
  const jet = conditions?.dischargeJet;
  if (!jet) return { leastM: plain, why: 'ten depths, or the first cloud' };
  const lengths = jetLengths(jet, conditions.waterDensityKgM3 ?? FRESH_KGM3, Math.max(STILL_MPS, speedMps));
  const byJet = JET_LENGTHS * Math.max(lengths.bendingM, lengths.buoyantM);
  return {
    leastM: Math.max(plain, byJet, JET_DEPTHS * depthM),
    why: `ten times the jet's bending length of ${lengthText(lengths.bendingM)} and its plume's of ${lengthText(lengths.buoyantM)}, or fifty depths`,
  };
}
