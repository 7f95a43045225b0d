import type { Amounts } from './parcel-row';

/**
 * Stirred water of equal tanks in a row through which the whole flow passes: dM/dt = inflow - (Q/V) M, solved exactly
 * for an inflow even over the step; residence V/Q, variance (V/Q)2/tanks.
 * Source: Levenspiel 1972, Chemical Reaction Engineering, chapter 9 (tanks in series).
 */
export class StirredWater {
  private readonly mass: Float64Array;
  private readonly tankM3: number;

  constructor(
    volumeM3: number,
    private readonly tanks: number,
    private readonly layers: number,
  ) {
    this.tankM3 = volumeM3 / tanks;
    this.mass = new Float64Array(tanks * layers);
  }

  /** Takes in `amount` over dt and overwrites it with what leaves. */
  pass(amount: Amounts, dischargeM3s: number, dtS: number): void {
    const k = dischargeM3s / this.tankM3;
    const kept = Math.exp(-k * dtS);
    // Share of an even inflow that is still there at the end of the step.
    const late = k * dtS < 1e-8 ? 1 : -Math.expm1(-k * dtS) / (k * dtS);
    for (let layer = 0; layer < this.layers; layer++)
      for (let i = layer * this.tanks; i < (layer + 1) * this.tanks; i++) {
        const before = this.mass[i]!;
        this.mass[i] = before * kept + amount[layer]! * late;
        amount[layer] = Math.max(0, before + amount[layer]! - this.mass[i]!);
      }
  }

  total(layer: number): number {
    let sum = 0;
    for (let i = layer * this.tanks; i < (layer + 1) * this.tanks; i++) sum += this.mass[i]!;
    return sum;
  }

  lose(layer: number, survival: number): void {
    for (let i = layer * this.tanks; i < (layer + 1) * this.tanks; i++) this.mass[i]! *= survival;
  }
}
