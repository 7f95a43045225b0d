import type { Peer } from './peer';

/** One timed case. `ours` is called in a loop; `peer` answers the milliseconds of one of its calls. */
export type Prepared = {
  peerName: string;
  /** Error of our answer, checked before anything is timed, and what it may be. */
  error: number;
  errorLimit: number;
  ours: () => void;
  peer: ((repetitions: number) => number | Promise<number>) | null;
  /** Set where the figure is not a ratio of times: a count, a share of bytes; null where nothing can be said. */
  ratio?: number | null;
  ms?: number;
  /** `wall` where waiting counts, on both sides. */
  clock?: 'wall';
  /** The figure is ours as a share of the peer's: less is better. */
  isShare?: true;
};
export type MakeCase = (peer: Peer | null) => Promise<Prepared>;

export type Figure = { case: string; ratio: number | null; peer: string; error: number; ms: number | null };

const ROUNDS = 11;
const WARM_UPS = 2;
/** Each side works at least this long a round, so that the clock and a single interruption weigh little. */
const ROUND_MS = 20;

export const median = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
};

/** Processor time, as on the peer's side: what else runs on the machine then weighs less. Helper threads count as ours. */
export function timeOurs(work: () => void, repetitions: number): number {
  const start = process.cpuUsage();
  for (let k = 0; k < repetitions; k++) work();
  const { user, system } = process.cpuUsage(start);
  return (user + system) / 1e3 / repetitions;
}

function timeWall(work: () => void, repetitions: number): number {
  const start = performance.now();
  for (let k = 0; k < repetitions; k++) work();
  return (performance.now() - start) / repetitions;
}

const repetitionsFor = (ms: number): number => Math.max(1, Math.min(2_000, Math.ceil(ROUND_MS / Math.max(ms, 1e-4))));

/** Interleaves ours and the peer's, A B A B, and takes the median of the paired ratios. */
export async function measure(name: string, { peerName, error, errorLimit, ours, peer, ratio, ms, clock, isShare }: Prepared): Promise<Figure> {
  if (!(error <= errorLimit)) throw new Error(`${name}: error ${error} is above ${errorLimit}; nothing was timed`);
  if (ratio !== undefined) return { case: name, ratio, peer: peerName, error, ms: ms ?? null };
  const time = clock === 'wall' ? timeWall : timeOurs;
  const own = repetitionsFor(Math.min(time(ours, 1), time(ours, 1)));
  const their = peer ? repetitionsFor(Math.min(await peer(1), await peer(1))) : 1;
  const ratios: number[] = [];
  const times: number[] = [];
  for (let round = -WARM_UPS; round < ROUNDS; round++) {
    const ownMs = time(ours, own);
    const theirMs = peer ? await peer(their) : Number.NaN;
    if (round < 0) continue;
    times.push(ownMs);
    ratios.push(isShare ? ownMs / theirMs : theirMs / ownMs);
  }
  return { case: name, ratio: peer ? median(ratios) : null, peer: peer ? peerName : `absent (${peerName})`, error, ms: median(times) };
}
