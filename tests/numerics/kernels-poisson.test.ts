import { describe, expect, it } from 'vitest';
import { builtKernels } from './built-kernels';
import { bay, openLeftFaces } from './oracles/coast';
import { densePoisson } from './oracles/dense-poisson';

const kernels = await builtKernels();

/** Repeatable values between -1 and 1 that look random. */
const scattered = (k: number): number => ((Math.sin(k * 12.9898) * 43758.5453) % 1);

describe('the masked Poisson solver', () => {
  it.each([[5, 3], [12, 9], [17, 20], [1, 7], [24, 8]])('on %i x %i cells agrees with elimination', (nx, ny) => {
    // Faces of one part in four closed, the rest of sizes between 0.5 and 1.5; the two ends along x are open. 32-bit face values.
    const x = new Float64Array((nx + 1) * ny).map((_, k) => (k % (nx + 1) === 0 ? 2 : scattered(k) < -0.5 ? 0 : Math.fround(1 + scattered(k) / 2)));
    const y = new Float64Array(nx * (ny + 1)).map((_, k) => (k < nx || k >= nx * ny ? 0 : scattered(k + 0.5) < -0.5 ? 0 : Math.fround(1 + scattered(k + 0.5) / 2)));
    // Cells walled in on all sides would be singular by themselves: they get a way out.
    for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) if (i > 0) x[j * (nx + 1) + i] ||= 0.25;
    const b = new Float64Array(nx * ny).map((_, k) => scattered(k + 3));
    const exact = densePoisson(nx, ny, x, y, b);
    const out = new Float64Array(nx * ny);
    const solver = kernels.poissonSolver(nx, ny);
    solver.setFaces(x, y);
    solver.solve(out, b, 1e-13);
    // Residual 1e-13 of b times a condition number of some hundreds.
    const most = exact.reduce((a, v) => Math.max(a, Math.abs(v)), 0);
    out.forEach((value, k) => expect(Math.abs(value - exact[k]!)).toBeLessThan(1e-10 * most));
  });

  it('leaves a flow corrected by it without divergence, and no flow through land', () => {
    const n = 96;
    const isWater = bay(n);
    const { x, y } = openLeftFaces(isWater, n);
    const flowX = x.map((k, at) => (k > 0 ? scattered(at) : 0));
    const flowY = y.map((k, at) => (k > 0 ? scattered(at + 0.5) : 0));
    const divergence = (): Float64Array =>
      new Float64Array(n * n).map((_, k) => {
        const [i, j] = [k % n, Math.floor(k / n)];
        return flowX[j * (n + 1) + i + 1]! - flowX[j * (n + 1) + i]! + flowY[k + n]! - flowY[k]!;
      });
    const p = new Float64Array(n * n);
    const solver = kernels.poissonSolver(n, n);
    solver.setFaces(x, y);
    solver.solve(p, divergence().map((value) => -value), 1e-14);
    const at = (i: number, j: number): number => (i >= 0 && i < n && j >= 0 && j < n ? p[j * n + i]! : 0);
    flowX.forEach((value, k) => (flowX[k] = value - x[k]! * (at(k % (n + 1), Math.floor(k / (n + 1))) - at((k % (n + 1)) - 1, Math.floor(k / (n + 1))))));
    flowY.forEach((value, k) => (flowY[k] = value - y[k]! * (at(k % n, Math.floor(k / n)) - at(k % n, Math.floor(k / n) - 1))));
    // Flows are about 1 and pressures up to some hundreds: what is left is their rounding.
    expect(divergence().reduce((a, v) => Math.max(a, Math.abs(v)), 0)).toBeLessThan(2e-12);
    x.forEach((k, face) => expect(k === 0 ? flowX[face] : 0).toBe(0));
  });

  it('takes hardly more rounds on four times as many cells', () => {
    const rounds = [64, 128, 256].map((n) => {
      const isWater = bay(n);
      const { x, y } = openLeftFaces(isWater, n);
      const solver = kernels.poissonSolver(n, n);
      solver.setFaces(x, y);
      return solver.solve(new Float64Array(n * n), Float64Array.from(isWater, (wet, k) => wet * scattered(k)));
    });
    expect(Math.max(...rounds)).toBeLessThanOrEqual(11);
    expect(rounds[2]! - rounds[0]!).toBeLessThanOrEqual(2);
  });

  it('gives the same bytes for the same input, whatever was solved before', () => {
    const isWater = bay(64);
    const { x, y } = openLeftFaces(isWater, 64);
    const solver = kernels.poissonSolver(64, 64);
    solver.setFaces(x, y);
    const b = Float64Array.from(isWater, (wet, k) => wet * scattered(k));
    const [first, other, again] = [new Float64Array(4096), new Float64Array(4096), new Float64Array(4096)];
    solver.solve(first, b);
    solver.solve(other, b.map((value) => value ** 3));
    solver.solve(again, b);
    expect(again).toEqual(first);
  });

  it('answers zero at once for a right side of zero', () => {
    const solver = kernels.poissonSolver(8, 8);
    solver.setFaces(new Float64Array(72).fill(1), new Float64Array(72).fill(1));
    const out = new Float64Array(64).fill(7);
    expect(solver.solve(out, new Float64Array(64))).toBe(0);
    expect(out.every((value) => value === 0)).toBe(true);
  });

  it('says so where a closed pool is given a flow that it cannot take', () => {
    const solver = kernels.poissonSolver(8, 8);
    const x = new Float64Array(72).map((_, k) => (k % 9 === 0 || k % 9 === 8 ? 0 : 1));
    const y = new Float64Array(72).map((_, k) => (k < 8 || k >= 64 ? 0 : 1));
    solver.setFaces(x, y);
    expect(() => solver.solve(new Float64Array(64), new Float64Array(64).fill(1))).toThrow(/no open edge/);
    expect(() => solver.setFaces(x, new Float64Array(3))).toThrow(/Faces of 8 x 8 cells are 72 and 72/);
    expect(() => solver.setFaces(x.fill(-1), y)).toThrow(/not negative/);
  });
});
