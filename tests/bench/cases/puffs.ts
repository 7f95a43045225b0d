import type { PlaneGrid } from '../../../shared/frames';
import type { PuffList } from '../../../server/solver/open/grid-puffs';
import { addPuffs } from '../../../server/solver/open/puff-kernel';
import { loadKernels } from '../../../server/workers/load-kernels';
import { largestError } from '../compare';
import type { MakeCase, Prepared } from '../harness';
import type { Peer } from '../peer';

const N = 512;
const grid: PlaneGrid = { kind: 'plane', originLon: 0, originLat: 0, x0M: 0, y0M: 0, dxM: 1, dyM: 1, nx: N, ny: N };

/** An invented track: puffs growing from 3 x 2 to 48 x 20 nodes while they turn and move across the grid. One puff alone is taken from its middle. */
export function track(count: number): PuffList {
  const list: PuffList = { x: [], y: [], sxx: [], sxy: [], syy: [], amount: [] };
  for (let i = 0; i < count; i++) {
    const t = count === 1 ? 0.5 : i / (count - 1);
    const [along, across, turn] = [3 + 45 * t, 2 + 18 * t, 0.5 + 0.4 * t];
    const [c, s] = [Math.cos(turn), Math.sin(turn)];
    list.x.push(60 + 300 * t + 20 * Math.sin(5 * t));
    list.y.push(80 + 260 * t);
    list.sxx.push((c * along) ** 2 + (s * across) ** 2);
    list.syy.push((s * along) ** 2 + (c * across) ** 2);
    list.sxy.push(c * s * (along ** 2 - across ** 2));
    list.amount.push(1 / count);
  }
  return list;
}

type Route = { sum: () => void; values: () => ArrayLike<number> };
const routes = {
  levels: (puffs: PuffList): Route => {
    const kernel = loadKernels().puffSum32(N, N, 512);
    return { sum: () => kernel.sum(grid, puffs), values: () => kernel.values };
  },
  plain: (puffs: PuffList): Route => {
    const out = new Float64Array(N * N);
    return { sum: () => addPuffs(out.fill(0), grid, puffs), values: () => out };
  },
};

async function prepare(peer: Peer | null, count: number, route: keyof typeof routes, precision: 64 | 32): Promise<Prepared> {
  const puffs = track(count);
  const { sum, values } = routes[route](puffs);
  sum();
  const rows = puffs.x.map((x, p) => [x, puffs.y[p], puffs.sxx[p], puffs.sxy[p], puffs.syy[p], puffs.amount[p]]);
  await peer?.ask('puffs.setup', { n: N, puffs: rows });
  const exact = peer ? await peer.array('puffs.result') : addPuffs64(puffs);
  return {
    peerName: `numpy ${peer?.versions.numpy ?? ''} box float${precision}`,
    error: largestError(values(), exact),
    errorLimit: 1e-6,
    ours: sum,
    peer: peer && ((repetitions) => peer.ask<number>(`puffs.time_box${precision}`, { repetitions })),
  };
}

function addPuffs64(puffs: PuffList): Float64Array {
  const out = new Float64Array(N * N);
  addPuffs(out, grid, puffs);
  return out;
}

export const puffCases: Record<string, MakeCase> = {
  'puff-1': (peer) => prepare(peer, 1, 'levels', 64),
  'puff-50': (peer) => prepare(peer, 50, 'levels', 64),
  'puff-50-f32': (peer) => prepare(peer, 50, 'levels', 32),
  'puff-500': (peer) => prepare(peer, 500, 'levels', 64),
  'puff-js': (peer) => prepare(peer, 50, 'plain', 64),
};
