import { contourRings, contourRoom, fillRoom, runsAlongBorder, type ContourRoom, type Rings } from './contours';
import type { ChannelGridPart, FrameGrid, PlaneGrid } from './frames';
import { fromPlane } from './geo';
import { nestRings, ringList } from './nest-rings';
import { RiverCourse } from './river-course';
import type { LonLat } from './schemas/basics';
import type { EstimateWater, Reach } from './schemas/estimate';
import { shoreDistance } from './shore-distance';
import { roundLonLat, simplifyLine, simplifyRing } from './simplify';

/** Where a gridded field lies at or above a level. */
export type Outline = {
  /** Polygons of closed rings, outer ring first and anticlockwise, holes clockwise; clipped to the water. */
  polygons: LonLat[][][];
  /** Open water: the edge without the stretches along shore and grid border. */
  lines: LonLat[][];
  /** Rivers: chainages at which, going downstream, the field falls below the level. */
  fronts: { reachId: string; chainageKm: number }[];
};

/** Logarithms are cut this far below the level: between nodes the edge then lies where a steep cloud has it. */
const LOWEST_LOG = -8;
/** Share of a cell, or of a river's width, that simplifying may move an edge. */
const CELL_SHARE = 0.08;
const WIDTH_SHARE = 0.06;

/**
 * Outlines of fields over one water. Between nodes the logarithm of the value is linear; a shore is met by taking the
 * lesser of value and distance to the shore, so that no outline reaches over land by more than a small part of a cell.
 */
export class Outliner {
  private readonly rooms = new Map<string, ContourRoom>();
  private readonly courses = new Map<string, { course: RiverCourse; widthM: number }>();
  private shore: { key: string; distanceM: Float64Array } | null = null;

  /** @param widthOf width of a reach at the flow of the estimate, m */
  constructor(
    private readonly water: EstimateWater,
    widthOf: (reach: Reach) => number = () => 1,
  ) {
    if (water.kind === 'river') for (const reach of water.reaches) this.courses.set(reach.id, { course: new RiverCourse(reach), widthM: widthOf(reach) });
  }

  /** @param values one for each node, NaN where there is no estimate */
  above(grid: FrameGrid, values: ArrayLike<number>, level: number): Outline {
    return grid.kind === 'plane' ? this.plane(grid, values, level) : this.channel(grid.parts, values, level);
  }

  private rings(nx: number, ny: number, values: ArrayLike<number>): Rings {
    const key = `${nx}x${ny}`;
    let room = this.rooms.get(key);
    if (!room) {
      if (this.rooms.size > 40) this.rooms.clear();
      room = contourRoom(nx, ny);
      this.rooms.set(key, room);
    }
    fillRoom(room, values);
    return contourRings(room, 0);
  }

  private plane(grid: PlaneGrid, values: ArrayLike<number>, level: number): Outline {
    const { nx, ny } = grid;
    const shore = this.shoreOf(grid);
    const field = bridged(logField(values, level), nx, ny, (node) => shore[node]! < 0 || Number.isNaN(values[node]!));
    const cell = Math.min(grid.dxM, grid.dyM);
    const wet = Float64Array.from(field, (value, node) => Math.min(value, (2 * shore[node]!) / cell));
    const toXy = (flat: readonly number[]): number[] => flat.map((value, k) => (k % 2 === 0 ? grid.x0M + value * grid.dxM : grid.y0M + value * grid.dyM));
    const toLonLat = (flat: readonly number[]): LonLat[] => positions(flat, (x, y) => fromPlane(grid, x, y));
    return {
      polygons: polygonsOf(ringList(this.rings(nx, ny, wet)).map((ring) => simplifyRing(toXy(ring), CELL_SHARE * cell)), toLonLat),
      lines: edgeLines(nx, ny, this.rings(nx, ny, field), shore).map((line) => toLonLat(simplifyLine(toXy(line), CELL_SHARE * cell))),
      fronts: [],
    };
  }

