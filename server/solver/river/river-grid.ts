import type { ChannelGrid, ChannelGridPart } from '../../../shared/frames';
import type { LossClock } from '../loss';
import { peakTimeAtStation } from '../physics/line';
import type { Weights } from '../release-profile';
import type { DistanceTime, GriddedField } from '../types';
import type { AcrossNodes } from './across';
import { placeOn, type RiverPath } from './path';
import { bottomKm, topKm, type ReachState } from './reach-state';
import { addAcross } from './river-response';

/** What the grids of one estimate share. */
export type RiverGridding = {
  readonly paths: readonly RiverPath[];
  readonly states: readonly ReachState[];
  /** Null where losses are not applied. */
  readonly loss: LossClock | null;
  readonly solubility: number;
  readonly across: AcrossNodes;
  /** Nodes are never farther apart than this, m, so that contours follow the bends. */
  readonly widestStepM: number;
};

/** Standard deviations of the passage shown on either side of a cloud. */
const EDGE_SIGMA = 5.5;
/** Nodes a standard deviation of the cloud along the river. */
const PER_SIGMA = 3;
const MOST_NODES = 500;

type Stretch = { readonly fromM: number; readonly toM: number; readonly stepAt: (xM: number) => number };

/** The stretch of a reach in which a release can be seen between its oldest and youngest ages; x counts down the reach from its top, m. */
function stretchOf(path: RiverPath, state: ReachState, oldestS: number, youngestS: number, perSigma: number): Stretch | null {
  const segment = path.bySegment.get(state.reach.id);
  if (!segment || oldestS <= 0) return null;
  const kappa = path.segments.reduce((most, item) => Math.max(most, item.state.dispersionM2s / item.state.speedMps ** 2), 0);
  const sigma = (ageS: number): number => Math.sqrt(path.startVarianceS2 + 2 * kappa * ageS);
  const enterM = (topKm(state.reach) - segment.fromKm) * 1_000;
  const xOf = (travelS: number): number => enterM + (travelS - segment.startTravelS) * state.speedMps;
  const youngest = Math.max(0, youngestS);
  const isFirst = segment === path.segments[0];
  const fromM = Math.max(isFirst ? 0 : enterM, xOf(youngest - EDGE_SIGMA * sigma(Math.max(youngest, kappa))));
  const toM = Math.min((topKm(state.reach) - bottomKm(state.reach)) * 1_000, xOf(oldestS + EDGE_SIGMA * sigma(oldestS)));
  if (toM <= fromM) return null;
  const own = state.dispersionM2s / state.speedMps ** 2;
  const stepAt = (xM: number): number => {
    const travelS = segment.startTravelS + Math.abs(xM - enterM) / state.speedMps;
    const age = Math.min(oldestS, Math.max(travelS, youngest));
    return (state.speedMps * Math.sqrt(path.startVarianceS2 + 2 * own * age)) / perSigma;
  };
  return { fromM, toM, stepAt };
}

/** Nodes of one reach over the union of the stretches of all releases, downstream, close together where a cloud is sharp. */
function partOf(gridding: RiverGridding, state: ReachState, agesAt: (path: RiverPath) => { oldestS: number; youngestS: number }): ChannelGridPart | null {
  const stretches = gridding.paths.flatMap((path) => {
    const { oldestS, youngestS } = agesAt(path);
    const stretch = stretchOf(path, state, oldestS, youngestS, PER_SIGMA);
    return stretch ? [stretch] : [];
  });
  if (stretches.length === 0) return null;
  const fromM = Math.min(...stretches.map((stretch) => stretch.fromM));
  const toM = Math.max(...stretches.map((stretch) => stretch.toM));
  const fixed = gridding.paths.filter((path) => path.segments[0]!.state === state).map((path) => (topKm(state.reach) - path.segments[0]!.fromKm) * 1_000);
  const least = (toM - fromM) / MOST_NODES;
  const xs: number[] = [];
  for (let x = fromM; x < toM; ) {
    xs.push(x);
    const wanted = Math.min(gridding.widestStepM, ...stretches.filter((s) => x >= s.fromM - 1e-6 && x <= s.toM).map((s) => s.stepAt(x)));
    const next = x + Math.max(least, 0.5, wanted);
    const stop = fixed.find((at) => at > x + 1e-6 && at < next);
    x = stop ?? next;
  }
  xs.push(toM);
  const top = topKm(state.reach);
  return { reachId: state.reach.id, chainageKm: xs.map((x) => top - x / 1_000), nAcross: gridding.across.count };
}

