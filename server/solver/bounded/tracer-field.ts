import type { LossClock } from '../loss';
import type { ResolvedRelease } from '../release-profile';
import { LAND, type CellGrid } from './cell-grid';
import type { ReleaseCells } from './release-cells';

/** One kilogram of one release on the grid, with or without its losses, and its books. */
export class TracerField {
  /** 1/m3 by cell. */
  readonly c: Float64Array;
  released = 0;
  lost = 0;
  left = 0;

  constructor(
    readonly release: ResolvedRelease,
    /** Where what is released at a time goes. */
    private readonly into: (tS: number) => ReleaseCells,
    private readonly grid: CellGrid,
    private readonly loss: LossClock | null,
    /** Of the cloud as the grid lets it start, along each axis, m2. */
    readonly startVarianceM2: number,
  ) {
    this.c = new Float64Array(grid.isWater.length);
  }

  get isEmpty(): boolean {
    return this.released === 0;
  }

  /** Takes up what is released between two times, less what is lost of it by the second: the mean survival by Simpson's rule. */
  add(fromS: number, toS: number, volume: Float64Array): void {
    const { profile } = this.release;
    const amount = profile.released(toS) - profile.released(fromS);
    if (amount === 0) return;
    const from = Math.max(fromS, profile.startS);
    const to = Math.min(toS, profile.stopS);
    const kept = amount * ((this.survival(from, toS) + 4 * this.survival((from + to) / 2, toS) + this.survival(to, toS)) / 6);
    const { cells, shares } = this.into((from + to) / 2);
    for (let n = 0; n < cells.length; n++) this.c[cells[n]!]! += (kept * shares[n]!) / volume[cells[n]!]!;
    this.released += amount;
    this.lost += amount - kept;
  }

  private survival(fromS: number, toS: number): number {
    return this.loss ? Math.exp(this.loss.exposure(fromS) - this.loss.exposure(toS)) : 1;
  }

  /** First-order loss of all that is in the water, exact over any span: it commutes with everything else. */
  decay(fromS: number, toS: number, volume: Float64Array): void {
    const survival = this.survival(fromS, toS);
    if (survival === 1) return;
    const { c } = this;
    this.lost += this.inWater(volume) * (1 - survival);
    for (let k = 0; k < c.length; k++) c[k]! *= survival;
  }

  /** Sum of concentration times volume, compensated (Neumaier 1974). */
  inWater(volume: Float64Array): number {
    const { c, grid } = this;
    let sum = 0;
    let correction = 0;
    for (let k = 0; k < c.length; k++) {
      if (grid.isWater[k] === LAND) continue;
      const value = c[k]! * volume[k]!;
      const next = sum + value;
      correction += Math.abs(sum) >= value ? sum - next + value : value - next + sum;
      sum = next;
    }
    return sum + correction;
  }
}
