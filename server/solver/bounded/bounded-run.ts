import type { Mixing } from '../../../shared/schemas/estimate';
import { SolverDivergedError } from '../errors';
import type { LossClock } from '../loss';
import type { Meter } from '../meter';
import type { ResolvedRelease } from '../release-profile';
import { agedVariance } from '../open/spread';
import type { Track } from '../open/track';
import { LAND } from './cell-grid';
import { levelAt, type BoundedFlow } from './flow-modes';
import { releaseCells, type ReleaseCells } from './release-cells';
import { growingCoefficient, Spreading } from './spreading';
import { TracerField } from './tracer-field';
import { fastestLoss, Transport, volumesAfter } from './transport';

/** Share of a cell's water that may leave in a step; 0.5 is the limit. */
const COURANT = 0.45;
/** Spreading takes no more than one exchange a cell and step, unless a run then takes more steps than these. */
const STEPS_FOR_SPREADING = { full: 2_000, preview: 250 };
/** A point release starts as a cloud of this many cells, one that lasts as a source this wide (standard deviations). */
export const START_CELLS = { instant: 1.5, lasting: 1 };

/** A release at its place, or on its way where it moves. */
export type PlannedRelease = { readonly release: ResolvedRelease; readonly xM: number; readonly yM: number; readonly track?: Track | undefined };

export type RunPlan = {
  readonly flow: BoundedFlow;
  readonly mixing: Mixing;
  readonly releases: readonly PlannedRelease[];
  readonly horizonS: number;
  readonly loss: LossClock;
  readonly isPreview: boolean;
  readonly meter: Meter;
};

/** Of both coefficients, m2/s: a cloud held for the excess over twice this has the right area once it is wide. */
const harmonicMean = (mixing: Mixing): number => (mixing.kind === 'constant' ? 2 / (1 / mixing.alongM2s + 1 / mixing.acrossM2s) : 1);

export type RunFigures = { steps: number; worstCourant: number };

/** Steps all fields of a water through time on one grid. Memory: about 150 bytes a cell, and 8 for each field. */
export class BoundedRun {
  /** Volume of the mixed layer by cell, m3, at `timeS`. */
  volume: Float64Array;
  timeS: number;
  readonly startS: number;
  readonly figures: RunFigures = { steps: 0, worstCourant: 0 };
  private nextVolume: Float64Array;
  private readonly transport: Transport;
  private readonly spreading: Spreading;
  private trialS: number;
  private lastTurnS = -Infinity;
  private readonly strideS: number;

  constructor(private readonly plan: RunPlan, private readonly fields: readonly TracerField[]) {
    const { flow, releases } = plan;
    const { water } = flow;
    this.startS = Math.min(0, ...releases.map(({ release }) => release.profile.startS));
    this.timeS = this.startS;
    const level = flow.modes.rise ? levelAt(flow.level, this.startS) : 0;
    this.volume = water.thicknessM.map((thickness, cell) => {
      const isMoved = water.grid.isWater[cell] !== LAND && !water.isClosed[water.body[cell]!];
      return thickness * (1 + (isMoved ? level / water.depthM[cell]! : 0)) * water.grid.dxM ** 2;
    });
    this.nextVolume = Float64Array.from(this.volume);
    this.transport = new Transport(water.grid, [...water.openFaces, ...water.streams.flatMap((stream) => stream.faces)]);
    this.spreading = new Spreading(water, plan.mixing);
    const span = plan.horizonS - this.startS;
    this.strideS = span / STEPS_FOR_SPREADING[plan.isPreview ? 'preview' : 'full'];
    this.trialS = span;
  }

  /** Fields of one kilogram for each release, starting as wide as the grid can carry. */
  static field(plan: RunPlan, index: number, loss: LossClock | null): TracerField {
    const { grid, thicknessM } = plan.flow.water;
    const { release, xM, yM, track } = plan.releases[index]!;
    const cells = release.profile.isInstant ? START_CELLS.instant : START_CELLS.lasting;
    const sigmaM = Math.max(release.release.initialRadiusM / 2, cells * grid.dxM);
    const over = (x: number, y: number): ReleaseCells => releaseCells(grid, x, y, sigmaM, thicknessM);
    const still = over(xM, yM);
    const at = new Float64Array(2);
    const into = (tS: number): ReleaseCells => {
      if (!track) return still;
      track.place(tS, at);
      return over(at[0]!, at[1]!);
    };
    return new TracerField(release, into, grid, loss, sigmaM ** 2);
  }

  /** Steps up to a time, exactly; `afterStep` is called after each. */
  advance(toS: number, afterStep: () => void): void {
    while (this.timeS < toS) {
      const gapS = toS - this.timeS;
      const most = this.longestStep(Math.min(gapS, this.trialS));
      const dtS = most >= gapS ? gapS : gapS / Math.ceil(gapS / most);
      const endS = most >= gapS || dtS === gapS ? toS : this.timeS + dtS;
      this.step(endS);
      afterStep();
    }
  }

