import type { Meter } from '../meter';
import { bottomKm, topKm, type ReachState } from '../river/reach-state';
import { shareAt } from '../river/path';
import type { PathRandom } from './random';
import { fold } from './steps';

/** A reach in travel time: the drift of every path is then one second a second, whatever the reach. */
export type ChannelReach = {
  readonly state: ReachState;
  /** Travel time from its top to its bottom, s. */
  readonly lengthS: number;
  /** D / U^2, s: half the growth of the variance of travel time. */
  readonly kappaS: number;
  /** e / W^2, 1/s: half the growth of the variance across, in widths. */
  readonly tauPerS: number;
  readonly down: number | null;
  /** Which stretch of the reach below its water takes, in shares of the discharge from the left bank. */
  readonly low: number;
  readonly share: number;
  readonly up: readonly number[];
};

export function channelReaches(states: readonly ReachState[]): ChannelReach[] {
  const indexOf = new Map(states.map((state, i) => [state.reach.id, i] as const));
  return states.map((state, i) => {
    const down = state.reach.downstreamReachId === null ? null : (indexOf.get(state.reach.downstreamReachId) ?? null);
    const stretch = down === null ? { low: 0, share: 1 } : shareAt(state, states[down]!, states);
    return {
      state,
      lengthS: ((topKm(state.reach) - bottomKm(state.reach)) * 1_000) / state.speedMps,
      kappaS: state.dispersionM2s / state.speedMps ** 2,
      tauPerS: state.transverseM2s / state.widthM ** 2,
      down,
      ...stretch,
      up: states.flatMap((other, k) => (k !== i && other.reach.downstreamReachId === state.reach.id ? [k] : [])),
    };
  });
}

/** Where a path stands: reach, travel time from the reach's top (s), share of the discharge from the left bank. */
export type ChannelPoint = { reach: number; atS: number; eta: number };

export type ChannelWalkInput = {
  readonly reaches: readonly ChannelReach[];
  readonly start: Readonly<ChannelPoint>;
  /** Variances of the first cloud: travel time (s2) and across (widths squared). */
  readonly startAlongS2: number;
  readonly startAcross: number;
  readonly birthsS: Float64Array;
  readonly timesS: readonly number[];
  readonly random: PathRandom;
  readonly meter: Meter;
};

export type ChannelObserver = {
  begin?(path: number, at: Readonly<ChannelPoint>, bornS: number): void;
  /** A step in the travel time of one reach, with its variance; a step over a joint is told in that of each reach it touches. */
  step?(reach: number, fromAtS: number, toAtS: number, varianceS2: number, fromS: number, toS: number): void;
  seen?(k: number, at: Readonly<ChannelPoint>, bornS: number): void;
};

/** Past this scaled distance a joint of two reaches is not met within a step: exp(-2 * 4^2) = 1e-14. */
const FAR_FROM_JOINT = 6;
/** A step takes at most this share of the travel time of its reach, but not less than this part of the way between two times. */
const STEP_SHARE = 0.25;
const LEAST_PART = 1 / 32;

/**
 * Walks paths down a network. Along: with travel time as coordinate the flux form A dC/dt + Q dC/dx = d/dx(A D dC/dx)
 * becomes dp/dt + dp/ds = d/ds(k dp/ds) for the mass per second of travel p = Q C, k = D/U^2, in which section and
 * velocity no longer appear; where k jumps at a joint the exact law is a skewed walk (`crossJoint`). Across: spread in
 * shares of the discharge, mirrored at both banks; at a confluence a path moves to its water's stretch of the joined river.
 * Sources: Yotsukura & Sayre 1976, Water Resour. Res. 12: 695; LaBolle, Quastel, Fogg & Gravner 2000, Water Resour.
 * Res. 36: 651 (media whose coefficient jumps).
 */
export function walkChannel(input: ChannelWalkInput, observers: readonly ChannelObserver[]): void {
  const walker = new ChannelWalker(input, observers);
  for (let path = 0; path < input.birthsS.length; path++) walker.walk(path);
}

class ChannelWalker {
  private readonly at: ChannelPoint = { reach: 0, atS: 0, eta: 0 };

  constructor(
    private readonly input: ChannelWalkInput,
    private readonly observers: readonly ChannelObserver[],
  ) {}

  walk(path: number): void {
    const { start, birthsS, timesS, random, meter } = this.input;
    const { at } = this;
    random.start(path);
    at.reach = start.reach;
    at.atS = start.atS + Math.sqrt(this.input.startAlongS2) * random.normal();
    at.eta = fold(start.eta + Math.sqrt(this.input.startAcross) * random.normal(), 0, 1);
    this.settle();
    const bornS = birthsS[path]!;
    for (const observer of this.observers) observer.begin?.(path, at, bornS);
    let nowS = bornS;
    let steps = 0;
    for (let k = 0; k < timesS.length; k++) {
      if (timesS[k]! < nowS) continue;
      const leastS = (timesS[k]! - nowS) * LEAST_PART;
      while (nowS < timesS[k]!) {
        nowS = this.stepFrom(nowS, timesS[k]!, leastS);
        steps++;
      }
      for (const observer of this.observers) observer.seen?.(k, at, bornS);
    }
    meter.count(steps);
  }

