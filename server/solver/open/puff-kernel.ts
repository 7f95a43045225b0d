import type { PlaneGrid } from '../../../shared/frames';
import type { PuffList } from './grid-puffs';

/** Cut at exp(-r^2/2) = 1e-7 of a puff's peak. */
const CUT2 = 2 * Math.log(1e7);

/**
 * Adds normal clouds to a grid: out += amount / (2 pi sqrt(det S)) exp(-d^T S^-1 d / 2) at every node.
 * Each row of a cloud is one normal curve, walked by a two-term recurrence (value *= ratio, ratio *= step) from the edge
 * of the cut ellipse, so that a node costs two products and no exponential; relative error grows as the square of the
 * nodes in a row, 1e-12 for 400. Puffs narrower than 0.7 of a cell are widened to it, so that sums over nodes keep mass.
 *
 * @param out   kg/m3, nx*ny, x fastest; added to, owned by the caller
 * Cost: two exponentials and a square root a row, about 2 ns a node touched.
 */
export function addPuffs(out: Float64Array, grid: PlaneGrid, puffs: PuffList): void {
  const { nx, ny, x0M, y0M, dxM, dyM } = grid;
  const least = (0.7 * Math.max(dxM, dyM)) ** 2;
  for (let p = 0; p < puffs.x.length; p++) {
    const widen = widening(puffs.sxx[p]!, puffs.sxy[p]!, puffs.syy[p]!, least);
    const sxx = puffs.sxx[p]! + widen;
    const syy = puffs.syy[p]! + widen;
    const sxy = puffs.sxy[p]!;
    const x = puffs.x[p]!;
    const y = puffs.y[p]!;
    const rowVariance = sxx - (sxy * sxy) / syy;
    const peak = puffs.amount[p]! / (2 * Math.PI * Math.sqrt(syy * rowVariance));
    const halfHeight = Math.sqrt(CUT2 * syy);
    const j0 = Math.max(0, Math.ceil((y - halfHeight - y0M) / dyM));
    const j1 = Math.min(ny - 1, Math.floor((y + halfHeight - y0M) / dyM));
    const step = Math.exp((-dxM * dxM) / rowVariance);
    for (let j = j0; j <= j1; j++) {
      const dy = y0M + j * dyM - y;
      const down = (dy * dy) / syy;
      const centre = x + (sxy / syy) * dy;
      const halfWidth = Math.sqrt(Math.max(0, CUT2 - down) * rowVariance);
      const i0 = Math.max(0, Math.ceil((centre - halfWidth - x0M) / dxM));
      const i1 = Math.min(nx - 1, Math.floor((centre + halfWidth - x0M) / dxM));
      if (i0 > i1) continue;
      const first = x0M + i0 * dxM - centre;
      let value = peak * Math.exp(-0.5 * down - (first * first) / (2 * rowVariance));
      let ratio = Math.exp((-first * dxM - 0.5 * dxM * dxM) / rowVariance);
      for (let at = j * nx + i0, end = j * nx + i1; at <= end; at++) {
        out[at]! += value;
        value *= ratio;
        ratio *= step;
      }
    }
  }
}

/** What to add to both variances so that the smaller principal variance is at least `least`. */
function widening(sxx: number, sxy: number, syy: number, least: number): number {
  const mean = (sxx + syy) / 2;
  const smaller = mean - Math.hypot((sxx - syy) / 2, sxy);
  return Math.max(0, least - smaller);
}
