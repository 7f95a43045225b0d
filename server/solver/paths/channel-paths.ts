import { alongReach } from '../../../shared/geo';
import type { LonLat } from '../../../shared/schemas/basics';
import type { RiverWater } from '../../../shared/schemas/estimate';
import { lengthText } from '../format';
import { etaOf, placeOn, riverPath, type RiverPath } from '../river/path';
import { reachStates, topKm, type ReachState } from '../river/reach-state';
import type { RunInput } from '../types';
import { birthsOf } from './births';
import { channelReaches, walkChannel, type ChannelObserver, type ChannelPoint, type ChannelReach } from './channel-walk';
import { ChannelKernel, ChannelWatch } from './channel-watch';
import { arrivalFigures } from './passage';
import { isDrawn, rounded, type CloudPlace, type PathCurve, type PathPlan, type PathRun, type WatchedReceptor, watchStream } from './plan';
import { KERNEL_SHARE } from './plane-watch';
import { PathRandom } from './random';

type Channel = { readonly input: RunInput; readonly states: readonly ReachState[]; readonly reaches: readonly ChannelReach[]; readonly indexOf: ReadonlyMap<string, number> };

/** Random paths down a river: concentrations and arrivals at the watched receptors, the cloud at one time, lines to draw. */
export function channelPaths(input: RunInput, plan: PathPlan): PathRun {
  const states = reachStates(input.doc.water as RiverWater);
  const channel: Channel = { input, states, reaches: channelReaches(states), indexOf: new Map(states.map((state, i) => [state.reach.id, i] as const)) };
  const ways = input.releases.map((release) => riverPath(release, states));
  const count = Math.max(1, Math.floor(plan.paths / ways.length));
  const places: CloudPlace[] = [];
  const lines: LonLat[][] = [];
  const watches = ways.map((way) => {
    const watched = plan.watched.map((item, w) => watchFor(channel, way, item, w, plan, count));
    const share = input.weights.likely[way.release.index]! / count;
    const scene: ChannelObserver = {
      seen(k, at, bornS) {
        if (k === plan.cloudAt) places.push({ amount: share * survival(input, bornS, plan.timesS[k]!), position: positionOf(channel, at), ...chainageOf(channel, at), eta: at.eta });
      },
    };
    const drawn = linesOf(channel, plan, count, Math.ceil(plan.drawn / ways.length), lines);
    const start = way.release.release.channel!;
    walkChannel(
      {
        reaches: channel.reaches,
        start: pointAt(channel, start.reachId, start.chainageKm, etaOf(start.bank)),
        startAlongS2: way.startVarianceS2,
        startAcross: way.release.release.initialRadiusM ** 2 / (4 * way.segments[0]!.state.widthM ** 2),
        birthsS: birthsOf(way.release.profile, count),
        timesS: plan.timesS,
        random: new PathRandom(input.doc.seed, way.release.index),
        meter: input.meter,
      },
      [...watched.flatMap((item) => item?.watch ?? []), scene, drawn],
    );
    drawn.finish();
    return watched;
  });
  return { curves: plan.watched.map((item, i) => curveOf(channel, ways, item, watches.map((list) => list[i]!), count, plan.timesS)), ashoreShare: 0, cloud: { places }, lines };
}

const survival = ({ doc, loss }: RunInput, bornS: number, tS: number): number => (doc.substance.applyLoss ? Math.exp(loss.exposure(bornS) - loss.exposure(tS)) : 1);

function pointAt({ states, indexOf }: Channel, reachId: string, chainageKm: number, eta: number): ChannelPoint {
  const reach = indexOf.get(reachId)!;
  const state = states[reach]!;
  return { reach, atS: ((topKm(state.reach) - chainageKm) * 1_000) / state.speedMps, eta };
}

function chainageOf({ states }: Channel, { reach, atS }: Readonly<ChannelPoint>): { reachId: string; chainageKm: number } {
  const state = states[reach]!;
  return { reachId: state.reach.id, chainageKm: topKm(state.reach) - (atS * state.speedMps) / 1_000 };
}