  /**
   * Half the drift, the spread along and across with the coefficients found there, the other half (Strang 1968, SIAM J.
   * Numer. Anal. 5: 506): second order where coefficients jump, and each part keeps even water even.
   */
  private stepFrom(fromS: number, goalS: number, leastS: number): number {
    const { reaches, random } = this.input;
    const { at } = this;
    const longestS = Math.max(leastS, STEP_SHARE * reaches[at.reach]!.lengthS);
    const toS = goalS - fromS <= longestS + leastS ? goalS : fromS + longestS;
    const h = toS - fromS;
    const [startReach, start] = [at.reach, at.atS];
    at.atS += h / 2;
    this.settle();
    const [midReach, mid] = [at.reach, at.atS];
    const reach = reaches[midReach]!;
    const variance = 2 * reach.kappaS * h;
    at.eta = fold(at.eta + Math.sqrt(2 * reach.tauPerS * h) * random.normal(), 0, 1);
    const wanted = mid + Math.sqrt(variance) * random.normal();
    this.spreadAlong(wanted, Math.sqrt(variance));
    at.atS += h / 2;
    this.settle();
    const moved = wanted - mid + h;
    for (const observer of this.observers) {
      observer.step?.(startReach, start, start + moved, variance, fromS, toS);
      if (midReach !== startReach) observer.step?.(midReach, mid - h / 2, mid - h / 2 + moved, variance, fromS, toS);
      if (at.reach !== startReach && at.reach !== midReach) observer.step?.(at.reach, at.atS - moved, at.atS, variance, fromS, toS);
    }
    return toS;
  }

  /** Spreads to `wanted`, unless a joint lies so near that the change of coefficient there matters. */
  private spreadAlong(wanted: number, sigma: number): void {
    const { reaches } = this.input;
    const { at } = this;
    const reach = reaches[at.reach]!;
    const toBottom = reach.lengthS - at.atS;
    const nearBottom = Math.abs(toBottom) < Math.abs(at.atS);
    if (nearBottom && reach.down !== null && Math.abs(toBottom) < FAR_FROM_JOINT * sigma) this.crossJoint(Math.max(0, toBottom) / sigma, (reach.lengthS - wanted) / sigma, reach, reaches[reach.down]!, sigma, 1);
    else if (!nearBottom && at.atS < FAR_FROM_JOINT * sigma) {
      const up = this.branchAbove(reach);
      if (up === null) at.atS = Math.abs(wanted);
      else this.crossJoint(Math.max(0, at.atS) / sigma, wanted / sigma, reach, reaches[up]!, sigma, -1);
    } else at.atS = wanted;
  }

  /**
   * A joint where k changes from k1 to k2. In units of the own standard deviation the path starts `a` away and would end
   * `b` away (negative: beyond). Where it meets the joint, it ends on the far side with probability
   * sqrt(k2) / (sqrt(k1) + sqrt(k2)), as far from it as |b| in the far side's own units. This is the exact law of the
   * skewed Brownian motion. Source: Harrison & Shepp 1981, Ann. Probab. 9: 309.
   */
  private crossJoint(a: number, b: number, own: ChannelReach, far: ChannelReach, sigma: number, downstream: 1 | -1): void {
    const { random } = this.input;
    const { at } = this;
    const isMet = b <= 0 || random.uniform() <= Math.exp(-2 * a * b);
    const rootOwn = Math.sqrt(own.kappaS);
    const rootFar = Math.sqrt(far.kappaS);
    const isFar = isMet && random.uniform() * (rootOwn + rootFar) < rootFar;
    const beyond = isFar ? (Math.abs(b) * sigma * rootFar) / rootOwn : -(isMet ? Math.abs(b) : b) * sigma;
    at.atS = downstream === 1 ? own.lengthS + beyond : -beyond;
  }

  private branchAbove(reach: ChannelReach): number | null {
    const { eta } = this.at;
    return reach.up.find((index) => eta >= this.input.reaches[index]!.low && eta <= this.input.reaches[index]!.low + this.input.reaches[index]!.share) ?? reach.up[0] ?? null;
  }

  /** Moves a path that has passed a joint into the reach it now stands in. */
  private settle(): void {
    const { reaches } = this.input;
    const { at } = this;
    for (;;) {
      const reach = reaches[at.reach]!;
      if (at.atS > reach.lengthS && reach.down !== null) {
        at.atS -= reach.lengthS;
        at.eta = reach.low + reach.share * at.eta;
        at.reach = reach.down;
      } else if (at.atS < 0) {
        const up = this.branchAbove(reach);
        if (up === null) {
          at.atS = -at.atS;
          return;
        }
        const above = reaches[up]!;
        at.eta = Math.min(1, Math.max(0, (at.eta - above.low) / above.share));
        at.atS += above.lengthS;
        at.reach = up;
      } else return;
    }
  }
}
