import type { RiverWater } from '../../../shared/schemas/estimate';
import { reachStates, type ReachState } from '../river/reach-state';

/** Points of a table of hydraulics between the smallest and the largest discharge. */
const POINTS = 48;

/**
 * Area Q/U, dispersion and rate of mixing across (e/W2) of one reach against discharge: straight lines on log-log paper
 * between tabled discharges, so power laws come out exactly. The area rises with the discharge, hence has an inverse.
 */
export class Hydraulics {
  private readonly logQ: Float64Array;
  private readonly logArea: Float64Array;
  private readonly logDispersion: Float64Array;
  private readonly logMixing: Float64Array;
  private readonly step: number;

  constructor(water: RiverWater, steady: ReachState, fromM3s: number, toM3s: number) {
    const count = toM3s > fromM3s * (1 + 1e-9) ? POINTS : 1;
    const { reach } = steady;
    this.logQ = new Float64Array(count);
    this.logArea = new Float64Array(count);
    this.logDispersion = new Float64Array(count);
    this.logMixing = new Float64Array(count);
    this.step = count > 1 ? Math.log(toM3s / fromM3s) / (count - 1) : 1;
    for (let i = 0; i < count; i++) {
      const dischargeM3s = fromM3s * Math.exp(i * this.step);
      const flow = { ...water.flow, discharges: [{ reachId: reach.id, dischargeM3s }] };
      const state = count === 1 ? steady : reachStates({ ...water, reaches: [reach], flow })[0]!;
      this.logQ[i] = Math.log(dischargeM3s);
      this.logArea[i] = Math.log(dischargeM3s / state.speedMps);
      this.logDispersion[i] = Math.log(state.dispersionM2s);
      this.logMixing[i] = Math.log(state.transverseM2s / state.widthM ** 2);
    }
    // Velocity laws with an exponent of 1 or more would let the area fall: hold it level instead.
    for (let i = 1; i < count; i++) this.logArea[i] = Math.max(this.logArea[i]!, this.logArea[i - 1]! + 1e-6 * this.step);
  }

  areaM2(dischargeM3s: number): number {
    return this.read(this.logArea, dischargeM3s);
  }

  dispersionM2s(dischargeM3s: number): number {
    return this.read(this.logDispersion, dischargeM3s);
  }

  /** e/W2, 1/s. */
  mixingPerS(dischargeM3s: number): number {
    return this.read(this.logMixing, dischargeM3s);
  }

  dischargeM3s(areaM2: number): number {
    const n = this.logArea.length;
    const wanted = Math.log(areaM2);
    let low = 0;
    let high = n - 2;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (this.logArea[mid]! <= wanted) low = mid;
      else high = mid - 1;
    }
    const share = (wanted - this.logArea[low]!) / (this.logArea[low + 1]! - this.logArea[low]!);
    return Math.exp(this.logQ[low]! + share * this.step);
  }

  /** Largest celerity of a change of discharge, dQ/dA, m/s. */
  get largestCelerityMps(): number {
    let most = 0;
    for (let i = 1; i < this.logQ.length; i++) {
      const dQ = Math.exp(this.logQ[i]!) - Math.exp(this.logQ[i - 1]!);
      most = Math.max(most, dQ / (Math.exp(this.logArea[i]!) - Math.exp(this.logArea[i - 1]!)));
    }
    return most;
  }

  private read(table: Float64Array, dischargeM3s: number): number {
    if (table.length === 1) return Math.exp(table[0]!);
    const at = (Math.log(dischargeM3s) - this.logQ[0]!) / this.step;
    const i = Math.min(table.length - 2, Math.max(0, Math.floor(at)));
    return Math.exp(table[i]! + (at - i) * (table[i + 1]! - table[i]!));
  }
}
