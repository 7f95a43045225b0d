import type { CurrentPart } from '../../../shared/schemas/estimate';
import { currentOf, type Current } from '../open/current';
import type { BoundedWater, PlanePoint } from './bounded-water';
import { layerVolume, netInflow } from './bounded-water';
import { LAND, nearestCell } from './cell-grid';
import { emptyFlow, MassProjector, type FaceFlow } from './projection';

export type MeasuredPoint = PlanePoint & { readonly eastMps: number; readonly northMps: number };
export type MeasuredFit = MeasuredPoint & { readonly gotEastMps: number; readonly gotNorthMps: number };

/**
 * Flows without sources or sinks of their own, whose sum with factors of time is the current:
 * steady (streams, and what measurements add), one for each m/s of the stated current to the east and to the north,
 * and one for each m/s of a rising level. Null where a mode has no part.
 */
export type FlowModes = {
  readonly steady: FaceFlow;
  readonly east: FaceFlow | null;
  readonly north: FaceFlow | null;
  readonly rise: FaceFlow | null;
  /** Worst error of mass in any cell of any mode, over the discharge of a face at the mode's speed scale. */
  readonly worstDivergence: number;
  readonly fits: readonly MeasuredFit[];
};

export type ModeInput = { readonly water: BoundedWater; readonly parts: readonly CurrentPart[]; readonly measured: readonly MeasuredPoint[]; readonly releases: readonly PlanePoint[]; readonly hasTide: boolean };

/** Depths from the shore over which a current falls to nothing beside open water (common practice, no source). */
const SHORE_DEPTHS = 5;
/** In closed water a gyre is raised by no more than this at a time to meet what is stated or measured at a place. */
const MOST_RAISED = 3;
/** Measured currents are met when this share of their squares is left. */
const MET = 1e-4;
const MEASURED_PASSES = 12;

export function flowModes(input: ModeInput): FlowModes {
  const { water, parts, measured, hasTide } = input;
  const maker = new ModeMaker(water);
  const steadyParts = parts.filter((part) => part.kind === 'residual' || part.kind === 'wind');
  const east = parts.length > 0 ? maker.uniform(0, input.releases[0]!) : null;
  const north = parts.length > 0 ? maker.uniform(1, input.releases[0]!) : null;
  const stated = new Float64Array(2);
  currentOf(steadyParts).velocity(0, stated);
  const background = sumOf(water, [[east, stated[0]!], [north, stated[1]!]]);
  const { steady, fits } = maker.steady(measured, background);
  const rise = hasTide && water.openFaces.length > 0 ? maker.rise() : null;
  return { steady, east, north, rise, worstDivergence: maker.worst, fits };
}

const sumOf = ({ grid }: BoundedWater, terms: readonly (readonly [FaceFlow | null, number])[]): FaceFlow => {
  const out = emptyFlow(grid);
  for (const [flow, factor] of terms) if (flow) addFlow(out, flow, factor);
  return out;
};

export function addFlow(out: FaceFlow, flow: FaceFlow, factor: number): void {
  for (let n = 0; n < out.x.length; n++) out.x[n]! += factor * flow.x[n]!;
  for (let n = 0; n < out.y.length; n++) out.y[n]! += factor * flow.y[n]!;
}

/** Velocity in the middle of a place's cell, m/s: the mean of opposite faces over the thickness. */
export function velocityAt(water: BoundedWater, flow: FaceFlow, cell: number, out: Float64Array): void {
  const { grid, thicknessM } = water;
  const face = cell + Math.floor(cell / grid.nx);
  const per = 1 / (2 * thicknessM[cell]! * grid.dxM);
  out[0] = (flow.x[face]! + flow.x[face + 1]!) * per;
  out[1] = (flow.y[cell]! + flow.y[cell + grid.nx]!) * per;
}

