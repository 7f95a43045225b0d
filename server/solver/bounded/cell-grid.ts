import { clearLand, type PlaneArea } from '../open/area-mask';

/**
 * Square cells over a water, one cell of land all round: cell (i, j) is number j*nx + i, its centre at
 * x0M + i*dxM, y0M + j*dxM. A cell is water where its centre is. Face arrays: x (nx+1)*ny, face i left of cell i;
 * y nx*(ny+1), face j below cell j; positive to the east and north.
 */
export type CellGrid = {
  readonly nx: number;
  readonly ny: number;
  readonly dxM: number;
  readonly x0M: number;
  readonly y0M: number;
  readonly isWater: Uint8Array;
};

/** A face between water and what is not, with the cell of water beside it; `sign` is +1 where the water's outside lies to the east or north. */
export type BoundaryFace = { readonly axis: 0 | 1; readonly face: number; readonly cell: number; readonly sign: 1 | -1; readonly xM: number; readonly yM: number };

export const LAND = 0;
/** Fewest cells along the longer side that still show a shore. */
export const FEWEST_CELLS = 16;

export function cellGridOver(area: PlaneArea, cellsAlong: number): CellGrid {
  const dxM = Math.max(area.x1 - area.x0, area.y1 - area.y0) / cellsAlong;
  const across = Math.max(1, Math.ceil((area.x1 - area.x0) / dxM - 1e-9));
  const up = Math.max(1, Math.ceil((area.y1 - area.y0) / dxM - 1e-9));
  const nx = across + 2;
  const ny = up + 2;
  // Centred over the water, so that a mirrored water gives a mirrored grid.
  const x0M = (area.x0 + area.x1) / 2 - ((nx - 1) * dxM) / 2;
  const y0M = (area.y0 + area.y1) / 2 - ((ny - 1) * dxM) / 2;
  const marks = new Float64Array(nx * ny).fill(1);
  clearLand(marks, { kind: 'plane', originLon: 0, originLat: 0, x0M, y0M, dxM, dyM: dxM, nx, ny }, area);
  const isWater = Uint8Array.from(marks);
  for (let i = 0; i < nx; i++) isWater[i] = isWater[(ny - 1) * nx + i] = LAND;
  for (let j = 0; j < ny; j++) isWater[j * nx] = isWater[j * nx + nx - 1] = LAND;
  return { nx, ny, dxM, x0M, y0M, isWater };
}

/** Cells joined through faces: a number from 1 for each body of water, 0 on land. */
export function bodiesOf({ nx, ny, isWater }: CellGrid): { body: Int32Array; count: number } {
  const body = new Int32Array(nx * ny);
  const stack: number[] = [];
  let count = 0;
  for (let start = 0; start < body.length; start++) {
    if (isWater[start] === LAND || body[start] !== 0) continue;
    body[start] = ++count;
    stack.push(start);
    for (let k = stack.pop(); k !== undefined; k = stack.pop()) {
      for (const next of [k - 1, k + 1, k - nx, k + nx]) {
        if (isWater[next] === LAND || body[next] !== 0) continue;
        body[next] = count;
        stack.push(next);
      }
    }
  }
  return { body, count };
}

/** Number of the water cell nearest to a place, with its distance from the cell's edge (0 inside); null without any water. */
export function nearestCell(grid: CellGrid, xM: number, yM: number, isMeant: (cell: number) => boolean = () => true): { cell: number; distanceM: number } | null {
  let cell = -1;
  let least = Infinity;
  for (let j = 0; j < grid.ny; j++) {
    const offY = Math.max(0, Math.abs(yM - grid.y0M - j * grid.dxM) - grid.dxM / 2);
    if (offY * offY >= least) continue;
    for (let i = 0; i < grid.nx; i++) {
      const k = j * grid.nx + i;
      if (grid.isWater[k] === LAND || !isMeant(k)) continue;
      const offX = Math.max(0, Math.abs(xM - grid.x0M - i * grid.dxM) - grid.dxM / 2);
      const square = offX * offX + offY * offY;
      if (square >= least) continue;
      least = square;
      cell = k;
    }
  }
  return cell < 0 ? null : { cell, distanceM: Math.sqrt(least) };
}

/** All faces between water and land (or the outside). */
export function boundaryFaces(grid: CellGrid): BoundaryFace[] {
  const { nx, ny, dxM, isWater } = grid;
  const out: BoundaryFace[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const cell = j * nx + i;
      if (isWater[cell] === LAND) continue;
      const xM = grid.x0M + i * dxM;
      const yM = grid.y0M + j * dxM;
      if (isWater[cell - 1] === LAND) out.push({ axis: 0, face: j * (nx + 1) + i, cell, sign: -1, xM: xM - dxM / 2, yM });
      if (isWater[cell + 1] === LAND) out.push({ axis: 0, face: j * (nx + 1) + i + 1, cell, sign: 1, xM: xM + dxM / 2, yM });
      if (isWater[cell - nx] === LAND) out.push({ axis: 1, face: j * nx + i, cell, sign: -1, xM, yM: yM - dxM / 2 });
      if (isWater[cell + nx] === LAND) out.push({ axis: 1, face: (j + 1) * nx + i, cell, sign: 1, xM, yM: yM + dxM / 2 });
    }
  }
  return out;
}

/** Distance from the centre of each cell of water to the nearest of the given faces, m; Infinity without faces, 0 on land. */
export function distanceToFaces(grid: CellGrid, faces: readonly BoundaryFace[]): Float64Array {
  const xs = Float64Array.from(faces, (face) => face.xM);
  const ys = Float64Array.from(faces, (face) => face.yM);
  const out = new Float64Array(grid.isWater.length);
  for (let k = 0; k < out.length; k++) {
    if (grid.isWater[k] === LAND) continue;
    const x = grid.x0M + (k % grid.nx) * grid.dxM;
    const y = grid.y0M + Math.floor(k / grid.nx) * grid.dxM;
    let least = Infinity;
    for (let n = 0; n < xs.length; n++) least = Math.min(least, (xs[n]! - x) ** 2 + (ys[n]! - y) ** 2);
    out[k] = Math.sqrt(least);
  }
  return out;
}

/** Share of water among the neighbours of a place, as weights of the four cells whose centres surround it; they sum to one. Empty far from water. */
export function bilinearWeights(grid: CellGrid, xM: number, yM: number, isMeant: (cell: number) => boolean = () => true): { cell: number; weight: number }[] {
  const u = (xM - grid.x0M) / grid.dxM;
  const v = (yM - grid.y0M) / grid.dxM;
  const i = Math.min(grid.nx - 2, Math.max(0, Math.floor(u)));
  const j = Math.min(grid.ny - 2, Math.max(0, Math.floor(v)));
  const a = Math.min(1, Math.max(0, u - i));
  const b = Math.min(1, Math.max(0, v - j));
  const k = j * grid.nx + i;
  const four = [
    { cell: k, weight: (1 - a) * (1 - b) },
    { cell: k + 1, weight: a * (1 - b) },
    { cell: k + grid.nx, weight: (1 - a) * b },
    { cell: k + grid.nx + 1, weight: a * b },
  ].filter(({ cell, weight }) => weight > 0 && grid.isWater[cell] !== LAND && isMeant(cell));
  const sum = four.reduce((total, { weight }) => total + weight, 0);
  return four.map(({ cell, weight }) => ({ cell, weight: weight / sum }));
}