/** Concentrations along and across every reach that a cloud touches at time t. */
export function riverFieldAt(gridding: RiverGridding, weights: Weights, tS: number): GriddedField {
  const parts = gridding.states.flatMap((state) => {
    const part = partOf(gridding, state, ({ release: { profile } }) => ({ oldestS: tS - profile.startS, youngestS: tS - profile.stopS }));
    return part ? [part] : [];
  });
  const grid: ChannelGrid = { kind: 'channel', parts };
  const values = fill(gridding, grid, (out, at, reachId, km) => addAll(gridding, out, at, reachId, km, weights, tS));
  return { grid, values };
}

function addAll(gridding: RiverGridding, out: Float64Array, at: number, reachId: string, km: number, weights: Weights, tS: number): void {
  for (const path of gridding.paths) {
    const weight = weights[path.release.index]!;
    if (weight === 0 || tS <= path.release.profile.startS) continue;
    const place = placeOn(path, reachId, km);
    if (!place) continue;
    const { capPerKg } = path.release;
    if (capPerKg === Infinity) {
      addAcross(out, at, gridding.across, path, place, tS, weight, gridding.loss);
      continue;
    }
    const alone = new Float64Array(gridding.across.count);
    addAcross(alone, 0, gridding.across, path, place, tS, weight, gridding.loss);
    for (let j = 0; j < alone.length; j++) out[at + j]! += Math.min(alone[j]!, weight * capPerKg);
  }
}

function fill(gridding: RiverGridding, grid: ChannelGrid, add: (out: Float64Array, at: number, reachId: string, km: number) => void): Float64Array {
  const n = gridding.across.count;
  const values = new Float64Array(grid.parts.reduce((sum, part) => sum + part.chainageKm.length * n, 0));
  let at = 0;
  for (const part of grid.parts)
    for (const km of part.chainageKm) {
      add(values, at, part.reachId, km);
      at += n;
    }
  capAt(values, gridding.solubility);
  return values;
}

const capAt = (values: Float64Array, cap: number): void => {
  if (cap === Infinity) return;
  for (let i = 0; i < values.length; i++) if (values[i]! > cap) values[i] = cap;
};

/** Times at which the concentration of a release is largest, or nearly so, at a travel time: the peak of an instantaneous release, seven times over the plateau of a longer one. */
function peakTimes(path: RiverPath, reachId: string, km: number, horizonS: number): number[] {
  const place = placeOn(path, reachId, km);
  if (!place) return [];
  const { profile } = path.release;
  const own = Math.max(YOUNGEST_S, peakTimeAtStation(place.travelS, 1, place.kappaS, 0));
  if (profile.isInstant) return [Math.min(horizonS, profile.startS + own)];
  const late = Math.sqrt(2 * place.kappaS * Math.max(place.travelS, place.kappaS));
  const times = [0, 0.25, 0.5, 0.75, 0.9, 1].map((share) => profile.startS + own + share * (profile.stopS - profile.startS));
  times.push(profile.stopS + own - late, profile.stopS + own + late / 2);
  return times.map((t) => Math.min(horizonS, t));
}

/** At the very place of a release the solution has no end: it is seen this long after, s. */
const YOUNGEST_S = 1;
const MOST_PEAK_TIMES = 16;