class ModeMaker {
  worst = 0;
  private readonly projector: MassProjector;
  /** Thickness at the faces through which water may pass, m; open edge doubled: p = 0 is half a cell away. */
  private readonly k: FaceFlow;
  /** Thickness times width of those faces, m2. */
  private readonly section: FaceFlow;
  private readonly decay: Float64Array;
  private readonly still: Float64Array;

  constructor(private readonly water: BoundedWater) {
    const { grid, thicknessM, openFaces, body, isClosed } = water;
    this.k = emptyFlow(grid);
    this.section = emptyFlow(grid);
    for (let cell = grid.nx; cell < grid.isWater.length; cell++) {
      if (grid.isWater[cell] === LAND) continue;
      if (grid.isWater[cell - 1] !== LAND) this.k.x[cell + Math.floor(cell / grid.nx)] = (thicknessM[cell]! + thicknessM[cell - 1]!) / 2;
      if (grid.isWater[cell - grid.nx] !== LAND) this.k.y[cell] = (thicknessM[cell]! + thicknessM[cell - grid.nx]!) / 2;
    }
    addFlow(this.section, this.k, grid.dxM);
    for (const { axis, face, cell } of openFaces) {
      (axis === 0 ? this.k.x : this.k.y)[face] = 2 * thicknessM[cell]!;
      (axis === 0 ? this.section.x : this.section.y)[face] = thicknessM[cell]! * grid.dxM;
    }
    this.projector = new MassProjector(grid, this.k, body, isClosed);
    this.decay = shoreDecay(water);
    this.still = new Float64Array(grid.isWater.length);
  }

  /** The flow nearest to 1 m/s along an axis that falls to nothing at the shore and passes no land. */
  uniform(axis: 0 | 1, release: PlanePoint): FaceFlow {
    const flow = this.guess(() => [axis === 0 ? 1 : 0, axis === 1 ? 1 : 0]);
    this.project(flow, this.still);
    const at = nearestCell(this.water.grid, release.xM, release.yM)!.cell;
    if (!this.water.isClosed[this.water.body[at]!]) return flow;
    // What flows one way in closed water comes back elsewhere: the stated current is the one at the release.
    const got = new Float64Array(2);
    velocityAt(this.water, flow, at, got);
    const raise = Math.min(MOST_RAISED, Math.max(1, 1 / Math.max(got[axis]!, 1e-9)));
    const out = emptyFlow(this.water.grid);
    addFlow(out, flow, raise);
    return out;
  }

  /** The flow that a level rising by 1 m/s everywhere draws through the open edge. */
  rise(): FaceFlow {
    const { grid, thicknessM, depthM, body, isClosed } = this.water;
    const flow = emptyFlow(grid);
    const target = thicknessM.map((thickness, cell) => (grid.isWater[cell] === LAND || isClosed[body[cell]!] ? 0 : (-thickness / depthM[cell]!) * grid.dxM ** 2));
    this.project(flow, target);
    return flow;
  }

  /**
   * Streams in and out, plus what measured currents add to the background: their differences from it are spread over
   * the water and made consistent with mass, which changes them, so that the rest is spread again over half the reach
   * (successive corrections, Cressman 1959, Mon. Weather Rev. 87:367).
   */
  steady(measured: readonly MeasuredPoint[], background: FaceFlow): { steady: FaceFlow; fits: MeasuredFit[] } {
    const streams = emptyFlow(this.water.grid);
    const target = this.streamTarget(streams);
    this.project(streams, target);
    const points = measured.map((point) => ({ ...point, cell: nearestCell(this.water.grid, point.xM, point.yM)!.cell }));
    let fits = this.fitsOf(points, streams, background);
    const steady = streams;
    for (let pass = 0; pass < MEASURED_PASSES && misfit(fits) > MET * misfit(points.map((point) => ({ ...point, gotEastMps: 0, gotNorthMps: 0 }))); pass++) {
      const differences = fits.map((fit) => ({ ...fit, du: fit.eastMps - fit.gotEastMps, dv: fit.northMps - fit.gotNorthMps }));
      const flow = this.guess((x, y) => spreadDifferences(differences, x, y, this.reachOf(pass)));
      this.project(flow, this.still);
      // As much of it as brings the points nearest to what was measured.
      const got = this.fitsOf(points, flow, null);
      const [along, square] = got.reduce(([a, b], fit, n) => [a + fit.gotEastMps * differences[n]!.du + fit.gotNorthMps * differences[n]!.dv, b + fit.gotEastMps ** 2 + fit.gotNorthMps ** 2], [0, 0]);
      const share = square > 0 ? Math.min(MOST_RAISED, Math.max(0, along / square)) : 0;
      addFlow(steady, flow, share);
      fits = this.fitsOf(points, steady, background);
    }
    return { steady, fits };
  }

