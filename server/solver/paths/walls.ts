import type { PlaneArea } from '../open/area-mask';

/** A bounce starts again this far off the wall, m. */
const OFF_WALL_M = 1e-6;
/** Corners bounce a few times; a path that is still outside after this many stays where it was. */
const MOST_BOUNCES = 16;
const CELLS = 96;

/**
 * The shores of a water with its islands, as walls that a path cannot pass. Edges are kept by cell of a square grid;
 * every cell knows a distance within which there is no shore, so that most steps cost one look-up.
 */
export class Walls {
  private readonly edges: Float64Array;
  private readonly cellEdges: Int32Array[];
  private readonly rowEdges: Int32Array[];
  private readonly freeM: Float64Array;
  private readonly x0: number;
  private readonly y0: number;
  private readonly cellM: number;
  private readonly nx: number;
  private readonly ny: number;
  private hitEdge = -1;

  constructor(area: PlaneArea) {
    const flat: number[] = [];
    for (const ring of area.rings) for (let i = 0; i + 3 < ring.length; i += 2) if (ring[i] !== ring[i + 2] || ring[i + 1] !== ring[i + 3]) flat.push(ring[i]!, ring[i + 1]!, ring[i + 2]!, ring[i + 3]!);
    this.edges = Float64Array.from(flat);
    const pad = 1e-3 * Math.max(area.x1 - area.x0, area.y1 - area.y0);
    this.x0 = area.x0 - pad;
    this.y0 = area.y0 - pad;
    this.cellM = (Math.max(area.x1 - area.x0, area.y1 - area.y0) + 2 * pad) / CELLS;
    this.nx = Math.max(1, Math.ceil((area.x1 + pad - this.x0) / this.cellM));
    this.ny = Math.max(1, Math.ceil((area.y1 + pad - this.y0) / this.cellM));
    const cells: number[][] = Array.from({ length: this.nx * this.ny }, () => []);
    const rows: number[][] = Array.from({ length: this.ny }, () => []);
    for (let e = 0; e < this.edges.length / 4; e++) {
      const [ax, ay, bx, by] = [this.edges[4 * e]!, this.edges[4 * e + 1]!, this.edges[4 * e + 2]!, this.edges[4 * e + 3]!];
      const j1 = cellIndex(Math.max(ay, by) - this.y0, this.cellM, this.ny);
      const i1 = cellIndex(Math.max(ax, bx) - this.x0, this.cellM, this.nx);
      for (let j = cellIndex(Math.min(ay, by) - this.y0, this.cellM, this.ny); j <= j1; j++) {
        rows[j]!.push(e);
        for (let i = cellIndex(Math.min(ax, bx) - this.x0, this.cellM, this.nx); i <= i1; i++) if (this.meetsCell(e, i, j)) cells[j * this.nx + i]!.push(e);
      }
    }
    this.cellEdges = cells.map((list) => Int32Array.from(list));
    this.rowEdges = rows.map((list) => Int32Array.from(list));
    this.freeM = this.clearances();
  }

  /** No shore lies nearer than this, m; a lower bound. */
  clearanceM(x: number, y: number): number {
    const i = Math.floor((x - this.x0) / this.cellM);
    const j = Math.floor((y - this.y0) / this.cellM);
    return i < 0 || j < 0 || i >= this.nx || j >= this.ny ? 0 : this.freeM[j * this.nx + i]!;
  }

  /** Even-odd test against the edges of one row of cells. */
  isWater(x: number, y: number): boolean {
    const j = Math.floor((y - this.y0) / this.cellM);
    if (j < 0 || j >= this.ny) return false;
    let inside = false;
    for (const e of this.rowEdges[j]!) {
      const [ax, ay, bx, by] = [this.edges[4 * e]!, this.edges[4 * e + 1]!, this.edges[4 * e + 2]!, this.edges[4 * e + 3]!];
      if (ay > y !== by > y && x < ((bx - ax) * (y - ay)) / (by - ay) + ax) inside = !inside;
    }
    return inside;
  }

