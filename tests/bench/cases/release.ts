import { gradedAges, type SteadyRelease } from '../../../server/solver/kernels/release';
import { loadKernels } from '../../../server/workers/load-kernels';
import { plainRelease } from '../../numerics/oracles/steady-release';
import { largestError } from '../compare';
import type { MakeCase } from '../harness';

/** A source of six hours that still runs. */
const release: SteadyRelease = { currentMps: 0.5, alongM2s: 1.5, acrossM2s: 0.3, startSigmaM: 10, youngestS: 0, oldestS: 21_600, decayPerS: 1e-5, rateKgS: 1, depthM: 2 };
const POINTS = 1000;
const x = Float64Array.from({ length: POINTS }, (_, k) => 11_500 * ((k * 0.618034) % 1));
const y = Float64Array.from({ length: POINTS }, (_, k) => 150 * (((k * 0.7548777) % 1) - 0.5));
const ACCURACY = 1e-6;

function exactAt(every: number): Float64Array {
  return x.filter((_, k) => k % every === 0).map((at, k) => plainRelease(at, y[k * every]!, release));
}

/** Error of the graded clouds as a share of the peak. */
function gradedError(count: number, every: number, exact: Float64Array): number {
  const { agesS, weightsS } = gradedAges(release, count);
  const { currentMps: u, alongM2s, acrossM2s, startSigmaM: s0, decayPerS, rateKgS, depthM } = release;
  const sums = exact.map((_, point) => {
    let sum = 0;
    for (let n = 0; n < count; n++) {
      const age = agesS[n]!;
      const [sx2, sy2] = [s0 ** 2 + 2 * alongM2s * age, s0 ** 2 + 2 * acrossM2s * age];
      sum += (weightsS[n]! * Math.exp(-((x[point * every]! - u * age) ** 2) / (2 * sx2) - y[point * every]! ** 2 / (2 * sy2) - decayPerS * age)) / Math.sqrt(sx2 * sy2);
    }
    return (sum * rateKgS) / (2 * Math.PI * depthM);
  });
  return largestError(sums, exact);
}

export const releaseCases: Record<string, MakeCase> = {
  'release-points': async (peer) => {
    const kernel = loadKernels().releasePoints();
    const out = new Float64Array(POINTS);
    kernel.evaluate(out, x, y, release);
    await peer?.ask('release.setup', { x: [...x], y: [...y], u: release.currentMps, kx: release.alongM2s, ky: release.acrossM2s, s0: release.startSigmaM, oldest: release.oldestS, decay: release.decayPerS, rate: release.rateKgS, depth: release.depthM });
    const error = peer ? largestError(out, await peer.array('release.result')) : largestError(out.filter((_, k) => k % 20 === 0), exactAt(20));
    return {
      peerName: `scipy ${peer?.versions.scipy ?? ''} quad`,
      error,
      errorLimit: ACCURACY,
      ours: () => kernel.evaluate(out, x, y, release),
      peer: peer && ((repetitions) => peer.ask<number>('release.time_points', { repetitions })),
    };
  },
  'release-nodes': async () => {
    const every = 5;
    const exact = exactAt(every);
    let count = 16;
    while (gradedError(count, every, exact) > ACCURACY) count++;
    return { peerName: 'none: clouds needed for 1e-6 of the peak', error: gradedError(count, every, exact), errorLimit: ACCURACY, ours: () => undefined, peer: null, ratio: count };
  },
};