/** Distinct times, evenly thinned where many releases bring many. */
function fewTimes(times: readonly number[]): number[] {
  const distinct = [...new Set(times)].sort((a, b) => a - b);
  const n = Math.min(MOST_PEAK_TIMES, distinct.length);
  return Array.from({ length: n }, (_, i) => distinct[Math.round((i * (distinct.length - 1)) / Math.max(1, n - 1))]!);
}

/** Largest value on nodes over the whole way of the clouds up to each of the times `untilS` (ascending), in one pass down the river. */
export function riverEnvelopes(gridding: RiverGridding, weights: Weights, untilS: readonly number[]): GriddedField[] {
  const horizonS = untilS[untilS.length - 1]!;
  const parts = gridding.states.flatMap((state) => {
    const part = partOf(gridding, state, ({ release: { profile } }) => ({ oldestS: horizonS - profile.startS, youngestS: 0 }));
    return part ? [part] : [];
  });
  const grid: ChannelGrid = { kind: 'channel', parts };
  const n = gridding.across.count;
  const profile = new Float64Array(n);
  const most = new Float64Array(n);
  const earlier = untilS.slice(0, -1).map(() => new Float64Array(parts.reduce((sum, part) => sum + part.chainageKm.length * n, 0)));
  const whole = fill(gridding, grid, (out, at, reachId, km) => {
    most.fill(0);
    let next = 0;
    const keep = (): void => (earlier[next++] ?? out).set(most, at);
    // The cloud of every `untilS` counts too: before its peak it is the largest so far.
    for (const tS of [...new Set([...fewTimes(gridding.paths.flatMap((path) => peakTimes(path, reachId, km, horizonS))), ...untilS])].sort((a, b) => a - b)) {
      profile.fill(0);
      addAll(gridding, profile, 0, reachId, km, weights, tS);
      for (let j = 0; j < n; j++) if (profile[j]! > most[j]!) most[j] = profile[j]!;
      if (tS === untilS[next]) keep();
    }
  });
  for (const values of earlier) capAt(values, gridding.solubility);
  return [...earlier, whole].map((values) => ({ grid, values }));
}

/** Section-mean concentrations by time and chainage below the first release. */
export function riverDistanceTime(gridding: RiverGridding, weights: Weights, timesS: readonly number[], places: number): DistanceTime {
  const path = gridding.paths[0]!;
  const last = timesS[timesS.length - 1] ?? 0;
  const kappa = path.endKappaS;
  const reached = Math.min(path.endTravelS, Math.max(0, last - path.release.profile.startS) + EDGE_SIGMA * Math.sqrt(2 * kappa * Math.max(0, last)));
  const chainageKm: number[] = [];
  const reachIds: string[] = [];
  // Evenly spaced in distance: evenly spaced in time, slow water at the end would take nearly all places.
  const spans = path.segments.map((segment) => Math.min(segment.fromKm - segment.toKm, (Math.max(0, reached - segment.startTravelS) * segment.state.speedMps) / 1_000));
  const stepKm = spans.reduce((sum, span) => sum + span, 0) / (places - 1);
  for (let i = 0, segmentAt = 0, passedKm = 0; i < places; i++) {
    while (segmentAt < spans.length - 1 && i * stepKm > passedKm + spans[segmentAt]!) passedKm += spans[segmentAt++]!;
    const segment = path.segments[segmentAt]!;
    chainageKm.push(Math.max(segment.toKm, segment.fromKm - (i * stepKm - passedKm)));
    reachIds.push(segment.state.reach.id);
  }
  const n = gridding.across.count;
  const profile = new Float64Array(n);
  const values = timesS.map((tS) =>
    chainageKm.map((km, i) => {
      profile.fill(0);
      addAll(gridding, profile, 0, reachIds[i]!, km, weights, tS);
      // Trapezoid over evenly spaced nodes: the bank nodes count half.
      const mean = profile.reduce((sum, value, j) => sum + (j === 0 || j === n - 1 ? value / 2 : value), 0) / (n - 1);
      return Number(Math.min(mean, gridding.solubility).toPrecision(6));
    }),
  );
  return { timesS: [...timesS], chainageKm, reachIds, values };
}
