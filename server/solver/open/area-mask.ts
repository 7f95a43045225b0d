import type { PlaneGrid } from '../../../shared/frames';
import { toPlane } from '../../../shared/geo';
import type { LonLat } from '../../../shared/schemas/basics';

/** A water's outline on a local plane: rings as flat x, y lists; the first is the shore, the others islands. */
export type PlaneArea = { readonly rings: readonly Float64Array[]; readonly x0: number; readonly y0: number; readonly x1: number; readonly y1: number; readonly areaM2: number };

export function planeArea(area: readonly (readonly LonLat[])[], originLon: number, originLat: number): PlaneArea {
  const rings = area.map((ring) => {
    const flat = new Float64Array(2 * ring.length);
    ring.forEach((position, i) => flat.set(toPlane({ originLon, originLat }, position), 2 * i));
    return flat;
  });
  const outer = rings[0]!;
  let [x0, y0, x1, y1] = [Infinity, Infinity, -Infinity, -Infinity];
  for (let i = 0; i < outer.length; i += 2) {
    x0 = Math.min(x0, outer[i]!);
    x1 = Math.max(x1, outer[i]!);
    y0 = Math.min(y0, outer[i + 1]!);
    y1 = Math.max(y1, outer[i + 1]!);
  }
  const areaM2 = Math.abs(shoelace(outer)) - rings.slice(1).reduce((sum, ring) => sum + Math.abs(shoelace(ring)), 0);
  return { rings, x0, y0, x1, y1, areaM2 };
}

function shoelace(ring: Float64Array): number {
  let sum = 0;
  for (let i = 0; i + 3 < ring.length; i += 2) sum += ring[i]! * ring[i + 3]! - ring[i + 2]! * ring[i + 1]!;
  return sum / 2;
}

/**
 * Sets every node outside the outline to zero, by even-odd crossings of each grid row with all rings.
 * Gives the sum of what was removed, in the unit of `values`.
 */
export function clearLand(values: Float64Array, grid: PlaneGrid, area: PlaneArea): number {
  const crossings: number[][] = Array.from({ length: grid.ny }, () => []);
  for (const ring of area.rings) collectCrossings(ring, grid, crossings);
  let removed = 0;
  for (let j = 0; j < grid.ny; j++) {
    const row = crossings[j]!.sort((a, b) => a - b);
    let next = 0;
    for (let i = 0; i < grid.nx; i++) {
      const x = grid.x0M + i * grid.dxM;
      while (next < row.length && row[next]! <= x) next++;
      if (next % 2 === 1) continue;
      removed += values[j * grid.nx + i]!;
      values[j * grid.nx + i] = 0;
    }
  }
  return removed;
}

function collectCrossings(ring: Float64Array, grid: PlaneGrid, crossings: number[][]): void {
  for (let i = 0; i + 3 < ring.length; i += 2) {
    const [ax, ay, bx, by] = [ring[i]!, ring[i + 1]!, ring[i + 2]!, ring[i + 3]!];
    const low = Math.min(ay, by);
    const high = Math.max(ay, by);
    // Half-open in y: a vertex on a row counts once.
    const j0 = Math.max(0, Math.ceil((low - grid.y0M) / grid.dyM));
    const j1 = Math.min(grid.ny - 1, Math.ceil((high - grid.y0M) / grid.dyM) - 1);
    for (let j = j0; j <= j1; j++) crossings[j]!.push(ax + ((bx - ax) * (grid.y0M + j * grid.dyM - ay)) / (by - ay));
  }
}

/** Nearest point of the outline to a place on the plane, with its distance, m. */
export function nearestShore(area: PlaneArea, x: number, y: number): { x: number; y: number; distanceM: number } {
  let best = { x, y, distanceM: Infinity };
  for (const ring of area.rings) {
    for (let i = 0; i + 3 < ring.length; i += 2) {
      const dx = ring[i + 2]! - ring[i]!;
      const dy = ring[i + 3]! - ring[i + 1]!;
      const length2 = dx * dx + dy * dy;
      const z = length2 === 0 ? 0 : Math.min(1, Math.max(0, ((x - ring[i]!) * dx + (y - ring[i + 1]!) * dy) / length2));
      const px = ring[i]! + z * dx;
      const py = ring[i + 1]! + z * dy;
      const distanceM = Math.hypot(x - px, y - py);
      if (distanceM < best.distanceM) best = { x: px, y: py, distanceM };
    }
  }
  return best;
}

export const isInPlaneArea = (area: PlaneArea, x: number, y: number): boolean => {
  let inside = false;
  for (const ring of area.rings)
    for (let i = 0; i + 3 < ring.length; i += 2)
      if (ring[i + 1]! > y !== ring[i + 3]! > y && x < ((ring[i + 2]! - ring[i]!) * (y - ring[i + 1]!)) / (ring[i + 3]! - ring[i + 1]!) + ring[i]!) inside = !inside;
  return inside;
};
