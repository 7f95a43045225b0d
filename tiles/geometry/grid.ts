import { contours } from 'd3-contour';
import { toLonLat, type Xy } from './curves';
import type { Point } from '../district-points';

/** Square grid over the plane: cell (i, j) has its middle at x0 + i*cellM, y0 + j*cellM; row-major, x fastest. */
export type Grid = { x0: number; y0: number; cellM: number; nx: number; ny: number };

export const cellMiddle = (grid: Grid, index: number): Xy => [grid.x0 + (index % grid.nx) * grid.cellM, grid.y0 + Math.floor(index / grid.nx) * grid.cellM];

/** Marks with 1 every cell whose middle lies inside the ring (even-odd, by scan lines). */
export function fillRing(grid: Grid, mask: Uint8Array, ring: readonly Xy[], value = 1): void {
  for (let j = 0; j < grid.ny; j++) {
    const y = grid.y0 + j * grid.cellM;
    const crossings: number[] = [];
    for (let a = 0, b = ring.length - 1; a < ring.length; b = a++) {
      const [ax, ay] = ring[a]!;
      const [bx, by] = ring[b]!;
      if (ay > y !== by > y) crossings.push(((bx - ax) * (y - ay)) / (by - ay) + ax);
    }
    crossings.sort((p, q) => p - q);
    for (let k = 0; k + 1 < crossings.length; k += 2) {
      const from = Math.max(0, Math.ceil((crossings[k]! - grid.x0) / grid.cellM));
      const to = Math.min(grid.nx - 1, Math.floor((crossings[k + 1]! - grid.x0) / grid.cellM));
      for (let i = from; i <= to; i++) mask[j * grid.nx + i] = value;
    }
  }
}

/** Marks with 1 every cell that a line passes. */
export function markLine(grid: Grid, mask: Uint8Array, line: readonly Xy[]): void {
  for (let k = 1; k < line.length; k++) {
    const [ax, ay] = line[k - 1]!;
    const [bx, by] = line[k]!;
    const steps = Math.max(1, Math.ceil((2 * Math.hypot(bx - ax, by - ay)) / grid.cellM));
    for (let s = 0; s <= steps; s++) {
      const i = Math.round((ax + ((bx - ax) * s) / steps - grid.x0) / grid.cellM);
      const j = Math.round((ay + ((by - ay) * s) / steps - grid.y0) / grid.cellM);
      if (i >= 0 && j >= 0 && i < grid.nx && j < grid.ny) mask[j * grid.nx + i] = 1;
    }
  }
}

/** Lower envelope of parabolas along one row or column (Felzenszwalb and Huttenlocher 2012, exact distance transform). */
function transformRow(f: Float64Array, n: number, out: Float64Array, v: Int32Array, z: Float64Array): void {
  let k = 0;
  v[0] = 0;
  z[0] = -Infinity;
  z[1] = Infinity;
  for (let q = 1; q < n; q++) {
    const meet = (p: number) => (f[q]! + q * q - (f[p]! + p * p)) / (2 * q - 2 * p);
    let s = meet(v[k]!);
    while (s <= z[k]!) s = meet(v[--k]!);
    v[++k] = q;
    z[k] = s;
    z[k + 1] = Infinity;
  }
  k = 0;
  for (let q = 0; q < n; q++) {
    while (z[k + 1]! < q) k++;
    out[q] = (q - v[k]!) ** 2 + f[v[k]!]!;
  }
}

/** Distance, m, from every cell to the nearest cell of the mask. */
export function distanceTo(grid: Grid, mask: Uint8Array): Float64Array {
  const { nx, ny, cellM } = grid;
  const FAR = 1e12;
  const d = Float64Array.from(mask, (m) => (m ? 0 : FAR));
  const n = Math.max(nx, ny);
  const [f, out, z, v] = [new Float64Array(n), new Float64Array(n), new Float64Array(n + 1), new Int32Array(n)];
  for (let i = 0; i < nx; i++) {
    for (let j = 0; j < ny; j++) f[j] = d[j * nx + i]!;
    transformRow(f, ny, out, v, z);
    for (let j = 0; j < ny; j++) d[j * nx + i] = out[j]!;
  }
  for (let j = 0; j < ny; j++) {
    f.set(d.subarray(j * nx, (j + 1) * nx));
    transformRow(f, nx, out, v, z);
    for (let i = 0; i < nx; i++) d[j * nx + i] = cellM * Math.sqrt(out[i]!);
  }
  return d;
}

/** Mean over a square of (2*radius+1) cells a side, `passes` times: takes the creases out of a field. */
export function blur(grid: Grid, field: Float64Array, radius: number, passes: number): Float64Array {
  const { nx, ny } = grid;
  let from = field;
  for (let pass = 0; pass < 2 * passes; pass++) {
    const [stride, length, count, next] = pass % 2 === 0 ? [1, nx, ny, nx] : [nx, ny, nx, 1];
    const to = new Float64Array(field.length);
    for (let line = 0; line < count; line++)
      for (let i = 0; i < length; i++) {
        let sum = 0;
        for (let k = -radius; k <= radius; k++) sum += from[line * next + Math.min(length - 1, Math.max(0, i + k)) * stride]!;
        to[line * next + i * stride] = sum / (2 * radius + 1);
      }
    from = to;
  }
  return from;
}

/** Areas where the field is at or above the level: polygons of rings in lon/lat. */
export function areasAbove(grid: Grid, field: ArrayLike<number>, level: number): Point[][][] {
  const found = contours().size([grid.nx, grid.ny]).thresholds([level])(Array.from(field))[0];
  const toPoint = ([i, j]: number[]): Point => toLonLat([grid.x0 + (i! - 0.5) * grid.cellM, grid.y0 + (j! - 0.5) * grid.cellM]);
  return (found?.coordinates ?? []).map((polygon) => polygon.map((ring) => ring.map(toPoint)));
}