  /** A step that keeps to the Courant number and follows current and spreading; leaves the flow set for it. */
  private longestStep(wantedS: number): number {
    const { flow, mixing } = this.plan;
    const { grid } = flow.water;
    let dtS = Math.min(wantedS, flow.slowS, Math.max(this.strideS, this.exchangeS(mixing)), this.movingS());
    for (let round = 0; round < 60; round++) {
      flow.meanOver(this.timeS, this.timeS + dtS);
      volumesAfter(grid, flow.now, this.volume, dtS, this.nextVolume);
      const { perS } = fastestLoss(grid, flow.now, this.volume);
      const after = flow.isSteady ? perS : fastestLoss(grid, flow.now, this.nextVolume).perS;
      const courant = Math.max(perS, after) * dtS;
      if (courant <= COURANT * (1 + 1e-9)) {
        this.trialS = Math.min(this.plan.horizonS - this.startS, courant > 0 ? dtS * Math.min(2, COURANT / courant) : 2 * dtS);
        return dtS;
      }
      dtS *= Math.min(0.9, COURANT / courant);
    }
    throw new SolverDivergedError(this.figures.steps, this.timeS, 'every cell', 'no step is short enough for the current');
  }

  /** Time in which the fastest moving release crosses a cell, s, while any is let go from it. */
  private movingS(): number {
    const { releases, flow } = this.plan;
    const speeds = releases.map(({ track, release }) => (track && release.profile.stopS > this.timeS ? track.maxSpeedMps : 0));
    return flow.water.grid.dxM / Math.max(0, ...speeds);
  }

  /** Time in which the strongest spreading exchanges a cell once, s. */
  private exchangeS(mixing: Mixing): number {
    const strongest = mixing.kind === 'constant' ? this.spreading.strongestM2s : Math.max(...this.fields.map((field) => this.coefficient(field, this.timeS, this.timeS + this.strideS)));
    const side = this.plan.flow.water.grid.dxM;
    return strongest > 0 ? (0.9 * side * side) / strongest : Infinity;
  }

  /**
   * What multiplies all weights over a step: 1, or a coefficient that grows, m2/s. A cloud that the grid made start too
   * wide spreads no further until it would have grown to that width, so that from then on it is as wide as it should be.
   */
  private coefficient(field: TracerField, fromS: number, toS: number): number {
    const { mixing } = this.plan;
    const { profile, release } = field.release;
    const startM2 = release.initialRadiusM ** 2 / 4;
    const varianceAt = agedVariance(mixing);
    if (varianceAt) return growingCoefficient(profile, (ageS) => Math.max(field.startVarianceM2, varianceAt(ageS, startM2)), fromS, toS);
    const heldS = Math.max(0, field.startVarianceM2 - startM2) / (2 * harmonicMean(mixing));
    return growingCoefficient(profile, (ageS) => 2 * Math.max(0, ageS - heldS), fromS, toS);
  }

  private step(endS: number): void {
    const { flow, meter } = this.plan;
    const { grid } = flow.water;
    meter.assertWanted();
    const [startS, dtS] = [this.timeS, endS - this.timeS];
    flow.meanOver(startS, endS);
    volumesAfter(grid, flow.now, this.volume, dtS, this.nextVolume);
    this.figures.worstCourant = Math.max(this.figures.worstCourant, fastestLoss(grid, flow.now, this.volume).perS * dtS);
    if (this.lastTurnS === -Infinity || startS - this.lastTurnS >= flow.slowS) {
      this.spreading.turn(flow.now);
      this.lastTurnS = startS;
    }
    for (const field of this.fields) this.stepField(field, startS, endS);
    [this.volume, this.nextVolume] = [this.nextVolume, this.volume];
    this.timeS = endS;
    this.figures.steps++;
    meter.count(1);
  }

  private stepField(field: TracerField, startS: number, endS: number): void {
    const { transport, spreading, plan, volume, nextVolume } = this;
    const dtS = endS - startS;
    const middleS = startS + dtS / 2;
    const isBackwards = this.figures.steps % 2 === 1;
    field.decay(startS, middleS, volume);
    field.add(startS, middleS, volume);
    if (!field.isEmpty) {
      const coefficient = this.coefficient(field, startS, endS);
      if (isBackwards) spreading.apply(field.c, volume, dtS, coefficient, true);
      field.left += transport.step(field.c, plan.flow.now, volume, nextVolume, dtS);
      if (!isBackwards) spreading.apply(field.c, nextVolume, dtS, coefficient, false);
      field.decay(middleS, endS, nextVolume);
    }
    field.add(middleS, endS, nextVolume);
  }

  /** Refuses to go on with a field that is no longer a number. */
  assertFinite(field: TracerField): void {
    if (Number.isFinite(field.inWater(this.volume))) return;
    const cell = field.c.findIndex((value) => !Number.isFinite(value));
    const { nx } = this.plan.flow.water.grid;
    throw new SolverDivergedError(this.figures.steps, this.timeS, `(${cell % nx}, ${Math.floor(cell / nx)})`);
  }
}
