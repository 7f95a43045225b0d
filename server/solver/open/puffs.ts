import type { ResolvedRelease } from '../release-profile';
import type { LossClock } from '../loss';
import type { Current } from './current';
import type { Shear } from './shear';
import { channelDensity, leftOf, mirrored, type ShoreFrame } from './shores';
import type { Spread } from './spread';
import type { Track } from './track';
import type { DepthFactor } from './vertical';

/** Where one release starts, m on the local plane, and its mirror beyond a straight shore. */
export type Origins = readonly { readonly x: number; readonly y: number }[];

/** Everything that moves and spreads a cloud in open water. */
export type OpenMotion = {
  readonly current: Current;
  readonly spread: Spread;
  readonly loss: LossClock;
  /** Depth over which the substance is mixed, m. */
  readonly mixingDepthM: number;
  /** Where the current changes evenly in space; none with shores. */
  readonly shear?: Shear;
  readonly shore?: ShoreFrame | null;
};

export type OpenSource = {
  readonly release: ResolvedRelease;
  /** Start and its mirror; between two shores the start alone, a moving release at its first place. */
  readonly origins: Origins;
  /** Variance along each axis at the start: radius squared over four (disk), m2. */
  readonly startVarianceM2: number;
  /** A release that moves. */
  readonly track?: Track;
};

/** The motion as a source sees it: spread that depends on the size of the first cloud starts from its own. */
export const motionFor = (motion: OpenMotion, source: OpenSource): OpenMotion =>
  motion.spread.from ? { ...motion, spread: motion.spread.from(source.startVarianceM2) } : motion;

/**
 * One puff: matter released at one moment, seen at a later one. Depth-averaged normal cloud in a current uniform in
 * space, C = M exp(-L) / (2 pi h sqrt(det S)) exp(-d^T S^-1 d / 2), exact for any current and tensor varying in time, and
 * for a current that changes evenly in space. Shores are met by images, two of them by images or cosines.
 * `seen` moves it; then `at` gives the concentration per kilogram, 1/m3, at a place.
 * Source: Fischer et al. 1979, section 2.4; two-dimensional form of the instantaneous source.
 */
export class Puff {
  private readonly now = new Float64Array(2);
  private readonly then = new Float64Array(2);
  private readonly start = new Float64Array(2);
  private readonly middle = new Float64Array(2);
  private readonly motion: OpenMotion;
  /** Covariance, m2: xx, xy, yy. */
  readonly covariance = new Float64Array(3);
  /** Way of the centre since its release, m. */
  shiftX = 0;
  shiftY = 0;
  survival = 1;
  private nowS = Number.NaN;
  private inverseDet = 0;
  private amplitude = 0;

  constructor(
    motion: OpenMotion,
    private readonly source: OpenSource,
    private readonly depth: DepthFactor | null = null,
  ) {
    this.motion = motionFor(motion, source);
  }

  seen(releasedS: number, atS: number, withLoss: boolean): void {
    const { spread, loss } = this.motion;
    this.move(releasedS, atS);
    spread.gained(releasedS, atS, this.covariance);
    this.covariance[0]! += this.source.startVarianceM2;
    this.covariance[2]! += this.source.startVarianceM2;
    this.survival = withLoss ? Math.exp(loss.exposure(releasedS) - loss.exposure(atS)) : 1;
    const det = this.covariance[0]! * this.covariance[2]! - this.covariance[1]! * this.covariance[1]!;
    this.inverseDet = 1 / det;
    const strength = (this.survival / this.motion.mixingDepthM) * (this.depth ? this.depth(atS - releasedS) : 1);
    this.amplitude = this.isBetweenShores ? strength : strength / (2 * Math.PI * Math.sqrt(det));
  }

  private get isBetweenShores(): boolean {
    return typeof this.motion.shore?.oppositeM === 'number';
  }

  private move(releasedS: number, atS: number): void {
    const { current, shear } = this.motion;
    const { origins, track } = this.source;
    this.start[0] = origins[0]!.x;
    this.start[1] = origins[0]!.y;
    track?.place(releasedS, this.start);
    if (shear) {
      shear.place(releasedS, atS, this.start[0]!, this.start[1]!, this.middle);
      this.shiftX = this.middle[0]! - this.start[0]!;
      this.shiftY = this.middle[1]! - this.start[1]!;
      return;
    }
    if (atS !== this.nowS) {
      current.displacement(atS, this.now);
      this.nowS = atS;
    }
    current.displacement(releasedS, this.then);
    this.shiftX = this.now[0]! - this.then[0]!;
    this.shiftY = this.now[1]! - this.then[1]!;
  }

  /** How many centres it has: one, or two with the mirror image beyond a straight shore. */
  get images(): number {
    return this.source.origins.length;
  }

  /** Centre of the puff or of its mirror image, m. */
  centre(image: number): { x: number; y: number } {
    const from = this.source.track || image === 0 ? { x: this.start[0]!, y: this.start[1]! } : this.source.origins[image]!;
    const at = this.source.track && image === 1 ? mirrored(from, this.motion.shore!) : from;
    return { x: at.x + this.shiftX, y: at.y + this.shiftY };
  }

  /** Squared distance from a centre in standard deviations; between two shores along them alone, a lower bound. */
  distance2(x: number, y: number, image: number): number {
    const centre = this.centre(image);
    const dx = x - centre.x;
    const dy = y - centre.y;
    const [sxx, sxy, syy] = [this.covariance[0]!, this.covariance[1]!, this.covariance[2]!];
    if (this.isBetweenShores) {
      const { ex, ey } = this.motion.shore!;
      return (dx * ex + dy * ey) ** 2 / (ex * ex * sxx + 2 * ex * ey * sxy + ey * ey * syy);
    }
    return (syy * dx * dx - 2 * sxy * dx * dy + sxx * dy * dy) * this.inverseDet;
  }

  /** Distance to the nearest centre, m; between two shores along them alone. */
  nearestM(x: number, y: number): number {
    let least = Infinity;
    for (let image = 0; image < this.images; image++) {
      const { x: cx, y: cy } = this.centre(image);
      const { shore } = this.motion;
      least = Math.min(least, this.isBetweenShores ? Math.abs((x - cx) * shore!.ex + (y - cy) * shore!.ey) : Math.hypot(x - cx, y - cy));
    }
    return least;
  }

  at(x: number, y: number): number {
    if (this.isBetweenShores) {
      const { shore } = this.motion;
      const { x: cx, y: cy } = this.centre(0);
      const atM = Math.min(shore!.oppositeM!, Math.max(0, leftOf(shore!, x, y)));
      return this.amplitude * channelDensity(shore!, this.covariance, x - cx, y - cy, leftOf(shore!, cx, cy), atM);
    }
    let sum = 0;
    for (let image = 0; image < this.images; image++) sum += Math.exp(-0.5 * this.distance2(x, y, image));
    return sum * this.amplitude;
  }
}
