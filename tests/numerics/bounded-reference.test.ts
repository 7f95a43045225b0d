import { execFileSync, spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { bilinearWeights } from '../../server/solver/bounded/cell-grid';
import { normalDensity2 } from '../../server/solver/physics/plane';
import { basin, box, fill, flowFrom, mixing, stepTo } from './bounded-helpers';

type Reference = {
  case: { lengthM: number; widthM: number; streamM2s: number; kxM2s: number; kyM2s: number; cloud: { xM: number; yM: number; sigmaM: number }; timesS: number[]; placesM: [number, number][] };
  valuesPerM2: number[][];
};
const reference = JSON.parse(readFileSync(new URL('../fixtures/reference/enclosed-basin.json', import.meta.url), 'utf8')) as Reference;
const script = fileURLToPath(new URL('./peers/enclosed_basin.py', import.meta.url));
const python = ['/usr/bin/python3', 'python3'].find((name) => spawnSync(name, ['-c', 'import numpy, scipy']).status === 0) ?? null;

describe('a gyre in a closed basin, against a cosine series advanced by a matrix exponential', () => {
  it('agrees to 1 % of the largest value at every place and time on cells of 5 m', () => {
    const { lengthM, widthM, streamM2s, kxM2s, kyM2s, cloud, timesS, placesM } = reference.case;
    const dx = 5;
    const grid = box(lengthM / dx, widthM / dx, dx);
    const flow = flowFrom(grid, (x, y) => streamM2s * Math.sin((Math.PI * x) / lengthM) * Math.sin((Math.PI * y) / widthM));
    const s2 = cloud.sigmaM ** 2;
    const mirrors = (at: number, size: number): number[] => [at, -at, 2 * size - at];
    const c = fill(grid, (x, y) => mirrors(cloud.xM, lengthM).reduce((sum, x0) => sum + mirrors(cloud.yM, widthM).reduce((part, y0) => part + normalDensity2(x - x0, y - y0, s2, 0, s2), 0), 0));
    let nowS = 0;
    timesS.forEach((timeS, n) => {
      stepTo(basin(grid), c, flow, mixing(kxM2s, kyM2s, 90), timeS - nowS);
      nowS = timeS;
      const wanted = reference.valuesPerM2[n]!;
      const most = Math.max(...wanted);
      placesM.forEach(([x, y], k) => {
        const got = bilinearWeights(grid, x, y).reduce((sum, { cell, weight }) => sum + weight * c[cell]!, 0);
        // Cells of a twelfth of the first standard deviation, stretched thinner by the shear: limited slopes leave a few 0.1 %.
        expect(Math.abs(got - wanted[k]!), `place ${k} at ${timeS} s: ${got} for ${wanted[k]!}`).toBeLessThan(0.01 * most);
      });
    });
  });

  it('has its stored values again from the script, to 1e-10; without numpy and scipy that is told and the values stand', () => {
    if (python === null) return console.warn('No Python with numpy and scipy here: the stored reference values were not recomputed');
    const again = JSON.parse(execFileSync(python!, [script, 'compare'], { encoding: 'utf8' })) as number[][];
    const most = Math.max(...reference.valuesPerM2.flat());
    again.forEach((row, n) => row.forEach((value, k) => expect(Math.abs(value - reference.valuesPerM2[n]![k]!)).toBeLessThan(1e-10 * most)));
  });
});
