import type { OpenWater } from '../../../shared/schemas/estimate';
import type { FieldError } from '../../../shared/problem';
import { SolverInputError } from '../errors';
import { lengthText, sig } from '../format';
import { nearestShore, type PlaneArea } from '../open/area-mask';
import { bodiesOf, boundaryFaces, cellGridOver, distanceToFaces, LAND, nearestCell, type BoundaryFace, type CellGrid } from './cell-grid';
import { alongOutline, outlineLength, outlineStretch } from './outline';

export type PlanePoint = { readonly xM: number; readonly yM: number };
export type ToPlane = (position: readonly [number, number]) => PlanePoint;

/** A stream spread over faces of the shore; `dischargeM3s` is positive into the water. */
export type Stream = { readonly name: string; readonly dischargeM3s: number; readonly faces: readonly BoundaryFace[] };

/** Everything about a water that does not change with time, on one grid. */
export type BoundedWater = {
  readonly grid: CellGrid;
  /** Body of water of each cell, from 1; waters without a release are left out and count as land. */
  readonly body: Int32Array;
  /** By body: no open edge. Place 0 stands for land. */
  readonly isClosed: readonly boolean[];
  /** Water without a way to any release at this resolution: 1. */
  readonly isCutOff: Uint8Array;
  readonly openFaces: readonly BoundaryFace[];
  readonly streams: readonly Stream[];
  /** Thickness of the layer the substance is mixed over, at mean level, m. */
  readonly thicknessM: Float64Array;
  /** Depth to the bed at mean level, m. */
  readonly depthM: Float64Array;
  /** Distance to the nearest land, m. */
  readonly shoreM: Float64Array;
  readonly narrowestDepthM: number;
};

/** A stream or a place farther from the water than this (and than three cells) belongs elsewhere, m. */
const REACH_M = 300;
/** Streams are spread over as many faces as keep them below this, m/s: a jet is not modelled. */
const STREAM_SPEED_MPS = 0.15;
const MOST_STREAM_FACES = 24;
/** Least depth at mean level in tide ranges: low water must leave something. */
const LEAST_DEPTH_RANGES = 0.75;
const LEAST_DEPTH_M = 0.05;

export function boundedWater(water: OpenWater, area: PlaneArea, toXy: ToPlane, releases: readonly PlanePoint[], cellsAlong: number): BoundedWater {
  const whole = cellGridOver(area, cellsAlong);
  const { grid, body, count, isCutOff } = keepReached(whole, releases);
  const faces = boundaryFaces(grid);
  const openFaces = openFacesOf(water, area, toXy, faces, grid.dxM);
  const open = new Set(openFaces);
  const land = faces.filter((face) => !open.has(face));
  const isClosed = Array.from({ length: count + 1 }, (_, n) => n > 0 && !openFaces.some((face) => body[face.cell] === n));
  const least = Math.max(LEAST_DEPTH_M, LEAST_DEPTH_RANGES * (water.openEdge?.tideRangeM ?? 0));
  const depthM = depths(water, grid, toXy).map((depth, cell) => (grid.isWater[cell] === LAND ? 0 : Math.max(least, depth)));
  const thicknessM = depthM.map((depth) => Math.min(depth, water.mixingDepthM));
  const narrowestDepthM = depthM.reduce((most, depth, cell) => (grid.isWater[cell] === LAND ? most : Math.min(most, depth)), Infinity);
  return { grid, body, isClosed, isCutOff, openFaces, streams: streamsOf(water, area, toXy, land, grid, thicknessM), thicknessM, depthM, shoreM: distanceToFaces(grid, land), narrowestDepthM };
}

/** Bodies of water that hold a release; the rest is marked and becomes land. */
function keepReached(whole: CellGrid, releases: readonly PlanePoint[]): { grid: CellGrid; body: Int32Array; count: number; isCutOff: Uint8Array } {
  const all = bodiesOf(whole);
  const kept = new Set(releases.map(({ xM, yM }) => all.body[nearestCell(whole, xM, yM)?.cell ?? 0]!));
  if (all.count === 0) throw new SolverInputError([{ path: 'water.area.0', message: `The outline is narrower than one cell of ${lengthText(whole.dxM)}: draw the water wider, or solve it in closed form` }]);
  const isWater = Uint8Array.from(whole.isWater, (wet, cell) => (wet === LAND || !kept.has(all.body[cell]!) ? LAND : 1));
  const isCutOff = Uint8Array.from(whole.isWater, (wet, cell) => (wet !== LAND && isWater[cell] === LAND ? 1 : 0));
  const grid = { ...whole, isWater };
  return { grid, ...bodiesOf(grid), isCutOff };
}

