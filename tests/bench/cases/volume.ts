import { writeFileSync } from 'node:fs';
import { loadKernels } from '../../../server/workers/load-kernels';
import { plainVolumeStep, type VolumeProblem } from '../../numerics/oracles/volume-step';
import { roughBasin } from '../../numerics/oracles/rough-basin';
import { largestError } from '../compare';
import type { MakeCase, Prepared } from '../harness';
import type { Peer } from '../peer';

/** Steps after which the mass is compared: six hours of ten-second steps. */
const BOOK_STEPS = 2160;
const MOST_DRIFT = 1e-11;
const COMPARED_STEPS = 10;

const raw = (values: Float64Array): Uint8Array => new Uint8Array(values.buffer, values.byteOffset, values.byteLength);

async function prepare(peer: Peer | null, n: number): Promise<Prepared> {
  const problem: VolumeProblem = { ...roughBasin(n, n, true), isTrapezoidal: false };
  const start = new Float64Array(n * n).map((_, k) => problem.isWater[k]! * Math.exp(-(((k % n) / n - 0.4) ** 2 + (k / n / n - 0.5) ** 2) / 0.02));
  const grid = loadKernels().volumeGrid(n, n, problem.isWater);
  grid.setFlow(problem.flowX, problem.flowY);
  grid.setDiffusion(problem.diffusionX, problem.diffusionY, 'backward');
  start.forEach((value, k) => (grid.c[grid.index(k % n, Math.floor(k / n))] = value));
  const before = grid.total();
  for (let k = 0; k < COMPARED_STEPS; k++) grid.step();
  const ours = start.map((_, k) => grid.c[grid.index(k % n, Math.floor(k / n))]!);

  let exact: Float64Array = start;
  if (peer) {
    const { flowX, flowY, diffusionX, diffusionY } = closeShores(problem);
    for (const [name, values] of Object.entries({ flowX, flowY, diffusionX, diffusionY, c: start, water: Float64Array.from(problem.isWater) })) writeFileSync(peer.path(name), raw(values));
    await peer.ask('volume.setup', { n, folder: peer.path('.') });
    exact = await peer.array('volume.result', { steps: COMPARED_STEPS });
  } else for (let k = 0; k < COMPARED_STEPS; k++) exact = plainVolumeStep(exact, problem, k % 2 === 0).c;

  for (let k = COMPARED_STEPS; k < BOOK_STEPS; k++) grid.step();
  const drift = Math.abs(grid.total() + grid.lost - before) / before;
  const difference = largestError(ours, exact);
  // Ten steps of a few dozen roundings: 1e-13 of the peak.
  if (!(difference < 1e-13)) throw new Error(`The step differs from the peer's by ${difference} of the peak`);
  return {
    peerName: `numpy ${peer?.versions.numpy ?? ''} limited sweeps and scipy dgttrs`,
    error: drift,
    errorLimit: MOST_DRIFT,
    ours: () => grid.step(),
    peer: peer && ((repetitions) => peer.ask<number>('volume.time_steps', { repetitions })),
  };
}

/** The peer has no mask: faces at land get flow and diffusion 0, and outer faces no diffusion. */
function closeShores({ nx, ny, isWater, flowX, flowY, diffusionX, diffusionY }: VolumeProblem) {
  const wet = (i: number, j: number): boolean => i >= 0 && i < nx && j >= 0 && j < ny && isWater[j * nx + i] === 1;
  const outside = (i: number, j: number): boolean => i < 0 || i >= nx || j < 0 || j >= ny;
  const closed = (values: Float64Array, width: number, axis: number, withEnds: boolean): Float64Array =>
    values.map((value, k) => {
      const [i, j] = [k % width, Math.floor(k / width)];
      const [a, b] = axis === 0 ? [i - 1, j] : [i, j - 1];
      const isOpen = (wet(i, j) || (withEnds && outside(i, j))) && (wet(a, b) || (withEnds && outside(a, b)));
      return isOpen ? value : 0;
    });
  return { flowX: closed(flowX, nx + 1, 0, true), flowY: closed(flowY, nx, 1, true), diffusionX: closed(diffusionX, nx + 1, 0, false), diffusionY: closed(diffusionY, nx, 1, false) };
}

export const volumeCases: Record<string, MakeCase> = { 'fv-f64-256': (peer) => prepare(peer, 256), 'fv-f64-512': (peer) => prepare(peer, 512) };