  /** Share of the way from (x, y) by (dx, dy) at which a shore is first met; above 1 where none is. */
  firstHit(x: number, y: number, dx: number, dy: number): number {
    let best = 2;
    this.hitEdge = -1;
    const free = this.clearanceM(x, y);
    if (dx * dx + dy * dy < free * free) return best;
    const { cellM, nx, ny } = this;
    const i0 = cellIndex(Math.min(x, x + dx) - OFF_WALL_M - this.x0, cellM, nx);
    const i1 = cellIndex(Math.max(x, x + dx) + OFF_WALL_M - this.x0, cellM, nx);
    const j0 = cellIndex(Math.min(y, y + dy) - OFF_WALL_M - this.y0, cellM, ny);
    const j1 = cellIndex(Math.max(y, y + dy) + OFF_WALL_M - this.y0, cellM, ny);
    for (let j = j0; j <= j1; j++)
      for (let i = i0; i <= i1; i++) {
        const list = this.cellEdges[j * nx + i]!;
        for (let n = 0; n < list.length; n++) {
          const e = list[n]!;
          const ax = this.edges[4 * e]!;
          const ay = this.edges[4 * e + 1]!;
          const ex = this.edges[4 * e + 2]! - ax;
          const ey = this.edges[4 * e + 3]! - ay;
          const cross = dx * ey - dy * ex;
          if (cross === 0) continue;
          const t = ((ax - x) * ey - (ay - y) * ex) / cross;
          const u = ((ax - x) * dy - (ay - y) * dx) / cross;
          // Edges are taken a hair longer, so that no path slips through a corner.
          if (t > 0 && t <= 1 && u >= -1e-9 && u <= 1 + 1e-9 && t < best) {
            best = t;
            this.hitEdge = e;
          }
        }
      }
    return best;
  }

  /** Moves `at` (x, y) by (dx, dy), mirrored at every shore on the way; it never ends on land. */
  reflect(at: Float64Array, dx: number, dy: number): void {
    const [startX, startY] = [at[0]!, at[1]!];
    let [x, y, restX, restY] = [startX, startY, dx, dy];
    let hasBounced = false;
    for (let bounce = 0; bounce < MOST_BOUNCES; bounce++) {
      const t = this.firstHit(x, y, restX, restY);
      if (t > 1) {
        [x, y] = [x + restX, y + restY];
        if (!hasBounced || this.isWater(x, y)) {
          at[0] = x;
          at[1] = y;
        }
        return;
      }
      hasBounced = true;
      const e = 4 * this.hitEdge;
      const [ex, ey] = [this.edges[e + 2]! - this.edges[e]!, this.edges[e + 3]! - this.edges[e + 1]!];
      const length = Math.hypot(ex, ey);
      // Unit normal on the side the path comes from.
      const side = Math.sign(restX * ey - restY * ex);
      const [nx, ny] = [(-side * ey) / length, (side * ex) / length];
      x += t * restX + OFF_WALL_M * nx;
      y += t * restY + OFF_WALL_M * ny;
      const into = (1 - t) * (restX * nx + restY * ny);
      restX = (1 - t) * restX - 2 * into * nx;
      restY = (1 - t) * restY - 2 * into * ny;
    }
  }

  /** Whether an edge comes within half a cell of a cell, by the distance of the cell's middle from the edge's line. */
  private meetsCell(e: number, i: number, j: number): boolean {
    const [ax, ay] = [this.edges[4 * e]!, this.edges[4 * e + 1]!];
    const [ex, ey] = [this.edges[4 * e + 2]! - ax, this.edges[4 * e + 3]! - ay];
    const [cx, cy] = [this.x0 + (i + 0.5) * this.cellM - ax, this.y0 + (j + 0.5) * this.cellM - ay];
    return Math.abs(cx * ey - cy * ex) <= 0.75 * this.cellM * Math.hypot(ex, ey);
  }

  /** Largest-coordinate distance to the nearest cell with a shore, by two sweeps; one cell less is free of shores all round. */
  private clearances(): Float64Array {
    const { nx, ny } = this;
    const d = new Float64Array(nx * ny).fill(nx + ny);
    const lower = (at: number, i: number, j: number): void => {
      if (i >= 0 && j >= 0 && i < nx && j < ny) d[at] = Math.min(d[at]!, d[j * nx + i]! + 1);
    };
    for (let at = 0; at < d.length; at++) if (this.cellEdges[at]!.length > 0) d[at] = 0;
    for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) for (const [di, dj] of [[-1, 0], [-1, -1], [0, -1], [1, -1]] as const) lower(j * nx + i, i + di, j + dj);
    for (let j = ny - 1; j >= 0; j--) for (let i = nx - 1; i >= 0; i--) for (const [di, dj] of [[1, 0], [1, 1], [0, 1], [-1, 1]] as const) lower(j * nx + i, i + di, j + dj);
    return d.map((cells) => Math.max(0, cells - 1) * this.cellM);
  }
}

const cellIndex = (offM: number, cellM: number, n: number): number => Math.min(n - 1, Math.max(0, Math.floor(offM / cellM)));
