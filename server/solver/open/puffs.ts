import type { ResolvedRelease } from '../release-profile';
import type { LossClock } from '../loss';
import type { Current } from './current';
import type { Spread } from './spread';

/** Where one release starts, m on the local plane, and its mirror beyond a straight shore. */
export type Origins = readonly { readonly x: number; readonly y: number }[];

/** Everything that moves and spreads a cloud in open water. */
export type OpenMotion = {
  readonly current: Current;
  readonly spread: Spread;
  readonly loss: LossClock;
  /** Depth over which the substance is mixed, m. */
  readonly mixingDepthM: number;
};

export type OpenSource = {
  readonly release: ResolvedRelease;
  readonly origins: Origins;
  /** Variance along each axis at the start: radius squared over four (disk), m2. */
  readonly startVarianceM2: number;
};

/**
 * One puff: matter released at one moment, seen at a later one. Depth-averaged normal cloud in a current uniform in
 * space, C = M exp(-L) / (2 pi h sqrt(det S)) exp(-d^T S^-1 d / 2), exact for any current and tensor varying in time.
 * `seen` moves it; then `at` gives the concentration per kilogram, 1/m3, at a place.
 * Source: Fischer et al. 1979, section 2.4; two-dimensional form of the instantaneous source.
 */
export class Puff {
  private readonly now = new Float64Array(2);
  private readonly then = new Float64Array(2);
  readonly covariance = new Float64Array(3);
  shiftX = 0;
  shiftY = 0;
  survival = 1;
  private nowS = Number.NaN;
  private inverseDet = 0;
  private amplitude = 0;

  constructor(
    private readonly motion: OpenMotion,
    private readonly source: OpenSource,
  ) {}

  seen(releasedS: number, atS: number, withLoss: boolean): void {
    const { current, spread, loss } = this.motion;
    if (atS !== this.nowS) {
      current.displacement(atS, this.now);
      this.nowS = atS;
    }
    current.displacement(releasedS, this.then);
    this.shiftX = this.now[0]! - this.then[0]!;
    this.shiftY = this.now[1]! - this.then[1]!;
    spread.gained(releasedS, atS, this.covariance);
    this.covariance[0]! += this.source.startVarianceM2;
    this.covariance[2]! += this.source.startVarianceM2;
    this.survival = withLoss ? Math.exp(loss.exposure(releasedS) - loss.exposure(atS)) : 1;
    const det = this.covariance[0]! * this.covariance[2]! - this.covariance[1]! * this.covariance[1]!;
    this.inverseDet = 1 / det;
    this.amplitude = this.survival / (2 * Math.PI * this.motion.mixingDepthM * Math.sqrt(det));
  }

  /** Squared distance from the centre in standard deviations, for the source or its mirror. */
  distance2(x: number, y: number, origin: number): number {
    const { x: ox, y: oy } = this.source.origins[origin]!;
    const dx = x - ox - this.shiftX;
    const dy = y - oy - this.shiftY;
    const [sxx, sxy, syy] = [this.covariance[0]!, this.covariance[1]!, this.covariance[2]!];
    return (syy * dx * dx - 2 * sxy * dx * dy + sxx * dy * dy) * this.inverseDet;
  }

  at(x: number, y: number): number {
    let sum = 0;
    for (let i = 0; i < this.source.origins.length; i++) sum += Math.exp(-0.5 * this.distance2(x, y, i));
    return sum * this.amplitude;
  }
}
