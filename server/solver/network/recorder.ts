import type { Chain } from './chain';
import { Reader } from './read';

/** A place to be watched: x along the path, the reach it belongs to, and weights over the tubes (the section mean: their shares). */
export type Station = { readonly xM: number; readonly reach: number; readonly weights: Float64Array };

/** Concentrations per kilogram at one station, step by step, for each layer. */
export type StationSeries = { readonly station: Station; readonly layers: readonly Float64Array[] };

/** Section by section at one time: places, reach of the water, and the tubes' concentrations of the layer shown. */
export type Snapshot = { readonly timeS: number; readonly xM: Float64Array; readonly stage: Int16Array; readonly values: Float32Array };

/** Where all of the amount is after each step, of each layer. */
export type BookRows = { readonly inWater: Float64Array[]; readonly left: Float64Array[]; readonly lost: Float64Array };

/** Sections kept of one snapshot; parcels below this share of the largest concentration are not. */
const MOST_SECTIONS = 300;
const SHOWN_SHARE = 1e-10;

export class StationRecorder {
  readonly series: StationSeries[];
  private readonly reader = new Reader();

  constructor(stations: readonly Station[], steps: number, layers: number) {
    this.series = stations.map((station) => ({ station, layers: Array.from({ length: layers }, () => new Float64Array(steps + 1)) }));
  }

  record(chains: readonly Chain[], step: number): void {
    for (const { station, layers } of this.series)
      for (const chain of chains) {
        if (!holds(chain, station.reach)) continue;
        this.reader.find(chain, station.xM, station.reach);
        if (this.reader.count === 0) continue;
        layers.forEach((values, layer) => {
          let sum = 0;
          for (let j = 0; j < chain.tubes.count; j++) if (station.weights[j]! > 0) sum += station.weights[j]! * this.reader.lane(chain, layer * chain.tubes.count + j);
          values[step] = sum;
        });
        break;
      }
  }
}

/** Whether a reach lies in the stretch of a chain. */
function holds(chain: Chain, r: number): boolean {
  const { x0, x1 } = chain.flow.reaches[r]!;
  const middle = (x0 + x1) / 2;
  return middle > chain.limits.topM && middle < chain.limits.endM;
}

/** The sections of all chains, moved on by `advance` from the time of the step to the time of the snapshot. */
export function snapshotOf(chains: readonly Chain[], layer: number, timeS: number, atS: number): Snapshot {
  const rows = chains.flatMap((chain) => shownParcels(chain).map((p) => ({ chain, p })));
  const stride = Math.max(1, Math.ceil(rows.length / MOST_SECTIONS));
  const kept = rows.filter((_, i) => i % stride === 0 || i === rows.length - 1);
  const n = chains[0]!.tubes.count;
  const xM = new Float64Array(kept.length);
  const stage = new Int16Array(kept.length);
  const values = new Float32Array(kept.length * n);
  kept.forEach(({ chain, p }, i) => {
    xM[i] = chain.flow.advance(chain.centre(p), atS, timeS - atS);
    stage[i] = chain.stage[p]!;
    for (let j = 0; j < n; j++) values[i * n + j] = chain.value[p * chain.lanes + layer * n + j]!;
  });
  return { timeS, xM, stage, values };
}

function shownParcels(chain: Chain): number[] {
  const n = chain.tubes.count;
  let peak = 0;
  for (let l = chain.from * chain.lanes; l < chain.to * chain.lanes; l++) peak = Math.max(peak, chain.value[l]!);
  const isShown = (p: number): boolean => {
    for (let l = p * chain.lanes; l < p * chain.lanes + n; l++) if (chain.value[l]! > SHOWN_SHARE * peak) return true;
    return false;
  };
  let [from, to] = [chain.from, chain.to];
  while (from < to && !isShown(from)) from++;
  while (to > from && !isShown(to - 1)) to--;
  return Array.from({ length: to - from }, (_, i) => from + i);
}

/** Largest concentration met at fixed sections of the path, tube by tube, of the layer shown. */
export class EnvelopeRecorder {
  private readonly values: Float64Array;
  private readonly reader = new Reader();
  /** What had been met by some times, ascending. */
  private readonly kept: { timeS: number; values: Float32Array }[] = [];

  /** @param keepTimesS  ascending: times whose state is kept, at the first step not before each */
  constructor(
    readonly stations: readonly { xM: number; reach: number }[],
    private readonly tubes: number,
    private readonly layer: number,
    private readonly keepTimesS: readonly number[],
  ) {
    this.values = new Float64Array(stations.length * tubes);
  }

  /** Largest so far at a time; between kept times the logarithm is straight, as a front nears. All of it after the last. */
  upTo(tS: number): Float64Array {
    const next = this.kept.findIndex((item) => item.timeS >= tS);
    if (next < 0) return this.values;
    const [before, after] = [this.kept[next - 1], this.kept[next]!];
    const share = before ? (tS - before.timeS) / (after.timeS - before.timeS) : 1;
    return Float64Array.from(after.values, (value, i) => {
      const early = before?.values[i] ?? 0;
      return share === 1 || value === early ? value : early > 0 ? early ** (1 - share) * value ** share : 0;
    });
  }

  record(chains: readonly Chain[], tS: number): void {
    this.raise(chains);
    if (this.kept.length < this.keepTimesS.length && tS >= this.keepTimesS[this.kept.length]! - 1e-6) {
      this.kept.push({ timeS: tS, values: Float32Array.from(this.values) });
      // A step longer than the gap between two wanted times serves both.
      while (this.kept.length < this.keepTimesS.length && this.keepTimesS[this.kept.length]! <= tS) this.kept.push(this.kept[this.kept.length - 1]!);
    }
  }

  private raise(chains: readonly Chain[]): void {
    for (const chain of chains) {
      if (chain.isEmpty) continue;
      const [top, end] = [chain.face[chain.from]!, chain.face[chain.to]!];
      for (let i = this.firstFrom(top); i < this.stations.length && this.stations[i]!.xM <= end; i++) {
        const { xM, reach } = this.stations[i]!;
        if (!holds(chain, reach)) continue;
        this.reader.find(chain, xM, reach);
        if (this.reader.count === 0) continue;
        for (let j = 0; j < this.tubes; j++) {
          const value = this.reader.lane(chain, this.layer * this.tubes + j);
          if (value > this.values[i * this.tubes + j]!) this.values[i * this.tubes + j] = value;
        }
      }
    }
  }

  private firstFrom(xM: number): number {
    let low = 0;
    let high = this.stations.length;
    while (low < high) {
      const mid = (low + high) >> 1;
      if (this.stations[mid]!.xM < xM) low = mid + 1;
      else high = mid;
    }
    return low;
  }
}
