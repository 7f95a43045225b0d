import type { DischargeSeries, RiverWater } from '../../../shared/schemas/estimate';
import { bottomKm, topKm, type ReachState } from '../river/reach-state';
import { Hydraulics } from './hydraulics';
import { reachWave, type Hydrograph, type ReachWave } from './wave';

/** One reach with its discharge, steady or running through as a wave. */
export type FlowingReach = {
  readonly state: ReachState;
  readonly lengthM: number;
  readonly hydraulics: Hydraulics;
  readonly wave: ReachWave | null;
};

/** Discharge given by rows, linear between, level beyond the ends. */
export function hydrograph(rows: DischargeSeries['rows']): Hydrograph {
  return (tS) => {
    if (tS <= rows[0]!.atS) return rows[0]!.dischargeM3s;
    let low = 0;
    let high = rows.length - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (rows[mid]!.atS <= tS) low = mid;
      else high = mid - 1;
    }
    const a = rows[low]!;
    const b = rows[low + 1];
    return b ? a.dischargeM3s + ((b.dischargeM3s - a.dischargeM3s) * (tS - a.atS)) / (b.atS - a.atS) : a.dischargeM3s;
  };
}

/**
 * Every reach with its flow. A series sets the discharge at the head of its reach; below, a reach carries its own
 * discharge plus what the reaches above it carry more (or less) than theirs.
 */
export function riverFlow(water: RiverWater, states: readonly ReachState[], fromS: number, toS: number): FlowingReach[] {
  const series = new Map((water.flow.series ?? []).map((item) => [item.reachId, item.rows] as const));
  const made = new Map<string, FlowingReach>();
  const make = (state: ReachState): FlowingReach => {
    const known = made.get(state.reach.id);
    if (known) return known;
    const above = states.filter((item) => item.reach.downstreamReachId === state.reach.id).map(make);
    const flowing = flowingReach(water, state, inflowOf(state, above, series.get(state.reach.id)), fromS, toS);
    made.set(state.reach.id, flowing);
    return flowing;
  };
  return states.map(make);
}

/** Discharge at the head of a reach; null where it is steady. */
function inflowOf(state: ReachState, above: readonly FlowingReach[], rows: DischargeSeries['rows'] | undefined): Hydrograph | null {
  if (rows) return hydrograph(rows);
  const changing = above.filter((reach) => reach.wave !== null);
  if (changing.length === 0) return null;
  const outflows = changing.map((reach) => [reach.wave!.outflow, reach.state.dischargeM3s] as const);
  // A tenth of its own discharge at least: a river does not run dry because rounded figures do not add up.
  return (tS) => Math.max(0.1 * state.dischargeM3s, outflows.reduce((sum, [outflow, base]) => sum + outflow(tS) - base, state.dischargeM3s));
}

const SAMPLES = 2_000;

function flowingReach(water: RiverWater, state: ReachState, inflow: Hydrograph | null, fromS: number, toS: number): FlowingReach {
  const lengthM = (topKm(state.reach) - bottomKm(state.reach)) * 1_000;
  if (!inflow) return { state, lengthM, hydraulics: new Hydraulics(water, state, state.dischargeM3s, state.dischargeM3s), wave: null };
  let [least, most] = [Infinity, 0];
  for (let i = 0; i <= SAMPLES; i++) {
    const Q = inflow(fromS + ((toS - fromS) * i) / SAMPLES);
    least = Math.min(least, Q);
    most = Math.max(most, Q);
  }
  const hydraulics = new Hydraulics(water, state, least * 0.9, most * 1.1);
  return { state, lengthM, hydraulics, wave: reachWave(hydraulics, lengthM, inflow, fromS, toS) };
}
