import { Meter } from '../../server/solver/meter';
import { boundedSolver } from '../../server/solver/bounded/bounded-solver';
import { LAND, type CellGrid } from '../../server/solver/bounded/cell-grid';
import { emptyFlow, type FaceFlow } from '../../server/solver/bounded/projection';
import { Spreading } from '../../server/solver/bounded/spreading';
import { fastestLoss, Transport, volumesAfter } from '../../server/solver/bounded/transport';
import type { BoundedWater } from '../../server/solver/bounded/bounded-water';
import { bodiesOf } from '../../server/solver/bounded/cell-grid';
import { lossClock } from '../../server/solver/loss';
import { resolveReleases, weightsOf } from '../../server/solver/release-profile';
import type { PreparedField, RunInput } from '../../server/solver/types';
import type { EstimateDocument, Mixing } from '../../shared/schemas/estimate';

/** Cells of side dx with one cell of land all round; cell (1, 1) has its centre at dx/2, dx/2. */
export function box(cellsX: number, cellsY: number, dxM: number, isLand: (x: number, y: number) => boolean = () => false): CellGrid {
  const nx = cellsX + 2;
  const ny = cellsY + 2;
  const isWater = new Uint8Array(nx * ny);
  for (let j = 1; j <= cellsY; j++) for (let i = 1; i <= cellsX; i++) if (!isLand((i - 0.5) * dxM, (j - 0.5) * dxM)) isWater[j * nx + i] = 1;
  return { nx, ny, dxM, x0M: -dxM / 2, y0M: -dxM / 2, isWater };
}

/** A water of uniform depth 1 m on a grid, closed all round. */
export function basin(grid: CellGrid): BoundedWater {
  const { body, count } = bodiesOf(grid);
  const wet = Float64Array.from(grid.isWater);
  return { grid, body, isClosed: Array.from({ length: count + 1 }, (_, n) => n > 0), isCutOff: new Uint8Array(grid.isWater.length), openFaces: [], streams: [], thicknessM: wet, depthM: wet, shoreM: wet, narrowestDepthM: 1 };
}

export const places = (grid: CellGrid): { cell: number; x: number; y: number }[] =>
  Array.from(grid.isWater, (wet, cell) => ({ wet, cell, x: grid.x0M + (cell % grid.nx) * grid.dxM, y: grid.y0M + Math.floor(cell / grid.nx) * grid.dxM })).filter(({ wet }) => wet !== LAND);

export function fill(grid: CellGrid, f: (x: number, y: number) => number): Float64Array {
  const c = new Float64Array(grid.isWater.length);
  for (const { cell, x, y } of places(grid)) c[cell] = f(x, y);
  return c;
}

/** Discharges from a stream function at the corners of the cells, m3/s: no cell gains or loses. Faces at land are closed. */
export function flowFrom(grid: CellGrid, psi: (x: number, y: number) => number): FaceFlow {
  const { nx, ny, dxM, isWater } = grid;
  const flow = emptyFlow(grid);
  const corner = (i: number, j: number): number => psi((i - 1) * dxM, (j - 1) * dxM);
  for (let j = 1; j < ny - 1; j++) for (let i = 1; i < nx; i++) if (isWater[j * nx + i] !== LAND && isWater[j * nx + i - 1] !== LAND) flow.x[j * (nx + 1) + i] = corner(i, j + 1) - corner(i, j);
  for (let j = 1; j < ny; j++) for (let i = 1; i < nx - 1; i++) if (isWater[j * nx + i] !== LAND && isWater[(j - 1) * nx + i] !== LAND) flow.y[j * nx + i] = corner(i, j) - corner(i + 1, j);
  return flow;
}

export type Stepping = { c: Float64Array; volume: Float64Array; left: number };

/** Carries and spreads a field over a span in equal steps within the Courant number, as a run does. */
export function stepTo(water: BoundedWater, c: Float64Array, flow: FaceFlow | null, mixing: Mixing | null, spanS: number, options: { courant?: number; leastSteps?: number } = {}): Stepping {
  const { grid } = water;
  const moving = flow ?? emptyFlow(grid);
  let volume: Float64Array = water.thicknessM.map((thickness) => thickness * grid.dxM ** 2);
  let next: Float64Array = Float64Array.from(volume);
  const transport = new Transport(grid, water.openFaces);
  const spreading = mixing && new Spreading(water, mixing);
  if (spreading) spreading.turn(moving);
  const steps = 2 * Math.ceil(Math.max(1, options.leastSteps ?? 1, (fastestLoss(grid, moving, volume).perS * spanS) / (options.courant ?? 0.45)) / 2);
  const dtS = spanS / steps;
  let left = 0;
  for (let n = 0; n < steps; n++) {
    const backwards = n % 2 === 1;
    volumesAfter(grid, moving, volume, dtS, next);
    if (backwards) spreading?.apply(c, volume, dtS, 1, true);
    left += transport.step(c, moving, volume, next, dtS);
    if (!backwards) spreading?.apply(c, next, dtS, 1, false);
    [volume, next] = [next, volume];
  }
  return { c, volume, left };
}

export const mixing = (alongM2s: number, acrossM2s = alongM2s, axisTowardDeg = 90): Mixing => ({ kind: 'constant', alongM2s, acrossM2s, turnsWithCurrent: false, axisTowardDeg });

export function inputOf(doc: EstimateDocument, over: Partial<RunInput> = {}): RunInput {
  const releases = resolveReleases(doc);
  return { doc, releases, weights: weightsOf(releases), loss: lossClock(doc.substance.loss, doc.startAt), lossParts: [], isPreview: false, tolerance: 1e-6, meter: new Meter(), ...over };
}

export const prepare = (doc: EstimateDocument, over: Partial<RunInput> = {}): PreparedField => boundedSolver.prepare(inputOf(doc, over));
