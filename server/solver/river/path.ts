import type { Bank } from '../../../shared/schemas/basics';
import type { ResolvedRelease } from '../release-profile';
import { afterConfluence, type Across } from './across';
import { bottomKm, topKm, type ReachState } from './reach-state';

/** One reach along the way of a release, with what has gathered by its upper end. */
export type Segment = {
  readonly state: ReachState;
  /** Chainage at which the release enters it, km, and where it leaves. */
  readonly fromKm: number;
  readonly toKm: number;
  /** Distance, travel time and integral of D/U^2 over travel time from the release to its upper end. */
  readonly startM: number;
  readonly startTravelS: number;
  readonly startKappaS2: number;
  readonly across: Across;
  /** Transverse spread gathered since `across` was set. */
  readonly startTau: number;
};

/** A place on the way of a release. */
export type PathPlace = {
  readonly segment: Segment;
  /** Distance along the river, m; negative upstream of the release. */
  readonly distanceM: number;
  /** Travel time from the release, s. */
  readonly travelS: number;
  /** Mean of D/U^2 over the travel time, s: the dispersion of the equivalent even reach. */
  readonly kappaS: number;
  /** Transverse spread by the travel time, and per second of it. */
  readonly tau: number;
  readonly tauPerS: number;
};

export type RiverPath = {
  readonly release: ResolvedRelease;
  readonly segments: readonly Segment[];
  readonly bySegment: ReadonlyMap<string, Segment>;
  /** Variance of the first cloud in travel time, s2: radius^2 / (4 U^2). */
  readonly startVarianceS2: number;
  /** Travel time to the end of the network, s, and its mean D/U^2. */
  readonly endTravelS: number;
  readonly endKappaS: number;
};

export const etaOf = (bank: Bank): number => (bank === 'left' ? 0 : bank === 'right' ? 1 : 0.5);

const kappaOf = (state: ReachState): number => state.dispersionM2s / state.speedMps ** 2;
const tauRateOf = (state: ReachState): number => state.transverseM2s / state.widthM ** 2;

/** Follows a release down the network to its end. Cumulants of the passage add from reach to reach. */
export function riverPath(release: ResolvedRelease, states: readonly ReachState[]): RiverPath {
  const byId = new Map(states.map((state) => [state.reach.id, state] as const));
  const place = release.release.channel!;
  const first = byId.get(place.reachId)!;
  const segments: Segment[] = [];
  let across: Across = { kind: 'source', eta0: etaOf(place.bank), startTau: release.release.initialRadiusM ** 2 / (8 * first.widthM ** 2) };
  let [startM, startTravelS, startKappaS2, startTau] = [0, 0, 0, 0];
  let state: ReachState | undefined = first;
  let fromKm = place.chainageKm;
  while (state) {
    const segment: Segment = { state, fromKm, toKm: bottomKm(state.reach), startM, startTravelS, startKappaS2, across, startTau };
    segments.push(segment);
    const lengthM = (segment.fromKm - segment.toKm) * 1_000;
    const travelS = lengthM / state.speedMps;
    startM += lengthM;
    startTravelS += travelS;
    startKappaS2 += kappaOf(state) * travelS;
    startTau += tauRateOf(state) * travelS;
    const next: ReachState | undefined = state.reach.downstreamReachId === null ? undefined : byId.get(state.reach.downstreamReachId);
    const stretch = next && shareAt(state, next, states);
    if (stretch && stretch.share < 1) {
      across = afterConfluence(across, startTau, stretch.low, stretch.share);
      startTau = 0;
    }
    if (next) fromKm = topKm(next.reach);
    state = next;
  }
  return {
    release,
    segments,
    bySegment: new Map(segments.map((segment) => [segment.state.reach.id, segment] as const)),
    startVarianceS2: release.release.initialRadiusM ** 2 / (4 * first.speedMps ** 2),
    endTravelS: startTravelS,
    endKappaS: startTravelS > 0 ? startKappaS2 / startTravelS : kappaOf(first),
  };
}

/** Which stretch of the joined river the water of `from` takes, in shares of discharge from the left bank. */
export function shareAt(from: ReachState, into: ReachState, states: readonly ReachState[]): { low: number; share: number } {
  const meeting = states.filter((state) => state.reach.downstreamReachId === into.reach.id);
  const rank = (state: ReachState): number => (state.reach.joinsOnBank === 'left' ? 0 : state.reach.joinsOnBank === 'right' ? 2 : 1);
  const ordered = [...meeting].sort((a, b) => rank(a) - rank(b) || a.index - b.index);
  const total = ordered.reduce((sum, state) => sum + state.dischargeM3s, 0);
  const before = ordered.slice(0, ordered.indexOf(from)).reduce((sum, state) => sum + state.dischargeM3s, 0);
  return { low: before / total, share: from.dischargeM3s / total };
}

/** The place at a chainage on the way of a release; null where its water does not come. */
export function placeOn(path: RiverPath, reachId: string, chainageKm: number): PathPlace | null {
  const segment = path.bySegment.get(reachId);
  if (!segment) return null;
  const { state } = segment;
  const alongM = (segment.fromKm - chainageKm) * 1_000;
  const alongS = alongM / state.speedMps;
  const travelS = segment.startTravelS + alongS;
  const tau = segment.startTau + tauRateOf(state) * alongS;
  return {
    segment,
    distanceM: segment.startM + alongM,
    travelS,
    kappaS: travelS > 0 ? (segment.startKappaS2 + kappaOf(state) * alongS) / travelS : kappaOf(state),
    tau,
    tauPerS: segment.across.kind === 'source' ? (travelS > 0 ? tau / travelS : tauRateOf(state)) : 0,
  };
}
