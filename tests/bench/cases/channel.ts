import { loadKernels } from '../../../server/workers/load-kernels';
import { plainChannelStep } from '../../numerics/oracles/channel-step';
import { largestError } from '../compare';
import type { MakeCase } from '../harness';

const CELLS = 2000;
const TUBES = 16;
const NUMBER = 0.7;
const SURVIVAL = 0.9999;
const COMPARED_STEPS = 20;

const start = (i: number, k: number): number => Math.exp(-(((i - 0.2 * CELLS) / (0.02 * CELLS)) ** 2)) * (1 + k);

export const channelCases: Record<string, MakeCase> = {
  channel: async (peer) => {
    const shares = Array.from({ length: CELLS }, (_, i) => Array.from({ length: TUBES - 1 }, (_, k) => 0.15 + 0.1 * Math.sin(0.01 * i + k)));
    const faces = new Float64Array(CELLS + 1).fill(NUMBER);
    const channel = loadKernels().channelTubes(CELLS, TUBES);
    channel.setDispersion(faces);
    channel.setExchange(Float64Array.from(shares.flat()));
    for (let i = 0; i < CELLS; i++) for (let k = 0; k < TUBES; k++) channel.add(i, k, start(i, k));
    const inflow = new Float64Array(TUBES);
    for (let n = 0; n < COMPARED_STEPS; n++) channel.step(inflow, SURVIVAL);
    const out = new Float64Array(CELLS * TUBES);
    channel.read(out);
    let exact: ArrayLike<number>;
    if (peer) {
      await peer.ask('channel.setup', { cells: CELLS, tubes: TUBES, number: NUMBER, share: shares, survival: SURVIVAL });
      exact = await peer.array('channel.result', { steps: COMPARED_STEPS });
    } else {
      let plain = Array.from({ length: CELLS }, (_, i) => Array.from({ length: TUBES }, (_, k) => start(i, k)));
      for (let n = 0; n < COMPARED_STEPS; n++) plain = plainChannelStep(plain, [...inflow], faces, shares, SURVIVAL).c;
      exact = plain.flat();
    }
    return {
      peerName: `scipy ${peer?.versions.scipy ?? ''} dgttrs, prefactored, and numpy`,
      error: largestError(out, exact),
      errorLimit: 1e-12,
      ours: () => channel.step(inflow, SURVIVAL),
      peer: peer && ((repetitions) => peer.ask<number>('channel.time_steps', { repetitions })),
    };
  },
};
