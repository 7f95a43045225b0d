import type { PlaneGrid } from '../../shared/frames';
import type { PuffList } from '../../server/solver/open/grid-puffs';
import { loadKernels } from '../../server/workers/load-kernels';

const N = 256;
const PUFFS = 500;
const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: 0, y0M: 0, dxM: 1, dyM: 1, nx: N, ny: N };
let kernel: ReturnType<ReturnType<typeof loadKernels>['puffSum32']> | null = null;

/** Frames from..to of an invented forecast, each a field of its own; the kernel is made once a thread. */
export function solveFrames(from: number, to: number): Float32Array[] {
  kernel ??= loadKernels().puffSum32(N, N, PUFFS, Infinity);
  const out: Float32Array[] = [];
  for (let frame = from; frame < to; frame++) {
    kernel.sum(grid, puffsOf(frame));
    out.push(kernel.values.slice());
  }
  return out;
}

function puffsOf(frame: number): PuffList {
  const list: PuffList = { x: [], y: [], sxx: [], sxy: [], syy: [], amount: [] };
  for (let k = 0; k < PUFFS; k++) {
    const age = ((k + 1) / PUFFS) * ((frame + 1) / 48);
    const [a, b] = [(2 + 18 * age) ** 2, (1.5 + 9 * age) ** 2];
    list.x.push(20 + 200 * age);
    list.y.push(128 + 40 * Math.sin(5 * age));
    list.sxx.push(0.8 * a + 0.2 * b);
    list.syy.push(0.2 * a + 0.8 * b);
    list.sxy.push(0.4 * (a - b));
    list.amount.push(1);
  }
  return list;
}

/** Work that touches no memory, about 20 ms: what a second core gives at best at this moment. */
export function spin(): number {
  let sum = 0;
  for (let k = 0; k < 12_000_000; k++) sum = (sum * 1.0000001 + k) % 1000;
  return sum;
}
