import { describe, expect, it } from 'vitest';
import type { VolumeGrid } from '../../server/solver/kernels/volume';
import { builtKernels } from './built-kernels';
import { plainVolumeStep, type VolumeProblem } from './oracles/volume-step';
import { roughBasin } from './oracles/rough-basin';

const kernels = await builtKernels();

function gridFor(problem: VolumeProblem): VolumeGrid {
  const grid = kernels.volumeGrid(problem.nx, problem.ny, problem.isWater);
  grid.setFlow(problem.flowX, problem.flowY);
  grid.setDiffusion(problem.diffusionX, problem.diffusionY, problem.isTrapezoidal ? 'trapezoidal' : 'backward');
  return grid;
}

const read = (grid: VolumeGrid): Float64Array => Float64Array.from({ length: grid.nx * grid.ny }, (_, k) => grid.c[grid.index(k % grid.nx, Math.floor(k / grid.nx))]!);
function write(grid: VolumeGrid, values: (i: number, j: number) => number): void {
  for (let j = 0; j < grid.ny; j++) for (let i = 0; i < grid.nx; i++) grid.c[grid.index(i, j)] = values(i, j);
}
const blob = (problem: VolumeProblem) => (i: number, j: number): number =>
  problem.isWater[j * problem.nx + i] === 1 ? Math.exp(-(((i - problem.nx * 0.4) / (problem.nx * 0.15)) ** 2) - ((j - problem.ny * 0.5) / (problem.ny * 0.2)) ** 2) : 0;

describe('finite volumes', () => {
  it.each([[32, 24, false, true], [33, 17, true, true], [19, 8, false, false], [6, 1, false, true], [2, 9, true, false], [48, 41, true, true]])(
    'on %i x %i cells agree with the plain step (trapezoidal %s, open ends %s)',
    (nx, ny, isTrapezoidal, isOpen) => {
      const problem: VolumeProblem = { ...roughBasin(nx, ny, isOpen), isTrapezoidal };
      const grid = gridFor(problem);
      write(grid, blob(problem));
      let plain = read(grid);
      let lost = 0;
      for (let n = 0; n < 12; n++) {
        grid.step();
        const step = plainVolumeStep(plain, problem, n % 2 === 0);
        plain = step.c;
        lost += step.lost;
      }
      // A dozen steps of a few dozen roundings each, of values up to 1.
      read(grid).forEach((value, k) => expect(Math.abs(value - plain[k]!)).toBeLessThan(1e-13));
      expect(Math.abs(grid.lost - lost)).toBeLessThan(1e-11);
    },
  );

  it('keep mass to 1e-11 after 2 160 steps, books of the open ends included, and never fall below zero', () => {
    const problem: VolumeProblem = { ...roughBasin(96, 64, true), isTrapezoidal: true };
    const grid = gridFor(problem);
    write(grid, blob(problem));
    const before = grid.total();
    for (let n = 0; n < 2160; n++) grid.step();
    expect(Math.abs(grid.total() + grid.lost - before) / before).toBeLessThan(1e-11);
    expect(grid.lost / before).toBeGreaterThan(0.1);
    // Differences of nearly equal numbers far from the cloud may leave rounding of the peak.
    expect(read(grid).every((value) => value >= -1e-16)).toBe(true);
  });

  it('leave a uniform concentration uniform where the flow has no divergence', () => {
    const problem: VolumeProblem = { ...roughBasin(40, 30, false), isTrapezoidal: false };
    const grid = gridFor(problem);
    write(grid, (i, j) => problem.isWater[j * 40 + i]!);
    for (let n = 0; n < 50; n++) grid.step();
    // The flow's own divergence is rounding, 1e-17, and adds up over 50 steps.
    read(grid).forEach((value, k) => expect(Math.abs(value - problem.isWater[k]!)).toBeLessThan(1e-13));
  });

  it('come closer to the exact moving cloud with the square of the spacing', () => {
    const error = (n: number): number => {
      const h = 1 / n;
      const steps = n;
      const [u, v] = [0.2, 0.12];
      const spread = 0.0008;
      const water = new Uint8Array(n * n).fill(1);
      const grid = kernels.volumeGrid(n, n, water);
      grid.setFlow(new Float64Array((n + 1) * n).fill(u / steps / h), new Float64Array(n * (n + 1)).fill(v / steps / h));
      const number = spread / steps / h ** 2;
      grid.setDiffusion(new Float64Array((n + 1) * n).fill(number), new Float64Array(n * (n + 1)).fill(number), 'trapezoidal');
      const exact = (t: number) => (i: number, j: number): number => {
        const variance = 0.06 ** 2 + 2 * spread * t;
        const r2 = ((i + 0.5) * h - 0.4 - u * t) ** 2 + ((j + 0.5) * h - 0.45 - v * t) ** 2;
        return (0.06 ** 2 / variance) * Math.exp(-r2 / (2 * variance));
      };
      write(grid, exact(0));
      for (let k = 0; k < steps; k++) grid.step();
      let sum = 0;
      read(grid).forEach((value, k) => (sum += Math.abs(value - exact(1)(k % n, Math.floor(k / n))) * h * h));
      return sum;
    };
    // Order 2 in the mean norm; the limiter flattens the single highest node, which costs a little of it.
    expect(Math.log2(error(64) / error(128))).toBeGreaterThan(1.75);
  });

  it('apply first-order losses as the factor given', () => {
    const problem: VolumeProblem = { ...roughBasin(24, 24, false), isTrapezoidal: true };
    const grid = gridFor(problem);
    write(grid, blob(problem));
    const before = grid.total();
    for (let n = 0; n < 10; n++) grid.step(0.9);
    expect(Math.abs(grid.total() / before / 0.9 ** 10 - 1)).toBeLessThan(1e-13);
  });

  it('refuse a step that would empty a cell, a diffusion number below 0 or too large for the rule, and a mask of the wrong size', () => {
    const grid = kernels.volumeGrid(4, 4, new Uint8Array(16).fill(1));
    expect(() => grid.setFlow(new Float64Array(20).fill(0.6), new Float64Array(20))).toThrow(/Cell \(0, 0\) loses 0.600 of its water/);
    expect(() => grid.setDiffusion(new Float64Array(20).fill(1.5), new Float64Array(20), 'trapezoidal')).toThrow(/takes 0 to 1/);
    expect(() => grid.setDiffusion(new Float64Array(20).fill(-1), new Float64Array(20), 'backward')).toThrow(/diffusion number of -1/);
    expect(() => kernels.volumeGrid(4, 4, new Uint8Array(15))).toThrow(/needs 4 x 4 marks/);
  });
});
