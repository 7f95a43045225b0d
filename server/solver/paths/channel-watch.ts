import type { ChannelObserver, ChannelPoint, ChannelReach } from './channel-walk';
import { passageWithin } from './passage';
import { Tally } from './plan';
import type { PathRandom } from './random';

/** Deviations beyond which a path counts nothing: exp(-8) = 3e-4 of the middle. */
const CUT = 4;
/** Wider than this the kernel across no longer tells the banks apart, which is right for water mixed across. */
const WIDEST_ACROSS = 0.35;
const ROOT_TAU = Math.sqrt(2 * Math.PI);

/**
 * A window round a place in a channel: normal along (in travel time) and normal across (in shares of the discharge,
 * mirrored at both banks so that it integrates to one), scaled to concentration per kilogram: 1 / (Q sigma ...).
 */
export class ChannelKernel {
  readonly peak: number;
  /** Half-length of the window, two deviations, m. */
  readonly windowM: number;
  private readonly alongS: number;
  private readonly across: number;

  constructor(
    readonly place: Readonly<ChannelPoint>,
    private readonly reaches: readonly ChannelReach[],
    alongS: number,
    across: number,
  ) {
    this.alongS = alongS;
    this.across = Math.min(WIDEST_ACROSS, across);
    this.windowM = 2 * alongS * reaches[place.reach]!.state.speedMps;
    this.peak = 1 / (reaches[place.reach]!.state.dischargeM3s * ROOT_TAU * this.alongS * ROOT_TAU * this.across);
  }

  /** Concentration per kilogram that a path at `at` counts for the place, 1/m3. */
  at(at: Readonly<ChannelPoint>): number {
    const off = this.offS(at);
    if (off === null) return 0;
    const z = off / this.alongS;
    if (z > CUT || z < -CUT) return 0;
    return this.peak * Math.exp(-0.5 * z * z) * this.acrossAt(at.eta);
  }

  /** Mirror images beyond both banks; the third pair is out of reach of the widest kernel. */
  private acrossAt(eta: number): number {
    const of = (image: number): number => Math.exp(-0.5 * ((this.place.eta - image) / this.across) ** 2);
    return of(eta) + of(-eta) + of(2 - eta) + of(2 + eta) + of(eta - 2);
  }

  /** Travel time from the place to the path, s: in its own reach, or in the reaches joined to it above and below. */
  private offS({ reach, atS }: Readonly<ChannelPoint>): number | null {
    const { place, reaches } = this;
    if (reach === place.reach) return atS - place.atS;
    const own = reaches[place.reach]!;
    // Across a joint the coordinate across changes: only the channel that carries on is counted.
    if (own.down === reach && own.share === 1) return own.lengthS - place.atS + atS;
    const other = reaches[reach]!;
    if (other.down === place.reach && other.share === 1) return atS - other.lengthS - place.atS;
    return null;
  }
}

/** Counts the paths at one place of a channel: concentration per kilogram over time, and when each first passes its section. */
export class ChannelWatch implements ChannelObserver {
  readonly tally: Tally;
  readonly arrivalsS: Float64Array;
  private path = 0;
  /** 1 for a path that comes from above the section, -1 from below. */
  private from: 1 | -1 = 1;
  private readonly isAbove: ReadonlySet<number>;

  constructor(
    private readonly kernel: ChannelKernel,
    reaches: readonly ChannelReach[],
    times: number,
    paths: number,
    private readonly weight: (bornS: number, k: number) => number,
    /** A stream of its own, so that watching does not change the paths. */
    private readonly random: PathRandom,
  ) {
    this.tally = new Tally(times);
    this.arrivalsS = new Float64Array(paths).fill(Number.NaN);
    const above = new Set<number>();
    const visit = (index: number): void => {
      for (const up of reaches[index]!.up) {
        above.add(up);
        visit(up);
      }
    };
    visit(kernel.place.reach);
    this.isAbove = above;
  }

  begin(path: number, at: Readonly<ChannelPoint>): void {
    this.path = path;
    this.random.start(path);
    const { place } = this.kernel;
    this.from = this.isAbove.has(at.reach) || (at.reach === place.reach && at.atS < place.atS) ? 1 : -1;
  }

  step: NonNullable<ChannelObserver['step']> = (reach, fromAtS, toAtS, varianceS2, fromS, toS) => {
    const { place } = this.kernel;
    if (reach !== place.reach || !Number.isNaN(this.arrivalsS[this.path]!)) return;
    const start = this.from * (place.atS - fromAtS);
    // It came past the joint and the section in one step.
    if (start <= 0) {
      this.arrivalsS[this.path] = fromS;
      return;
    }
    const after = passageWithin(start, this.from * (place.atS - toAtS), varianceS2, toS - fromS, this.random);
    if (after !== null) this.arrivalsS[this.path] = fromS + after;
  };

  seen(k: number, at: Readonly<ChannelPoint>, bornS: number): void {
    const value = this.kernel.at(at);
    if (value > 0) this.tally.add(k, value * this.weight(bornS, k));
  }
}
