import type { ReachState } from '../river/reach-state';
import { shareAt } from '../river/path';
import type { FlowingReach } from './river-flow';

/** Tidal velocity at one end of a reach: `cos` and `sin` parts of an ebb current, m/s. */
type TideEnd = { readonly cos: number; readonly sin: number };
const NO_TIDE: TideEnd = { cos: 0, sin: 0 };

/** One reach on the way of a release; x runs downstream in metres from the head of the first. */
export type PathReach = FlowingReach & {
  readonly x0: number;
  readonly x1: number;
  readonly top: TideEnd;
  readonly bottom: TideEnd;
  readonly isTidal: boolean;
  /** The river's velocity at both ends over its own: between tidal reaches it changes steadily, so that no tide piles water up where one ends. */
  readonly endShares: readonly [number, number];
  /** Whether another water joins at its head, and which side of the joined river this path's water takes. */
  readonly joined: { readonly low: number; readonly share: number } | null;
  /** True where all of its flow passes through stirred water at its head. */
  readonly hasStructure: boolean;
};

/**
 * The flow along the way of one release: the reach of the release, where it is tidal also the main stem above, and
 * everything below. Beyond both ends the end reaches are carried on, so that a tide can bring water back.
 */
export class PathFlow {
  readonly reaches: readonly PathReach[];
  readonly isSteady: boolean;
  readonly isTidal: boolean;
  readonly endM: number;
  private readonly omega: number;
  private lastAsked = 0;

  constructor(first: ReachState, flowing: readonly FlowingReach[], states: readonly ReachState[]) {
    const line = lineThrough(first, states);
    this.omega = (2 * Math.PI) / (line.find((state) => state.reach.tide)?.reach.tide?.periodS ?? 1);
    let x = 0;
    this.reaches = line.map((state, i) => {
      const x0 = x;
      const reach = flowing[state.index]!;
      x += reach.lengthM;
      const [top, bottom] = tideEnds(line, i, states);
      const stretch = i > 0 ? shareAt(line[i - 1]!, state, states) : null;
      return {
        ...reach,
        x0,
        x1: x,
        top,
        bottom,
        isTidal: state.reach.tide !== undefined,
        endShares: [between(line[i - 1], state), between(line[i + 1], state)],
        joined: stretch && stretch.share < 1 ? stretch : null,
        hasStructure: state.reach.structure !== undefined,
      };
    });
    this.endM = x;
    this.isTidal = this.reaches.some((reach) => reach.isTidal);
    this.isSteady = !this.isTidal && this.reaches.every((reach) => reach.wave === null);
  }

  reachAt(xM: number): number {
    // Neighbours ask one after another: begin where the last one was.
    let r = this.lastAsked;
    while (r > 0 && xM < this.reaches[r]!.x0) r--;
    while (r < this.reaches.length - 1 && xM >= this.reaches[r]!.x1) r++;
    this.lastAsked = r;
    return r;
  }

  /** Whether another water joins, or the discharge changes, at the head of reach r. */
  changesAt(r: number): boolean {
    const [above, below] = [this.reaches[r - 1]!.state, this.reaches[r]!.state];
    return this.reaches[r]!.joined !== null || Math.abs(below.dischargeM3s - above.dischargeM3s) > 1e-9 * above.dischargeM3s;
  }

  dischargeM3s(r: number, xM: number, tS: number): number {
    const { wave, state, x0 } = this.reaches[r]!;
    return wave ? wave.dischargeM3s(xM - x0, tS) : state.dischargeM3s;
  }

  /** Area at the river's own flow, m2. */
  areaM2(r: number, xM: number, tS: number): number {
    const { wave, state, hydraulics } = this.reaches[r]!;
    return wave ? hydraulics.areaM2(this.dischargeM3s(r, xM, tS)) : state.dischargeM3s / state.speedMps;
  }

  dispersionM2s(r: number, xM: number, tS: number): number {
    const { wave, state, hydraulics } = this.reaches[r]!;
    return wave ? hydraulics.dispersionM2s(this.dischargeM3s(r, xM, tS)) : state.dispersionM2s;
  }

  mixingPerS(r: number, xM: number, tS: number): number {
    const { wave, state, hydraulics } = this.reaches[r]!;
    return wave ? hydraulics.mixingPerS(this.dischargeM3s(r, xM, tS)) : state.transverseM2s / state.widthM ** 2;
  }

  /** Velocity seaward, m/s: the river's and the tide's. */
  speedMps(r: number, xM: number, tS: number): number {
    const reach = this.reaches[r]!;
    const river = reach.wave ? this.dischargeM3s(r, xM, tS) / this.areaM2(r, xM, tS) : reach.state.speedMps;
    if (!reach.isTidal) return river;
    const down = Math.min(1, Math.max(0, (xM - reach.x0) / (reach.x1 - reach.x0)));
    const cos = reach.top.cos + down * (reach.bottom.cos - reach.top.cos);
    const sin = reach.top.sin + down * (reach.bottom.sin - reach.top.sin);
    const [a, b] = reach.endShares;
    const share = down < 0.5 ? a + 2 * down * (1 - a) : 1 + (2 * down - 1) * (b - 1);
    return share * river + cos * Math.cos(this.omega * tS) + sin * Math.sin(this.omega * tS);
  }

