import type { ChannelPlace, EstimateDocument } from '../../../shared/schemas/estimate';
import { currentOf } from '../open/current';
import { reachStates, type ReachState } from '../river/reach-state';

/** What the validity rules read of the water at a place, whichever method solves it. */
export type PlaceWater = {
  readonly name: string;
  readonly depthM: number;
  /** Mean speed: of the reach, or of the current over the estimate. */
  readonly speedMps: number;
  readonly shearMps: number;
  readonly widthM: number | null;
  readonly dischargeM3s: number | null;
};

/** Fresh water, kg/m3. */
export const FRESH_KGM3 = 1_000;
/** Shear velocity over current where only the current is known (common practice, no source). */
const OPEN_SHEAR_SHARE = 0.05;
const SAMPLES = 200;

/** Looks up the water at places of one document; a place without a channel reads the first reach, or the open water. */
export function waterAtPlaces(doc: EstimateDocument): (channel: ChannelPlace | null) => PlaceWater {
  const { water } = doc;
  if (water.kind === 'open') {
    const speedMps = meanSpeedMps(doc);
    const only: PlaceWater = { name: water.name, depthM: water.mixingDepthM, speedMps, shearMps: OPEN_SHEAR_SHARE * speedMps, widthM: null, dischargeM3s: null };
    return () => only;
  }
  const states = new Map(reachStates(water).map((state) => [state.reach.id, placeOf(state)] as const));
  const first = states.get(water.reaches[0]!.id)!;
  return (channel) => (channel && states.get(channel.reachId)) || first;
}

const placeOf = ({ reach, depthM, speedMps, shearMps, widthM, dischargeM3s }: ReachState): PlaceWater => ({ name: reach.name, depthM, speedMps, shearMps, widthM, dischargeM3s });

/** Mean speed of the stated current of open water over the estimate, m/s, from 200 samples. */
export function meanSpeedMps({ water, horizonS }: EstimateDocument): number {
  if (water.kind !== 'open') return 0;
  const current = currentOf(water.current);
  const velocity = new Float64Array(2);
  let sum = 0;
  for (let i = 0; i < SAMPLES; i++) {
    current.velocity((horizonS * (i + 0.5)) / SAMPLES, velocity);
    sum += Math.hypot(velocity[0]!, velocity[1]!);
  }
  return sum / SAMPLES;
}