  /** Over all the water at first, then half as far each time, down to a few cells. */
  private reachOf(pass: number): number {
    const { nx, ny, dxM } = this.water.grid;
    return Math.max(2.5 * dxM, (Math.max(nx, ny) * dxM) / 2 ** pass);
  }

  private fitsOf(points: readonly (MeasuredPoint & { cell: number })[], steady: FaceFlow, background: FaceFlow | null): MeasuredFit[] {
    const a = new Float64Array(2);
    const b = new Float64Array(2);
    return points.map((point) => {
      velocityAt(this.water, steady, point.cell, a);
      if (background) velocityAt(this.water, background, point.cell, b);
      return { ...point, gotEastMps: a[0]! + b[0]!, gotNorthMps: a[1]! + b[1]! };
    });
  }

  /** Sets the faces of the streams and gives what each cell gains: in closed water the difference of in and out fills the layer evenly. */
  private streamTarget(flow: FaceFlow): Float64Array {
    const { water } = this;
    for (const { dischargeM3s, faces } of water.streams) for (const { axis, face, sign } of faces) (axis === 0 ? flow.x : flow.y)[face]! -= (sign * dischargeM3s) / faces.length;
    const gain = water.isClosed.map((closed, number) => (closed ? netInflow(water, number) / layerVolume(water, number) : 0));
    return water.thicknessM.map((thickness, cell) => -gain[water.body[cell]!]! * thickness * water.grid.dxM ** 2);
  }

  private project(flow: FaceFlow, target: Float64Array): void {
    const error = this.projector.project(flow, target);
    const scale = [flow.x, flow.y].reduce((most, values) => values.reduce((m, value) => Math.max(m, Math.abs(value)), most), 0);
    if (scale > 0) this.worst = Math.max(this.worst, error / scale);
  }

  private guess(velocity: (xM: number, yM: number) => readonly [number, number]): FaceFlow {
    const { grid } = this.water;
    const { section, decay } = this;
    const flow = emptyFlow(grid);
    const between = (a: number, b: number): number => (grid.isWater[a] === LAND ? decay[b]! : grid.isWater[b] === LAND ? decay[a]! : (decay[a]! + decay[b]!) / 2);
    for (let j = 1; j < grid.ny; j++) {
      for (let i = 1; i < grid.nx; i++) {
        const cell = j * grid.nx + i;
        const face = cell + j;
        const x = grid.x0M + i * grid.dxM;
        const y = grid.y0M + j * grid.dxM;
        if (section.x[face]! > 0) flow.x[face] = section.x[face]! * between(cell - 1, cell) * velocity(x - grid.dxM / 2, y)[0];
        if (section.y[cell]! > 0) flow.y[cell] = section.y[cell]! * between(cell - grid.nx, cell) * velocity(x, y - grid.dxM / 2)[1];
      }
    }
    return flow;
  }
}

/**
 * Share of a current left at a distance from the shore: beside open water it rises within a few depths; in closed water,
 * where it has to turn round, it rises as a parabola up to the middle.
 */