  private shoreOf(grid: PlaneGrid): Float64Array {
    const key = JSON.stringify(grid);
    if (this.shore?.key !== key) this.shore = { key, distanceM: this.water.kind === 'open' ? shoreDistance(grid, this.water.area, 3 * Math.max(grid.dxM, grid.dyM)) : new Float64Array(grid.nx * grid.ny).fill(Infinity) };
    return this.shore.distanceM;
  }

  private channel(parts: readonly ChannelGridPart[], values: ArrayLike<number>, level: number): Outline {
    let from = 0;
    const fields = parts.map(({ chainageKm, nAcross }) => {
      const first = from;
      from += chainageKm.length * nAcross;
      return logField(Array.from({ length: from - first }, (_, i) => values[first + i]!), level);
    });
    const polygons = parts.flatMap((part, i) => {
      const place = this.courses.get(part.reachId);
      return place && part.chainageKm.length > 1 ? this.channelPolygons(part, fields[i]!, place) : [];
    });
    return { polygons, lines: [], fronts: frontsOf(parts, fields, this.water) };
  }

  private channelPolygons({ chainageKm, nAcross }: ChannelGridPart, own: Float64Array, { course, widthM }: { course: RiverCourse; widthM: number }): LonLat[][][] {
    const ny = chainageKm.length;
    const nx = Math.max(2, nAcross);
    const wide = nAcross === 1 ? Float64Array.from({ length: 2 * ny }, (_, k) => own[k >> 1]!) : own;
    const field = bridged(wide, nx, ny, (node) => Number.isNaN(wide[node]!));
    const at = (x: number, y: number): [number, number] => {
      const row = Math.min(ny - 2, Math.floor(y));
      return course.at(chainageKm[row]! + (y - row) * (chainageKm[row + 1]! - chainageKm[row]!), (0.5 - x / (nx - 1)) * widthM);
    };
    const rings = ringList(this.rings(nx, ny, field)).map((ring) => simplifyRing(alongBends(ring, at, Math.max(20, widthM / 2)), Math.max(1, WIDTH_SHARE * widthM)));
    return polygonsOf(rings, (flat) => positions(flat, (x, y) => course.toLonLat(x, y)));
  }
}

const logField = (values: ArrayLike<number>, level: number): Float64Array =>
  Float64Array.from(values, (value) => (Number.isNaN(value) ? Number.NaN : value > 0 ? Math.max(LOWEST_LOG, Math.log(value / level)) : LOWEST_LOG));

/** Nodes that are bare (land, no estimate) take the mean of their neighbours that are not, so that edges run straight up to the shore. */
function bridged(field: Float64Array, nx: number, ny: number, isBare: (node: number) => boolean): Float64Array {
  const out = field.slice();
  for (let node = 0; node < field.length; node++) {
    if (!isBare(node)) continue;
    const [i, j] = [node % nx, Math.floor(node / nx)];
    let [sum, count] = [0, 0];
    for (let y = Math.max(0, j - 1); y <= Math.min(ny - 1, j + 1); y++)
      for (let x = Math.max(0, i - 1); x <= Math.min(nx - 1, i + 1); x++) {
        if (isBare(y * nx + x)) continue;
        sum += field[y * nx + x]!;
        count++;
      }
    out[node] = count === 0 ? LOWEST_LOG : sum / count;
  }
  return out;
}

const positions = (flat: readonly number[], place: (x: number, y: number) => LonLat): LonLat[] =>
  Array.from({ length: flat.length / 2 }, (_, k) => roundLonLat(place(flat[2 * k]!, flat[2 * k + 1]!)));

function polygonsOf(rings: readonly number[][], toLonLat: (flat: readonly number[]) => LonLat[]): LonLat[][][] {
  return nestRings(rings.filter((ring) => ring.length >= 6)).map((polygon) => polygon.map((ring) => {
    const closed = toLonLat(ring);
    closed.push(closed[0]!);
    return closed;
  }));
}

