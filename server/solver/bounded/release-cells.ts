import { nearestCell, type CellGrid } from './cell-grid';

/** Cells that take up a release, with the share of each; the shares sum to one. */
export type ReleaseCells = { readonly cells: Int32Array; readonly shares: Float64Array };

/** Beyond this many standard deviations the start of a cloud is cut. */
const CUT_SIGMA = 4;

/** A round normal cloud of standard deviation `sigmaM`, over the water that joins on to its middle within the cut. */
export function releaseCells(grid: CellGrid, xM: number, yM: number, sigmaM: number, thicknessM: Float64Array): ReleaseCells {
  const first = nearestCell(grid, xM, yM)!.cell;
  const reachM = CUT_SIGMA * sigmaM + grid.dxM / 2;
  const met = new Set([first]);
  const cells = [first];
  const distance2 = (cell: number): number => (grid.x0M + (cell % grid.nx) * grid.dxM - xM) ** 2 + (grid.y0M + Math.floor(cell / grid.nx) * grid.dxM - yM) ** 2;
  for (let n = 0; n < cells.length; n++) {
    for (const next of [cells[n]! - 1, cells[n]! + 1, cells[n]! - grid.nx, cells[n]! + grid.nx]) {
      if (grid.isWater[next] === 0 || met.has(next) || distance2(next) > reachM ** 2) continue;
      met.add(next);
      cells.push(next);
    }
  }
  const raw = cells.map((cell) => Math.exp(-distance2(cell) / (2 * sigmaM ** 2)) * thicknessM[cell]!);
  const sum = raw.reduce((total, value) => total + value, 0);
  // A release at the very shore may have all its water beyond the cut.
  if (!(sum > 0)) return { cells: Int32Array.of(first), shares: Float64Array.of(1) };
  return { cells: Int32Array.from(cells), shares: Float64Array.from(raw, (value) => value / sum) };
}