  /** Where water at x is after dt: exact where the flow is steady, else by the midpoint rule reach by reach. */
  advance(xM: number, tS: number, dtS: number): number {
    const last = this.reaches.length - 1;
    let r = this.reachAt(xM);
    let x = xM;
    let left = dtS;
    for (let leg = 0; leg <= 2 * last + 2; leg++) {
      const reach = this.reaches[r]!;
      const now = tS + dtS - left;
      let u = reach.state.speedMps;
      if (!this.isSteady) {
        const half = x + (this.speedMps(r, x, now) * left) / 2;
        u = this.speedMps(r, Math.min(r === last ? Infinity : reach.x1, Math.max(r === 0 ? -Infinity : reach.x0, half)), now + left / 2);
      }
      const room = u >= 0 ? (r === last ? Infinity : reach.x1 - x) : r === 0 ? Infinity : x - reach.x0;
      if (Math.abs(u) * left <= room) return x + u * left;
      x = u >= 0 ? reach.x1 : reach.x0;
      left -= room / Math.abs(u);
      r += u >= 0 ? 1 : -1;
    }
    return x;
  }

  /** The place where a parcel ends that begins at x and is `lengthM` long there: in steady flow as long in time throughout. */
  below(xM: number, lengthM: number): number {
    return this.isSteady ? this.advance(xM, 0, lengthM / this.reaches[this.reachAt(xM)]!.state.speedMps) : xM + lengthM;
  }

  /** The place where a parcel begins that ends at x: `below` turned round. */
  above(xM: number, lengthM: number): number {
    if (!this.isSteady) return xM - lengthM;
    let r = this.reachAt(xM - 1e-6);
    let x = xM;
    let leftS = lengthM / this.reaches[r]!.state.speedMps;
    for (; r > 0 && x - this.reaches[r]!.state.speedMps * leftS < this.reaches[r]!.x0; r--) {
      leftS -= (x - this.reaches[r]!.x0) / this.reaches[r]!.state.speedMps;
      x = this.reaches[r]!.x0;
    }
    return x - this.reaches[r]!.state.speedMps * leftS;
  }

  /** Travel time between two places at the flow of the estimate, without tide, s. */
  travelS(fromM: number, toM: number): number {
    let sum = 0;
    for (const { x0, x1, state } of this.reaches) {
      const a = Math.max(fromM, x0 === 0 ? -Infinity : x0);
      const b = Math.min(toM, x1 === this.endM ? Infinity : x1);
      if (b > a) sum += (b - a) / state.speedMps;
    }
    return sum;
  }

  /** Sum of 2 D L/U3 between two places: variance of the passage, s2. */
  varianceS2(fromM: number, toM: number): number {
    let sum = 0;
    for (const { x0, x1, state } of this.reaches) {
      const length = Math.min(toM, x1) - Math.max(fromM, x0);
      if (length > 0) sum += (2 * state.dispersionM2s * length) / state.speedMps ** 3;
    }
    return sum;
  }

  /** Largest current along the path, m/s. */
  get fastestMps(): number {
    return this.reaches.reduce((most, { state, top, bottom }) => Math.max(most, state.speedMps + Math.max(Math.hypot(top.cos, top.sin), Math.hypot(bottom.cos, bottom.sin))), 0);
  }

  /** How far a tide takes water up and down along the path, m. */
  get excursionM(): number {
    return this.isTidal ? (2 * this.fastestMps) / this.omega : 0;
  }
}

/** The reaches a release may pass through: upstream along the larger waters where tides reach, downstream to the end. */
function lineThrough(first: ReachState, states: readonly ReachState[]): ReachState[] {
  const line = [first];
  for (let above = first; above.reach.tide && !above.reach.structure; ) {
    const next = states.filter((state) => state.reach.downstreamReachId === above.reach.id).sort((a, b) => b.dischargeM3s - a.dischargeM3s || a.index - b.index)[0];
    if (!next) break;
    line.unshift(next);
    above = next;
  }
  for (let below = first.reach.downstreamReachId; below !== null; ) {
    const next = states.find((state) => state.reach.id === below)!;
    line.push(next);
    below = next.reach.downstreamReachId;
  }
  return line;
}

/** Geometric mean of the velocities of two tidal neighbours over that of `state`; 1 where they are not both tidal. */
const between = (neighbour: ReachState | undefined, state: ReachState): number => (neighbour?.reach.tide && state.reach.tide ? Math.sqrt(neighbour.speedMps / state.speedMps) : 1);

/** Tide at both ends of reach i of a path: its own at the lower end; above, that of the tidal reach above, or none at the tidal limit. */
function tideEnds(line: readonly ReachState[], i: number, states: readonly ReachState[]): [TideEnd, TideEnd] {
  const { reach } = line[i]!;
  const bottom = partsOf(reach.tide);
  if (!reach.tide || reach.structure) return [NO_TIDE, bottom];
  const above = states.filter((state) => state.reach.downstreamReachId === reach.id);
  if (above.length === 0) return [bottom, bottom];
  const tidal = line[i - 1]?.reach.tide ?? above.find((state) => state.reach.tide)?.reach.tide;
  return [partsOf(tidal), bottom];
}

function partsOf(tide: ReachState['reach']['tide']): TideEnd {
  if (!tide) return NO_TIDE;
  const phase = (2 * Math.PI * tide.maxEbbS) / tide.periodS;
  return { cos: tide.amplitudeMps * Math.cos(phase), sin: tide.amplitudeMps * Math.sin(phase) };
}