function openFacesOf(water: OpenWater, area: PlaneArea, toXy: ToPlane, faces: readonly BoundaryFace[], dxM: number): BoundaryFace[] {
  const edge = water.openEdge;
  if (!edge) return [];
  const ends = [edge.from, edge.to].map((position) => {
    const at = toXy(position);
    return alongOutline(area, at.xM, at.yM);
  });
  const far: FieldError[] = ends.flatMap((end, n) =>
    end.distanceM > Math.max(REACH_M, 3 * dxM) ? [{ path: `water.openEdge.${n === 0 ? 'from' : 'to'}`, message: `This end of the open edge lies ${lengthText(end.distanceM)} from the outline of ${water.name}: put it on the outline` }] : [],
  );
  if (far.length > 0) throw new SolverInputError(far);
  const isOpen = outlineStretch(ends[0]!.alongM, ends[1]!.alongM, outlineLength(area), edge.way ?? 'shorter');
  const out = faces.filter((face) => {
    const at = alongOutline(area, face.xM, face.yM);
    // Faces of an island are never the outline's.
    return isOpen(at.alongM) && nearestShore(area, face.xM, face.yM).distanceM >= at.distanceM - 1e-6;
  });
  if (out.length === 0)
    throw new SolverInputError([{ path: 'water.openEdge.to', message: `The open edge is narrower than one cell of ${lengthText(dxM)}, so that nothing could pass: set its ends farther apart` }]);
  return out;
}

function streamsOf(water: OpenWater, area: PlaneArea, toXy: ToPlane, land: readonly BoundaryFace[], { dxM }: CellGrid, thicknessM: Float64Array): Stream[] {
  return (water.throughflows ?? []).map(({ name, position, dischargeM3s }, index) => {
    const at = toXy(position);
    const off = nearestShore(area, at.xM, at.yM).distanceM;
    const ranked = land.map((face) => ({ face, distanceM: Math.hypot(face.xM - at.xM, face.yM - at.yM) })).sort((a, b) => a.distanceM - b.distanceM || a.face.axis - b.face.axis || a.face.face - b.face.face);
    const nearest = ranked[0];
    if (!nearest || Math.min(off, nearest.distanceM) > Math.max(REACH_M, 3 * dxM))
      throw new SolverInputError([{ path: `water.throughflows.${index}.position`, message: `${name} at ${position[0]}, ${position[1]} lies ${lengthText(off)} from the shore of ${water.name}: put it where the stream meets the shore` }]);
    const wanted = Math.ceil(Math.abs(dischargeM3s) / (STREAM_SPEED_MPS * thicknessM[nearest.face.cell]! * dxM));
    const last = ranked[Math.min(ranked.length, MOST_STREAM_FACES, Math.max(1, wanted)) - 1]!;
    // All faces equally far are taken, so that a mirrored water has the mirrored stream.
    return { name, dischargeM3s, faces: ranked.filter((item) => item.distanceM <= last.distanceM + 1e-6 * dxM).map((item) => item.face) };
  });
}

/** Depth of each cell: uniform, or between soundings by inverse squared distance (Shepard 1968, Proc. 23rd ACM Conf., 517). */
function depths(water: OpenWater, grid: CellGrid, toXy: ToPlane): Float64Array {
  const out = new Float64Array(grid.isWater.length).fill(water.depthM);
  const points = (water.depthPoints ?? []).map(({ position, depthM }) => ({ ...toXy(position), depthM }));
  if (points.length === 0) return out;
  const near = (grid.dxM / 2) ** 2;
  for (let cell = 0; cell < out.length; cell++) {
    if (grid.isWater[cell] === LAND) continue;
    const x = grid.x0M + (cell % grid.nx) * grid.dxM;
    const y = grid.y0M + Math.floor(cell / grid.nx) * grid.dxM;
    let sum = 0;
    let weights = 0;
    for (const point of points) {
      const weight = 1 / ((point.xM - x) ** 2 + (point.yM - y) ** 2 + near);
      sum += weight * point.depthM;
      weights += weight;
    }
    out[cell] = sum / weights;
  }
  return out;
}

/** Net inflow of the streams of a body, m3/s. */
export const netInflow = ({ streams, body }: BoundedWater, number: number): number =>
  streams.reduce((sum, stream) => (body[stream.faces[0]!.cell] === number ? sum + stream.dischargeM3s : sum), 0);

/** Volume of a body's mixed layer at mean level, m3. */
export const layerVolume = ({ grid, body, thicknessM }: BoundedWater, number: number): number =>
  thicknessM.reduce((sum, thickness, cell) => (body[cell] === number ? sum + thickness * grid.dxM ** 2 : sum), 0);

/** Closed water may gain or lose no more than this share of itself over an estimate. */
const MOST_GAIN = 0.2;

/** Refuses streams whose difference would fill or empty closed water. */
export function assertBalanced(made: BoundedWater, water: OpenWater, spanS: number): void {
  for (let number = 1; number < made.isClosed.length; number++) {
    if (!made.isClosed[number]) continue;
    const net = netInflow(made, number);
    const share = (net * spanS) / layerVolume(made, number);
    if (Math.abs(share) > MOST_GAIN)
      throw new SolverInputError([
        {
          path: 'water.throughflows',
          message: `What flows in less what flows out is ${sig(net)} m³/s; over the estimate that is ${sig(100 * share, 2)} % of the mixed water of ${water.name}: add the missing ${net > 0 ? 'outflow (a negative discharge)' : 'inflow'}, or an open edge`,
        },
      ]);
  }
}
