import { writeFileSync } from 'node:fs';
import { loadKernels } from '../../../server/workers/load-kernels';
import { bay, openLeftFaces } from '../../numerics/oracles/coast';
import { largestError } from '../compare';
import type { MakeCase, Prepared } from '../harness';
import type { Peer } from '../peer';

const TOLERANCE = 1e-8;

function problem(n: number) {
  const isWater = bay(n);
  const faces = openLeftFaces(isWater, n);
  return { ...faces, b: Float64Array.from(isWater, (wet, k) => wet * ((Math.sin(k * 12.9898) * 43758.5453) % 1)) };
}

/** Residual of a solution as a share of b, 2-norms. */
function residual(n: number, p: Float64Array, { x, y, b }: ReturnType<typeof problem>): number {
  const at = (i: number, j: number): number => (i >= 0 && i < n && j >= 0 && j < n ? p[j * n + i]! : 0);
  let left = 0;
  let all = 0;
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const here = at(i, j);
      const across = x[j * (n + 1) + i]! * (here - at(i - 1, j)) + x[j * (n + 1) + i + 1]! * (here - at(i + 1, j));
      const along = y[j * n + i]! * (here - at(i, j - 1)) + y[(j + 1) * n + i]! * (here - at(i, j + 1));
      left += (b[j * n + i]! - across - along) ** 2;
      all += b[j * n + i]! ** 2;
    }
  }
  return Math.sqrt(left / all);
}

/** Everything is timed that a changed shore would ask for: the faces of all levels, then the solution. */
async function prepare(peer: Peer | null, n: number): Promise<Prepared> {
  const given = problem(n);
  const solver = loadKernels().poissonSolver(n, n);
  const out = new Float64Array(n * n);
  const ours = (): void => {
    solver.setFaces(given.x, given.y);
    solver.solve(out, given.b, TOLERANCE);
  };
  ours();
  if (peer) {
    for (const name of ['x', 'y', 'b'] as const) writeFileSync(peer.path(name), new Uint8Array(given[name].buffer));
    await peer.ask('poisson.setup', { n, folder: peer.path('.') });
    // A residual of 1e-8 of b, times what the smooth part of the inverse makes of it.
    const difference = largestError(out, await peer.array('poisson.result'));
    if (!(difference < 1e-6)) throw new Error(`The solution differs from the peer's by ${difference} of the peak`);
  }
  return { peerName: `scipy ${peer?.versions.scipy ?? ''} spsolve`, error: residual(n, out, given), errorLimit: TOLERANCE, ours, peer: peer && ((repetitions) => peer.ask<number>('poisson.time_spsolve', { repetitions })) };
}

async function rounds(n: number): Promise<Prepared> {
  const given = problem(n);
  const solver = loadKernels().poissonSolver(n, n);
  const out = new Float64Array(n * n);
  solver.setFaces(given.x, given.y);
  const taken = solver.solve(out, given.b, TOLERANCE);
  return { peerName: 'none: rounds to 1e-8', error: residual(n, out, given), errorLimit: TOLERANCE, ours: () => undefined, peer: null, ratio: taken };
}

export const poissonCases: Record<string, MakeCase> = {
  'poisson-256': (peer) => prepare(peer, 256),
  'poisson-512': (peer) => prepare(peer, 512),
  'poisson-iterations-256': () => rounds(256),
  'poisson-iterations-512': () => rounds(512),
};
