import type { Tubes } from './tubes';

/** Amounts by layer. */
export type Amounts = Float64Array;

/**
 * The arrays of a row of water parcels, with room at both ends: parcels [from, to), faces [from, to].
 * Lanes of a parcel: tubes of the first layer, then of the second (the same cloud with losses).
 */
export class ParcelRow {
  from = 0;
  to = 0;
  protected capacity = 512;
  /** Upper face of each parcel, m; `face[to]` is the lower face of the last. */
  face: Float64Array = new Float64Array(this.capacity + 1);
  volume: Float64Array = new Float64Array(this.capacity);
  /** Reach whose discharge the volume of a parcel goes by. */
  stage = new Int16Array(this.capacity);
  /** Concentrations, parcels x lanes, lane fastest. */
  value: Float64Array;
  protected rhs: Float64Array;
  protected upper = new Float64Array(this.capacity);
  protected conductance = new Float64Array(this.capacity + 1);
  protected explicit = new Float64Array(this.capacity + 1);
  readonly lanes: number;

  constructor(
    readonly tubes: Tubes,
    readonly layers: number,
  ) {
    this.lanes = tubes.count * layers;
    this.value = new Float64Array(this.capacity * this.lanes);
    this.rhs = new Float64Array(this.capacity * this.lanes);
  }

  get isEmpty(): boolean {
    return this.to === this.from;
  }

  centre(p: number): number {
    return (this.face[p]! + this.face[p + 1]!) / 2;
  }

  massOf(p: number, layer: number): number {
    let sum = 0;
    const at = p * this.lanes + layer * this.tubes.count;
    for (let j = 0; j < this.tubes.count; j++) sum += this.tubes.share[j]! * this.value[at + j]!;
    return sum * this.volume[p]!;
  }

  /** Amount of a layer between two places. */
  mass(layer: number, fromM = -Infinity, toM = Infinity): number {
    let sum = 0;
    for (let p = this.from; p < this.to; p++) {
      const x = this.centre(p);
      if (x >= fromM && x < toM) sum += this.massOf(p, layer);
    }
    return sum;
  }

  /** Multiplies the layer with losses by what survives. */
  lose(layer: number, survival: number): void {
    const n = this.tubes.count;
    for (let p = this.from; p < this.to; p++) for (let l = p * this.lanes + layer * n; l < p * this.lanes + (layer + 1) * n; l++) this.value[l]! *= survival;
  }

  /** Largest concentration of the first layer in a parcel. */
  protected largestAt(p: number): number {
    let most = 0;
    for (let l = p * this.lanes; l < p * this.lanes + this.tubes.count; l++) if (this.value[l]! > most) most = this.value[l]!;
    return most;
  }

  /** Makes room at both ends. */
  protected recentre(): void {
    const count = this.to - this.from;
    const capacity = count * 3 > this.capacity ? 2 * this.capacity : this.capacity;
    const start = (capacity - count) >> 1;
    const moved = (array: Float64Array, length: number, per: number, extra = 0): Float64Array => {
      const out = new Float64Array(length);
      out.set(array.subarray(this.from * per, this.to * per + extra), start * per);
      return out;
    };
    this.face = moved(this.face, capacity + 1, 1, 1);
    this.volume = moved(this.volume, capacity, 1);
    this.value = moved(this.value, capacity * this.lanes, this.lanes);
    const stage = new Int16Array(capacity);
    stage.set(this.stage.subarray(this.from, this.to), start);
    this.stage = stage;
    if (capacity !== this.capacity) {
      this.rhs = new Float64Array(capacity * this.lanes);
      this.upper = new Float64Array(capacity);
      this.conductance = new Float64Array(capacity + 1);
      this.explicit = new Float64Array(capacity + 1);
    }
    this.capacity = capacity;
    this.from = start;
    this.to = start + count;
  }
}
