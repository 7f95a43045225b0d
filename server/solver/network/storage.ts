import { DROP_SHARE, type Chain } from './chain';
import type { PathFlow } from './path-flow';

/**
 * Dead zones beside the stream. They stand still while the parcels pass: cells along the path, each with the tubes of
 * the parcels, exchange with the water that stands beside them after every step:
 *   dC/dt = a (Cs - C),  dCs/dt = a (A/As) (C - Cs),
 * solved exactly for each pair. Source: Bencala & Walters 1983, Water Resour. Res. 19: 718.
 */
export class Storage {
  /** Upper faces of the cells, ascending; the last is the lower face of the last cell. */
  private readonly face: number[] = [];
  private readonly volume: number[] = [];
  private readonly rate: number[] = [];
  private readonly value: Float64Array;
  /** Cells that hold anything: [low, high). */
  private low = 0;
  private high = 0;

  constructor(
    private readonly chain: Chain,
    flow: PathFlow,
    /** Faces of the cells: those on which the parcels stand after a step where the flow is steady. */
    faces: readonly number[],
  ) {
    for (let k = 0; k + 1 < faces.length; k++) {
      const middle = (faces[k]! + faces[k + 1]!) / 2;
      const { state } = flow.reaches[flow.reachAt(middle)]!;
      const zone = state.reach.storage;
      this.face.push(faces[k]!);
      this.volume.push(zone ? (zone.areaRatio * state.dischargeM3s * (faces[k + 1]! - faces[k]!)) / state.speedMps : 0);
      this.rate.push(zone ? zone.exchangePerS : 0);
    }
    this.face.push(faces[faces.length - 1] ?? 0);
    this.value = new Float64Array(this.volume.length * chain.lanes);
  }

  /** Where parcels have to stand for what the zones hold; null where they are empty. */
  get coverFromM(): number | null {
    return this.high > this.low ? this.face[this.low]! : null;
  }

  get coverToM(): number | null {
    return this.high > this.low ? this.face[this.high]! : null;
  }

  exchange(dtS: number): void {
    const { chain } = this;
    if (this.volume.length === 0) return;
    let k = this.cellAt(chain.face[chain.from]!);
    let peak = 0;
    for (let p = chain.from; p < chain.to; p++) {
      const [a, b] = [chain.face[p]!, chain.face[p + 1]!];
      while (k > 0 && this.face[k]! > a) k--;
      for (; k < this.volume.length && this.face[k]! < b; k++) {
        const overlap = Math.min(b, this.face[k + 1]!) - Math.max(a, this.face[k]!);
        if (this.volume[k]! > 0 && overlap > 1e-9 * (b - a)) peak = Math.max(peak, this.pair(p, k, overlap, dtS));
        if (this.face[k + 1]! >= b) break;
      }
    }
    this.trim(peak * DROP_SHARE);
  }

  /** One parcel and one cell over the length they share; gives the larger concentration of the first layer's tubes. */
  private pair(p: number, k: number, overlapM: number, dtS: number): number {
    const { chain } = this;
    const inWater = overlapM / (chain.face[p + 1]! - chain.face[p]!);
    const inZone = overlapM / (this.face[k + 1]! - this.face[k]!);
    const v = inWater * chain.volume[p]!;
    const w = inZone * this.volume[k]!;
    const gone = -Math.expm1(-this.rate[k]! * (1 + v / w) * dtS);
    let most = 0;
    for (let l = 0; l < chain.lanes; l++) {
      const i = p * chain.lanes + l;
      const s = k * chain.lanes + l;
      // What passes until both are even: v w/(v + w) (C - Cs).
      const moved = ((gone * v * w) / (v + w)) * (chain.value[i]! - this.value[s]!);
      chain.value[i]! -= moved / chain.volume[p]!;
      this.value[s]! += moved / this.volume[k]!;
      if (l < chain.tubes.count) most = Math.max(most, chain.value[i]!, this.value[s]!);
    }
    if (most > 0) {
      if (this.high === this.low) [this.low, this.high] = [k, k + 1];
      this.low = Math.min(this.low, k);
      this.high = Math.max(this.high, k + 1);
    }
    return most;
  }

  private cellAt(xM: number): number {
    let low = 0;
    let high = this.volume.length - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (this.face[mid]! <= xM) low = mid;
      else high = mid - 1;
    }
    return low;
  }

  private trim(least: number): void {
    const isFaint = (k: number): boolean => {
      for (let l = k * this.chain.lanes; l < k * this.chain.lanes + this.chain.tubes.count; l++) if (this.value[l]! > least) return false;
      return true;
    };
    while (this.high > this.low && isFaint(this.low)) this.drop(this.low++);
    while (this.high > this.low && isFaint(this.high - 1)) this.drop(--this.high);
  }

  private drop(k: number): void {
    this.value.fill(0, k * this.chain.lanes, (k + 1) * this.chain.lanes);
  }

  private massOf(k: number, layer: number): number {
    let sum = 0;
    const at = k * this.chain.lanes + layer * this.chain.tubes.count;
    for (let j = 0; j < this.chain.tubes.count; j++) sum += this.chain.tubes.share[j]! * this.value[at + j]!;
    return sum * this.volume[k]!;
  }

  /** Amount of a layer in the zones between two places. */
  mass(layer: number, fromM = -Infinity, toM = Infinity): number {
    let sum = 0;
    for (let k = this.low; k < this.high; k++) {
      const middle = (this.face[k]! + this.face[k + 1]!) / 2;
      if (middle >= fromM && middle < toM) sum += this.massOf(k, layer);
    }
    return sum;
  }

  lose(layer: number, survival: number): void {
    const { lanes, tubes } = this.chain;
    for (let k = this.low; k < this.high; k++) for (let j = 0; j < tubes.count; j++) this.value[k * lanes + layer * tubes.count + j]! *= survival;
  }
}