function shoreDecay({ grid, shoreM, depthM, body, isClosed }: BoundedWater): Float64Array {
  const widest = isClosed.map(() => 0);
  shoreM.forEach((distance, cell) => (widest[body[cell]!] = Math.max(widest[body[cell]!]!, distance)));
  return shoreM.map((distance, cell) => {
    if (grid.isWater[cell] === LAND) return 0;
    const z = distance / widest[body[cell]!]!;
    return isClosed[body[cell]!] ? z * (2 - z) : -Math.expm1(-distance / Math.max(grid.dxM, SHORE_DEPTHS * depthM[cell]!));
  });
}

/** Each difference falls off as a normal curve of standard deviation `reachM`; where many overlap they are averaged. */
function spreadDifferences(points: readonly (PlanePoint & { du: number; dv: number })[], x: number, y: number, reachM: number): readonly [number, number] {
  let [u, v, weights] = [0, 0, 0];
  for (const point of points) {
    const weight = Math.exp(-((point.xM - x) ** 2 + (point.yM - y) ** 2) / (2 * reachM ** 2));
    u += weight * point.du;
    v += weight * point.dv;
    weights += weight;
  }
  const per = 1 / Math.max(1, weights);
  return [u * per, v * per];
}

const misfit = (fits: readonly MeasuredFit[]): number => fits.reduce((sum, fit) => sum + (fit.eastMps - fit.gotEastMps) ** 2 + (fit.northMps - fit.gotNorthMps) ** 2, 0);

/** Level above its mean, m: a cosine with its highest at `highWaterS`; zero without a tide. */
export type Level = { readonly amplitudeM: number; readonly periodS: number; readonly highWaterS: number };
export const levelAt = ({ amplitudeM, periodS, highWaterS }: Level, tS: number): number => (amplitudeM === 0 ? 0 : amplitudeM * Math.cos((2 * Math.PI * (tS - highWaterS)) / periodS));

/** The current of a water: modes times functions of time. `meanOver` leaves in `now` the mean discharges of a span, so that volumes add up exactly. */
export class BoundedFlow {
  readonly now: FaceFlow;
  readonly isSteady: boolean;
  private readonly before = new Float64Array(2);
  private readonly after = new Float64Array(2);
  private isSet = false;

  constructor(
    readonly water: BoundedWater,
    readonly modes: FlowModes,
    private readonly current: Current,
    readonly level: Level,
  ) {
    this.now = emptyFlow(water.grid);
    this.isSteady = current.isConstant && (modes.rise === null || level.amplitudeM === 0);
  }

  meanOver(fromS: number, toS: number): FaceFlow {
    if (this.isSet && this.isSteady) return this.now;
    this.isSet = true;
    const { modes, now, current, before, after } = this;
    current.displacement(fromS, before);
    current.displacement(toS, after);
    const per = 1 / (toS - fromS);
    now.x.set(modes.steady.x);
    now.y.set(modes.steady.y);
    if (modes.east) addFlow(now, modes.east, (after[0]! - before[0]!) * per);
    if (modes.north) addFlow(now, modes.north, (after[1]! - before[1]!) * per);
    if (modes.rise) addFlow(now, modes.rise, (levelAt(this.level, toS) - levelAt(this.level, fromS)) * per);
    return now;
  }

  /** What the modes east, north and rise count for at one moment (m/s). */
  factorsAt(tS: number, out: Float64Array): void {
    this.current.velocity(tS, out);
    const { amplitudeM, periodS, highWaterS } = this.level;
    const w = (2 * Math.PI) / periodS;
    out[2] = amplitudeM === 0 ? 0 : -amplitudeM * w * Math.sin(w * (tS - highWaterS));
  }

  /** Span over which the current hardly changes, s; Infinity where it never does. */
  get slowS(): number {
    if (this.isSteady) return Infinity;
    const period = Math.min(this.current.shortestPeriodS, this.level.amplitudeM > 0 && this.modes.rise ? this.level.periodS : Infinity);
    const kinks = this.current.kinksS;
    const gap = kinks.slice(1).reduce((least, t, n) => Math.min(least, Math.max(60, t - kinks[n]!)), Infinity);
    return Math.min(period / 48, gap / 2);
  }
}
