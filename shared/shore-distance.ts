import { dryNodes } from './dry-nodes';
import type { PlaneGrid } from './frames';
import { toPlane } from './geo';
import type { LonLat } from './schemas/basics';

/**
 * Distance of every grid node to the nearest outline, m, positive in the water and negative on land, cut at `reachM`.
 * Exact within that reach. Cost: for each piece of outline the nodes in its box grown by the reach.
 */
export function shoreDistance(grid: PlaneGrid, area: readonly (readonly LonLat[])[], reachM: number): Float64Array {
  const out = new Float64Array(grid.nx * grid.ny).fill(reachM);
  for (const ring of area) {
    let before: readonly [number, number] | null = null;
    for (const position of ring) {
      const here = toPlane(grid, position);
      if (before) nearPiece(out, grid, before, here, reachM);
      before = here;
    }
  }
  const dry = dryNodes(grid, area);
  for (let i = 0; i < out.length; i++) if (dry[i]) out[i] = -out[i]!;
  return out;
}

/** Lowers the distance of the nodes near one straight piece of outline. */
function nearPiece(out: Float64Array, grid: PlaneGrid, [ax, ay]: readonly [number, number], [bx, by]: readonly [number, number], reachM: number): void {
  const { x0M, y0M, dxM, dyM, nx, ny } = grid;
  const i0 = Math.max(0, Math.ceil((Math.min(ax, bx) - reachM - x0M) / dxM));
  const i1 = Math.min(nx - 1, Math.floor((Math.max(ax, bx) + reachM - x0M) / dxM));
  const j0 = Math.max(0, Math.ceil((Math.min(ay, by) - reachM - y0M) / dyM));
  const j1 = Math.min(ny - 1, Math.floor((Math.max(ay, by) + reachM - y0M) / dyM));
  const [ux, uy] = [bx - ax, by - ay];
  const length2 = ux * ux + uy * uy;
  for (let j = j0; j <= j1; j++)
    for (let i = i0; i <= i1; i++) {
      const [px, py] = [x0M + i * dxM - ax, y0M + j * dyM - ay];
      const along = length2 === 0 ? 0 : Math.min(1, Math.max(0, (px * ux + py * uy) / length2));
      const distance = Math.hypot(px - along * ux, py - along * uy);
      if (distance < out[j * nx + i]!) out[j * nx + i] = distance;
    }
}
