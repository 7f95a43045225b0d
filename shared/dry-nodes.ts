import type { PlaneGrid } from './frames';
import { toPlane } from './geo';
import type { LonLat } from './schemas/basics';

/**
 * Marks with 1 every node of a grid that lies on land: outside the area's rings by the even-odd rule. The frames say
 * 0 there, which is no measure of the water beside it. Cost O(ring vertices + nodes).
 */
export function dryNodes(grid: PlaneGrid, area: readonly (readonly LonLat[])[]): Uint8Array {
  const crossings: number[][] = Array.from({ length: grid.ny }, () => []);
  for (const ring of area) collectCrossings(ring, grid, crossings);
  const dry = new Uint8Array(grid.nx * grid.ny);
  crossings.forEach((row, j) => {
    row.sort((a, b) => a - b);
    let passed = 0;
    for (let i = 0; i < grid.nx; i++) {
      while (passed < row.length && row[passed]! <= i) passed++;
      if (passed % 2 === 0) dry[j * grid.nx + i] = 1;
    }
  });
  return dry;
}

/** Adds to each grid row where, in grid units along x, the ring crosses it. */
function collectCrossings(ring: readonly LonLat[], grid: PlaneGrid, crossings: number[][]): void {
  let before: readonly [number, number] | null = null;
  for (const position of ring) {
    const [x, y] = toPlane(grid, position);
    const here = [(x - grid.x0M) / grid.dxM, (y - grid.y0M) / grid.dyM] as const;
    if (before) {
      const [low, high] = before[1] < here[1] ? [before, here] : [here, before];
      // Half-open, so that a vertex on a row counts once.
      const last = Math.min(grid.ny - 1, Math.ceil(high[1]) - 1);
      for (let j = Math.max(0, Math.ceil(low[1])); j <= last; j++) crossings[j]!.push(low[0] + ((high[0] - low[0]) * (j - low[1])) / (high[1] - low[1]));
    }
    before = here;
  }
}