/** The edges of rings in grid units, without what runs along the grid's border and what lies on land. */
function edgeLines(nx: number, ny: number, rings: Rings, shore: Float64Array): number[][] {
  const depth = (x: number, y: number): number => bilinear(shore, nx, ny, x, y);
  const lines: number[][] = [];
  for (const ring of ringList(rings)) {
    const n = ring.length / 2;
    let line: number[] = [];
    const end = (): void => {
      if (line.length >= 4) lines.push(line);
      line = [];
    };
    for (let k = 0; k < n; k++) {
      const [ax, ay, bx, by] = [ring[2 * k]!, ring[2 * k + 1]!, ring[2 * ((k + 1) % n)]!, ring[2 * ((k + 1) % n) + 1]!];
      const [da, db] = [depth(ax, ay), depth(bx, by)];
      if (runsAlongBorder(nx, ny, ax, ay, bx, by) || (da < 0 && db < 0)) {
        end();
        continue;
      }
      const cut = da / (da - db);
      const [cx, cy] = [ax + (bx - ax) * cut, ay + (by - ay) * cut];
      if (line.length === 0) line.push(...(da < 0 ? [cx, cy] : [ax, ay]));
      if (db < 0) {
        line.push(cx, cy);
        end();
      } else line.push(bx, by);
    }
    end();
  }
  return lines;
}

function bilinear(values: Float64Array, nx: number, ny: number, x: number, y: number): number {
  const i = Math.min(nx - 2, Math.floor(x));
  const j = Math.min(ny - 2, Math.floor(y));
  const [u, v] = [x - i, y - j];
  const at = j * nx + i;
  return (1 - v) * ((1 - u) * values[at]! + u * values[at + 1]!) + v * ((1 - u) * values[at + nx]! + u * values[at + nx + 1]!);
}

/** Vertices of a ring in grid units on the plane, with pieces no longer than `pieceM` so that it follows the bends. */
function alongBends(ring: readonly number[], at: (x: number, y: number) => [number, number], pieceM: number): number[] {
  const out: number[] = [];
  const n = ring.length / 2;
  for (let k = 0; k < n; k++) {
    const [ax, ay, bx, by] = [ring[2 * k]!, ring[2 * k + 1]!, ring[2 * ((k + 1) % n)]!, ring[2 * ((k + 1) % n) + 1]!];
    const [from, to] = [at(ax, ay), at(bx, by)];
    const pieces = Math.min(400, Math.max(1, Math.ceil(Math.hypot(to[0] - from[0], to[1] - from[1]) / pieceM)));
    for (let p = 0; p < pieces; p++) out.push(...at(ax + ((bx - ax) * p) / pieces, ay + ((by - ay) * p) / pieces));
  }
  return out;
}

/** Chainages at which the largest value across falls below the level going downstream, between rows in proportion. */
function frontsOf(parts: readonly ChannelGridPart[], fields: readonly Float64Array[], water: EstimateWater): Outline['fronts'] {
  const mosts = parts.map((part, i) => mostAcross(part, fields[i]!));
  return parts.flatMap(({ reachId, chainageKm }, i) => {
    const most = mosts[i]!;
    const out: Outline['fronts'] = [];
    for (let row = 1; row < most.length; row++) {
      const [above, below] = [most[row - 1]!, most[row]!];
      if (above < 0 || below >= 0) continue;
      const share = above / (above - below);
      out.push({ reachId, chainageKm: roundKm(chainageKm[row - 1]! + share * (chainageKm[row]! - chainageKm[row - 1]!)) });
    }
    // At the end of a reach the front is where the water of the next one thins it below the level; at a river's mouth there is none.
    const next = water.kind === 'river' ? water.reaches.find((reach) => reach.id === reachId)?.downstreamReachId : null;
    const last = most.length - 1;
    const isLastOfReach = parts[i + 1]?.reachId !== reachId;
    const below = mosts[parts.findIndex((part) => part.reachId === next)]?.[0] ?? LOWEST_LOG;
    if (next && isLastOfReach && most[last]! >= 0 && below < 0) out.push({ reachId, chainageKm: roundKm(chainageKm[last]!) });
    return out;
  });
}

const roundKm = (km: number): number => Number(km.toFixed(3));

const mostAcross = ({ chainageKm, nAcross }: ChannelGridPart, field: Float64Array): number[] =>
  chainageKm.map((_, row) => {
    let best = LOWEST_LOG;
    for (let i = 0; i < nAcross; i++) if (field[row * nAcross + i]! > best) best = field[row * nAcross + i]!;
    return best;
  });
