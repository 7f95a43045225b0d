import type { FrameGrid, StreamHead } from '../../shared/frames';
import type { EstimateDocument, EstimateReceptor } from '../../shared/schemas/estimate';
import type { Check, TravelTime, WorkingLine } from '../../shared/schemas/estimate-result';
import type { LossClock } from './loss';
import type { LossPart } from './losses/loss-parts';
import type { Meter } from './meter';
import type { OpenSource } from './open/puffs';
import type { PathMotion } from './paths/motion';
import type { ResolvedRelease, WeightSet, Weights } from './release-profile';

/** Takes messages as they are ready. A payload is handed over: the engine keeps no reference. */
export type EstimateSink = (head: StreamHead, payload?: Uint8Array) => void;

/** What every solver is given. */
export type RunInput = {
  readonly doc: EstimateDocument;
  readonly releases: readonly ResolvedRelease[];
  readonly weights: WeightSet;
  readonly loss: LossClock;
  /** The processes that make it up. */
  readonly lossParts: readonly LossPart[];
  /** Coarser frames and release-time integrals, for a forecast that follows the hand. */
  readonly isPreview: boolean;
  readonly tolerance: number;
  readonly meter: Meter;
  /** How far a numeric solver has come; left out in previews. */
  readonly progress?: ((stage: string, done: number, of: number) => void) | undefined;
};

/** A time around which a response may rise or fall within a few `scaleS`. */
export type Feature = { readonly atS: number; readonly scaleS: number };

/** Answer of one place to one release of one kilogram (or count). */
export type UnitResponse = {
  /** Concentration per kilogram, 1/m3. */
  at(tS: number, withLoss: boolean): number;
  readonly features: readonly Feature[];
};

/** A receptor as a solver sees it: one response per release; null where that release cannot reach it. */
export type ReceptorSite = {
  readonly distanceM: number | null;
  readonly responses: readonly (UnitResponse | null)[];
  /** Why nothing arrives, where no response is given. */
  readonly reason: string;
  readonly checks: readonly Check[];
  /** How the peak came about; `peakS` is the time of the likely peak. */
  working(peakS: number): WorkingLine[];
};

/** Concentrations per node, kg/m3; NaN where there is no estimate. */
export type GriddedField = { grid: FrameGrid; values: Float64Array };

/** Shares of the released amount, kg, at one time. */
export type Books = { released: number; inWater: number; lost: number; left: number };

export type DistanceTime = { timesS: number[]; chainageKm: number[]; reachIds: string[]; values: number[][] };

/** A document made ready: concentration at a place and time, and grids at a time. */
export type PreparedField = {
  receptor(index: number, receptor: EstimateReceptor): ReceptorSite;
  gridAt(tS: number, weights: Weights): GriddedField;
  /** Largest value at each node up to the last of the times. */
  envelope(frameTimesS: readonly number[], weights: Weights): GriddedField;
  /** The same up to each of `untilS`, ascending, where that is cheaper in one pass. */
  envelopes?(untilS: readonly number[], weights: Weights): GriddedField[];
  distanceTime(timesS: readonly number[], weights: Weights): DistanceTime | null;
  books(tS: number, weights: Weights): Books;
  /** Rivers: passage by chainage; left out in previews. */
  travelTimes?(weights: Weights): TravelTime[];
  readonly working: readonly WorkingLine[];
  readonly checks: readonly Check[];
  /** Where the current differs from place to place: what random paths walk in. */
  readonly pathWater?: PathWater;
  /** How a numeric solver stepped; a closed form leaves it out. */
  readonly numerics?: Numerics;
};

/** Motion of the paths of a release, and the thickness of the layer mixed over at a place, m. */
export type PathWater = { motionOf(source: OpenSource): PathMotion; thicknessM(x: number, y: number): number };

/** For the books: largest Courant number, values set to zero or cut, and how fine cells and steps were, in words. */
export type Numerics = { readonly maxCourant: number | null; readonly clippedValues: number; readonly resolution: string };

export type Solver = { readonly name: string; prepare(input: RunInput): PreparedField };