/** On the map a place is kept a hair off the banks, so that it is drawn in the water. */
function positionOf(channel: Channel, at: Readonly<ChannelPoint>): LonLat {
  const state = channel.states[at.reach]!;
  const { chainageKm } = chainageOf(channel, at);
  return alongReach(state.reach, chainageKm, 0.98 * (0.5 - at.eta) * state.widthM).position;
}

type Watched = { watch: ChannelWatch; kernel: ChannelKernel } | null;

/** Null where this release's water does not come. */
function watchFor(channel: Channel, way: RiverPath, { receptor }: WatchedReceptor, w: number, plan: PathPlan, count: number): Watched {
  const { input, reaches } = channel;
  const place = receptor.channel && placeOn(way, receptor.channel.reachId, receptor.channel.chainageKm);
  if (!place) return null;
  const travelS = Math.max(Math.abs(place.travelS), place.kappaS);
  const alongS = KERNEL_SHARE * Math.sqrt(way.startVarianceS2 + 2 * place.kappaS * travelS);
  const startTau = way.release.release.initialRadiusM ** 2 / (8 * way.segments[0]!.state.widthM ** 2);
  const across = Math.max(KERNEL_SHARE * Math.sqrt(2 * (startTau + tauAlong(way, place.travelS))), 1e-4);
  const kernel = new ChannelKernel(pointAt(channel, receptor.channel!.reachId, receptor.channel!.chainageKm, etaOf(receptor.channel!.bank)), reaches, alongS, across);
  return { kernel, watch: new ChannelWatch(kernel, reaches, plan.timesS.length, count, (bornS, k) => survival(input, bornS, plan.timesS[k]!), new PathRandom(input.doc.seed, watchStream(way.release.index, w))) };
}

/** Spread across gathered over a travel time, in widths squared over two. */
function tauAlong(way: RiverPath, travelS: number): number {
  let tau = 0;
  way.segments.forEach(({ state, startTravelS }, i) => {
    const endS = way.segments[i + 1]?.startTravelS ?? Infinity;
    tau += (state.transverseM2s / state.widthM ** 2) * Math.max(0, Math.min(travelS, endS) - startTravelS);
  });
  return tau;
}

function curveOf({ input }: Channel, ways: readonly RiverPath[], { receptor }: WatchedReceptor, watched: readonly Watched[], count: number, timesS: readonly number[]): PathCurve {
  const times = timesS.length;
  const values = new Float64Array(times);
  const variances = new Float64Array(times);
  const onePath = new Float64Array(times);
  let windowM = 0;
  const arrivals: number[] = [];
  watched.forEach((item, i) => {
    if (!item) return;
    const { release } = ways[i]!;
    const weight = input.weights.likely[release.index]!;
    item.watch.tally.addMeanTo(values, variances, count, weight, release.capPerKg);
    const bornS = (release.profile.startS + release.profile.stopS) / 2;
    timesS.forEach((t, k) => (onePath[k] = Math.max(onePath[k]!, (weight * item.kernel.peak * survival(input, Math.min(bornS, t), t)) / count)));
    windowM = Math.max(windowM, item.kernel.windowM);
    arrivals.push(...item.watch.arrivalsS);
  });
  const cap = input.doc.substance.solubilityKgM3 ?? Infinity;
  return {
    receptorId: receptor.id,
    values: values.map((value) => Math.min(cap, value)),
    errors: variances.map(Math.sqrt),
    onePath,
    counted: `within ${lengthText(windowM)} along the channel`,
    arrival: arrivalFigures(Float64Array.from(arrivals)),
  };
}

function linesOf(channel: Channel, plan: PathPlan, count: number, wanted: number, lines: LonLat[][]): ChannelObserver & { finish(): void } {
  const isKept = new Set(plan.drawnAt);
  let line: LonLat[] | null = null;
  const close = (): void => {
    if (line && line.length > 0) lines.push(line);
    line = null;
  };
  return {
    begin(path) {
      close();
      line = isDrawn(path, count, wanted) ? [] : null;
    },
    seen(k, at) {
      if (line && isKept.has(k)) line.push(rounded(positionOf(channel, at)));
    },
    finish: close,
  };
}
