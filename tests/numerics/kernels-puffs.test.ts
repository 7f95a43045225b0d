import { describe, expect, it } from 'vitest';
import type { PuffList } from '../../server/solver/open/grid-puffs';
import type { PlaneGrid } from '../../shared/frames';
import { builtKernels } from './built-kernels';
import { plainPuffSum } from './oracles/puff-sum';

const kernels = await builtKernels();

const gridOf = (nx: number, ny: number): PlaneGrid => ({ kind: 'plane', originLon: 0, originLat: 0, x0M: -40, y0M: 25, dxM: 2, dyM: 1.5, nx, ny });

/** Invented puffs of all sizes and directions, some of them partly or wholly off the grid. */
function puffsOf(count: number, widest: number, grid: PlaneGrid): PuffList {
  const list: PuffList = { x: [], y: [], sxx: [], sxy: [], syy: [], amount: [] };
  for (let p = 0; p < count; p++) {
    const t = (p * 0.618034) % 1;
    const [a, b, turn] = [1.5 + widest * t, 1.5 + 0.5 * widest * ((p * 0.7548) % 1), 2.4 * p];
    const [c, s] = [Math.cos(turn), Math.sin(turn)];
    list.x.push(grid.x0M + grid.dxM * grid.nx * (1.4 * ((p * 0.5698) % 1) - 0.2));
    list.y.push(grid.y0M + grid.dyM * grid.ny * (1.4 * ((p * 0.3333 + 0.1) % 1) - 0.2));
    list.sxx.push((c * a) ** 2 + (s * b) ** 2);
    list.syy.push((s * a) ** 2 + (c * b) ** 2);
    list.sxy.push(c * s * (a * a - b * b));
    list.amount.push(0.5 + t);
  }
  return list;
}

const worst = (values: ArrayLike<number>, stride: number, exact: Float64Array, nx: number): number => {
  let error = 0;
  for (let k = 0; k < exact.length; k++) error = Math.max(error, Math.abs(values[Math.floor(k / nx) * stride + (k % nx)]! - exact[k]!));
  return error / exact.reduce((a, b) => Math.max(a, b));
};

/** What the ellipses leave out: 1e-7 of each puff's peak at most, and at any node few puffs are near their cut. */
const CUT = 3e-7;

describe('sums of puffs', () => {
  it.each([[64, 48, 12, 10], [61, 47, 30, 40], [131, 90, 25, 90], [3, 2, 5, 4]])('on %i x %i nodes agree with an exponential at every node', (nx, ny, count, widest) => {
    const grid = gridOf(nx, ny);
    const puffs = puffsOf(count, widest, grid);
    const exact = plainPuffSum(grid, puffs);
    const sum64 = kernels.puffSum64(nx, ny, 16);
    sum64.sum(grid, puffs);
    expect(worst(sum64.values, sum64.stride, exact, nx)).toBeLessThan(CUT);
    for (const kappa of [Infinity, 5]) {
      const sum32 = kernels.puffSum32(nx, ny, 16, kappa);
      sum32.sum(grid, puffs);
      // 32-bit rounding of a value and its growth factor, and interpolation at 3e-7 an axis.
      expect(worst(sum32.values, sum32.stride, exact, nx)).toBeLessThan(CUT + 1e-6);
    }
  });

  it('are those of the ellipse to rounding: beyond the cut the 64-bit sum errs by 1e-14', () => {
    const grid = gridOf(40, 30);
    const puffs: PuffList = { x: [0], y: [47], sxx: [900], sxy: [200], syy: [700], amount: [3] };
    const exact = plainPuffSum(grid, puffs);
    const sum = kernels.puffSum64(40, 30, 1);
    sum.sum(grid, puffs);
    expect(worst(sum.values, sum.stride, exact, 40)).toBeLessThan(1e-14);
  });

  it('use coarse grids for many wide puffs, and say the same as without them', () => {
    const grid = gridOf(256, 256);
    const puffs = puffsOf(200, 150, grid);
    const direct = kernels.puffSum32(256, 256, 256, Infinity);
    const levels = kernels.puffSum32(256, 256, 256);
    direct.sum(grid, puffs);
    levels.sum(grid, puffs);
    const exact = Float64Array.from(direct.values);
    expect(worst(levels.values, 256, exact, 256)).toBeLessThan(1e-6);
    // Different bytes show that interpolation took part at all.
    expect(levels.values.some((v, k) => v !== direct.values[k])).toBe(true);
  });

  it('forget what was summed before', () => {
    const grid = gridOf(128, 128);
    const sum = kernels.puffSum32(128, 128, 256);
    const puffs = puffsOf(40, 20, grid);
    sum.sum(grid, puffs);
    const first = Float32Array.from(sum.values);
    sum.sum(grid, puffsOf(200, 150, grid));
    sum.sum(grid, puffs);
    expect(sum.values).toEqual(first);
  });

  it('refuse a puff wider than their table and a puff without a width', () => {
    const grid = gridOf(16, 16);
    const puffs: PuffList = { x: [0], y: [47], sxx: [1e12], sxy: [0], syy: [700], amount: [3] };
    expect(() => kernels.puffSum64(16, 16, 1).sum(grid, puffs)).toThrow(/row variance of 250000000000/);
    puffs.sxx[0] = Number.NaN;
    expect(() => kernels.puffSum32(16, 16, 1).sum(grid, puffs)).toThrow(/row variance of NaN/);
    expect(() => kernels.puffSum32(0, 16, 1)).toThrow(/needs nodes/);
  });
});
