import type { PlaneObserver } from './plane-walk';
import { passageWithin } from './passage';
import { Tally } from './plan';
import type { PathRandom } from './random';
import type { Walls } from './walls';

/**
 * The kernel with which paths are counted has this share of the cloud's own standard deviations. It widens the cloud by
 * sqrt(1 + share^2): the peak of an open cloud comes out 1 / (1 + share^2) = 6 % low, well inside what is asked of it.
 */
export const KERNEL_SHARE = 0.25;
/** Beyond this many kernel deviations a path counts nothing: exp(-8) = 3e-4 of the middle. */
const CUT2 = 16;
/** Radius of the circle round a receptor that counts as arriving, in kernel deviations (geometric mean). */
const ARRIVAL_RADII = 2;
/** A circle smaller than this says nothing about an intake, m. */
const LEAST_RADIUS_M = 10;

/** A normal kernel round a place, scaled so that it integrates to one over the water within its reach. */
export class PlaneKernel {
  readonly peak: number;
  readonly radiusM: number;
  private readonly ixx: number;
  private readonly ixy: number;
  private readonly iyy: number;
  private readonly reachX: number;
  private readonly reachY: number;

  /** @param covariance of the cloud at the place, xx, xy, yy, m2 */
  constructor(
    readonly x: number,
    readonly y: number,
    covariance: ArrayLike<number>,
    walls: Walls | null,
  ) {
    const share2 = KERNEL_SHARE * KERNEL_SHARE;
    const [sxx, sxy, syy] = [covariance[0]! * share2, covariance[1]! * share2, covariance[2]! * share2];
    const det = sxx * syy - sxy * sxy;
    this.ixx = syy / det;
    this.ixy = -sxy / det;
    this.iyy = sxx / det;
    this.reachX = Math.sqrt(CUT2 * sxx);
    this.reachY = Math.sqrt(CUT2 * syy);
    this.radiusM = Math.max(LEAST_RADIUS_M, ARRIVAL_RADII * det ** 0.25);
    this.peak = 1 / (2 * Math.PI * Math.sqrt(det) * this.waterShare(walls));
  }

  at(x: number, y: number): number {
    const dx = x - this.x;
    if (dx > this.reachX || dx < -this.reachX) return 0;
    const dy = y - this.y;
    if (dy > this.reachY || dy < -this.reachY) return 0;
    const r2 = this.ixx * dx * dx + 2 * this.ixy * dx * dy + this.iyy * dy * dy;
    return r2 > CUT2 ? 0 : this.peak * Math.exp(-0.5 * r2);
  }

  /** Share of the kernel's weight that lies in the water, by a sum over 24 by 24 nodes. */
  private waterShare(walls: Walls | null): number {
    if (!walls || walls.clearanceM(this.x, this.y) > Math.hypot(this.reachX, this.reachY)) return 1;
    let wet = 0;
    let all = 0;
    for (let i = 0; i < 24; i++)
      for (let j = 0; j < 24; j++) {
        const dx = (2 * ((i + 0.5) / 24) - 1) * this.reachX;
        const dy = (2 * ((j + 0.5) / 24) - 1) * this.reachY;
        const weight = Math.exp(-0.5 * (this.ixx * dx * dx + 2 * this.ixy * dx * dy + this.iyy * dy * dy));
        all += weight;
        if (walls.isWater(this.x + dx, this.y + dy)) wet += weight;
      }
    // A receptor in a corner still has some water before it: never count a path more than tenfold.
    return Math.max(0.1, wet / all);
  }
}

/** Counts the paths at one receptor: concentration per kilogram over time, and when each first comes within the circle. */
export class PlaneWatch implements PlaneObserver {
  readonly tally: Tally;
  readonly arrivalsS: Float64Array;
  private path = 0;

  constructor(
    private readonly kernel: PlaneKernel,
    times: number,
    paths: number,
    /** 1 over the mixing depth, times what survives of matter born at the first time at the second (position). */
    private readonly weight: (bornS: number, k: number) => number,
    /** A stream of its own, so that watching does not change the paths. */
    private readonly random: PathRandom,
  ) {
    this.tally = new Tally(times);
    this.arrivalsS = new Float64Array(paths).fill(Number.NaN);
  }

  begin(path: number, x: number, y: number, bornS: number): void {
    this.path = path;
    this.random.start(path);
    if (this.off(x, y) <= 0) this.arrivalsS[path] = bornS;
  }

  step: NonNullable<PlaneObserver['step']> = (fromX, fromY, fromS, x, y, toS, figures) => {
    if (!Number.isNaN(this.arrivalsS[this.path]!)) return;
    const from = this.off(fromX, fromY);
    const to = this.off(x, y);
    const widest = figures[2]! + figures[4]!;
    // Neither end within five standard deviations of a step: not met.
    if (from > 0 && to > 0 && Math.min(from, to) ** 2 > 25 * widest) return;
    const nx = (fromX - this.kernel.x) / (from + this.kernel.radiusM);
    const ny = (fromY - this.kernel.y) / (from + this.kernel.radiusM);
    const variance = figures[2]! * nx * nx + 2 * figures[3]! * nx * ny + figures[4]! * ny * ny;
    const after = from <= 0 ? 0 : passageWithin(from, to, Math.max(variance, 1e-12 * widest), toS - fromS, this.random);
    if (after !== null) this.arrivalsS[this.path] = fromS + after;
  };

  seen(k: number, x: number, y: number, bornS: number): void {
    const value = this.kernel.at(x, y);
    if (value > 0) this.tally.add(k, value * this.weight(bornS, k));
  }

  /** Distance to the circle, m; the circle counts as a straight line over one step. */
  private off(x: number, y: number): number {
    const dx = x - this.kernel.x;
    const dy = y - this.kernel.y;
    return Math.sqrt(dx * dx + dy * dy) - this.kernel.radiusM;
  }
}
