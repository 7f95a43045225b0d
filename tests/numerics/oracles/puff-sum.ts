import type { PlaneGrid } from '../../../shared/frames';
import type { PuffList } from '../../../server/solver/open/grid-puffs';

/** Puffs added up the plain way: one exponential at every node for every puff, no cut. Puffs are wider than 0.7 nodes. */
export function plainPuffSum(grid: PlaneGrid, puffs: PuffList): Float64Array {
  const { nx, ny, x0M, y0M, dxM, dyM } = grid;
  const out = new Float64Array(nx * ny);
  for (let p = 0; p < puffs.x.length; p++) {
    const [sxx, sxy, syy] = [puffs.sxx[p]!, puffs.sxy[p]!, puffs.syy[p]!];
    const det = sxx * syy - sxy * sxy;
    for (let j = 0; j < ny; j++) {
      for (let i = 0; i < nx; i++) {
        const dx = x0M + i * dxM - puffs.x[p]!;
        const dy = y0M + j * dyM - puffs.y[p]!;
        const r2 = (syy * dx * dx - 2 * sxy * dx * dy + sxx * dy * dy) / det;
        out[j * nx + i]! += (puffs.amount[p]! / (2 * Math.PI * Math.sqrt(det))) * Math.exp(-r2 / 2);
      }
    }
  }
  return out;
}
