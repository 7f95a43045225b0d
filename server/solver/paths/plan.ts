import type { LonLat } from '../../../shared/schemas/basics';
import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { ArrivalFigures } from './passage';

/** A receptor whose curve the paths are to give. */
export type WatchedReceptor = {
  readonly receptor: EstimateReceptor;
  /** About when the most arrives, s after T0: the cloud's size then sets the area over which paths are counted. */
  readonly aboutS: number;
};

export type PathPlan = {
  /** Paths in all, shared evenly between the releases. */
  readonly paths: number;
  readonly timesS: readonly number[];
  readonly watched: readonly WatchedReceptor[];
  /** How many paths to keep for drawing, and at which positions of `timesS`. */
  readonly drawn: number;
  readonly drawnAt: readonly number[];
  /** Position in `timesS` at which the whole cloud is kept. */
  readonly cloudAt: number;
};

/** Concentration at the plan's times with its standard error, kg/m3. */
export type PathCurve = {
  readonly receptorId: string;
  readonly values: Float64Array;
  readonly errors: Float64Array;
  /** What a single path in the middle of the counting area makes up at each time, kg/m3. */
  readonly onePath: Float64Array;
  /** Over what a path was counted, in words. */
  readonly counted: string;
  readonly arrival: ArrivalFigures;
};

/** The whole cloud at one time: places in the coordinates of the water's frames, and what each path stands for, kg. */
export type PathCloud = { readonly places: readonly CloudPlace[] };
export type CloudPlace = { readonly amount: number; readonly position: LonLat; readonly reachId: string | null; readonly chainageKm: number; readonly eta: number };

export type PathRun = {
  readonly curves: readonly PathCurve[];
  /** Share of the paths that the current carried onto land before the end. */
  readonly ashoreShare: number;
  readonly cloud: PathCloud;
  /** Each line ends at the last of the drawn times; one that begins later is shorter. */
  readonly lines: LonLat[][];
};

/** Mean and standard error of what the paths add up to at each time. */
export class Tally {
  readonly sums: Float64Array;
  private readonly squares: Float64Array;

  constructor(times: number) {
    this.sums = new Float64Array(times);
    this.squares = new Float64Array(times);
  }

  add(k: number, value: number): void {
    this.sums[k]! += value;
    this.squares[k]! += value * value;
  }

  /** Adds the mean over `n` paths times `scale`, at most `cap`, and its variance. */
  addMeanTo(values: Float64Array, variances: Float64Array, n: number, scale: number, cap: number): void {
    for (let k = 0; k < values.length; k++) {
      const mean = this.sums[k]! / n;
      values[k]! += scale * Math.min(cap, mean);
      variances[k]! += (scale * scale * Math.max(0, this.squares[k]! / n - mean * mean)) / n;
    }
  }
}

/** Watches draw from streams of their own: one for each release and receptor, after those of the paths. */
export const watchStream = (release: number, watched: number): number => 1_000 * (release + 1) + watched;

/** Five decimals are a metre: enough to draw, and small. Adding 0 turns -0, which JSON does not know, into 0. */
export const rounded = ([lon, lat]: readonly [number, number]): LonLat => [Math.round(lon * 1e5) / 1e5 + 0, Math.round(lat * 1e5) / 1e5 + 0];

/** Which paths of `count` are drawn, evenly spread over the release. */
export const isDrawn = (path: number, count: number, drawn: number): boolean => Math.floor(((path + 1) * drawn) / count) > Math.floor((path * drawn) / count);
