import { loadKernels } from '../../../server/workers/load-kernels';
import type { MakeCase } from '../harness';

const PATHS = 1_000_000;
const STEPS = 4;
const LENGTH = 1000;
const SPREAD = 3;
/** Largest deviation of a moment that a correct generator shows by chance, in standard errors. */
const MOST_STANDARD_ERRORS = 4;

/** Largest deviation of the first four moments of the steps, in standard errors; in a box too large to matter. */
function worstMoment(seed: number): number {
  const n = 1_000_000;
  const middle = 524_288;
  const walk = loadKernels().boxWalk(n, 2 * middle, 2 * middle, seed);
  walk.x.fill(middle);
  walk.y.fill(middle);
  walk.walk([{ driftX: 0, driftY: 0, spreadX: 8192, spreadY: 8192 }]);
  const sums = [0, 0, 0, 0];
  for (const positions of [walk.x, walk.y]) for (const value of positions) for (let k = 0; k < 4; k++) sums[k]! += ((value - middle) / 8192) ** (k + 1);
  return Math.max(...[[0, 1], [1, 2], [0, 15], [3, 96]].map(([mean, variance], k) => Math.abs(sums[k]! / (2 * n) - mean!) / Math.sqrt(variance! / (2 * n))));
}

export const walkCases: Record<string, MakeCase> = {
  walk: async (peer) => {
    const walk = loadKernels().boxWalk(PATHS, LENGTH, LENGTH, 1);
    walk.x.fill(LENGTH / 2);
    walk.y.fill(LENGTH / 2);
    const steps = Array.from({ length: STEPS }, () => ({ driftX: 0, driftY: 0, spreadX: SPREAD, spreadY: SPREAD }));
    await peer?.ask('walk.setup', { paths: PATHS, steps: STEPS, length: LENGTH, spread: SPREAD });
    return {
      peerName: `numpy ${peer?.versions.numpy ?? ''} SFC64 float32 in blocks`,
      error: worstMoment(2),
      errorLimit: MOST_STANDARD_ERRORS,
      ours: () => walk.walk(steps),
      peer: peer && ((repetitions) => peer.ask<number>('walk.time_walk', { repetitions })),
    };
  },
};
