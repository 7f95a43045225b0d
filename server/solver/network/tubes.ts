import { etaOf } from '../river/path';
import type { Bank } from '../../../shared/schemas/basics';
import { betweenWalls } from '../physics/two-walls';

/**
 * Stream tubes: nodes at even shares of the discharge from the left bank (0) to the right (1), each standing for the
 * tube half-way to its neighbours, so that the tubes at the banks are half as wide and end nodes lie on the banks.
 * Source: Yotsukura & Sayre 1976, Water Resour. Res. 12: 695 (cumulative discharge).
 */
export class Tubes {
  /** Share of the discharge in each tube; they add to 1. */
  readonly share: Float64Array;
  readonly spacing: number;

  constructor(readonly count: number) {
    this.spacing = 1 / (count - 1);
    this.share = new Float64Array(count).fill(this.spacing);
    this.share[0] = this.share[count - 1] = this.spacing / 2;
  }

  /** Shares of an amount put in at a place across, spread by `tau` (variance over twice the width squared). */
  sourceShares(bank: Bank, tau: number): Float64Array {
    const out = new Float64Array(this.count);
    const eta = etaOf(bank);
    // A spread below that of a tube itself cannot be told from none.
    if (tau < 0.1 * this.spacing ** 2) {
      this.spread(out, eta);
      return out;
    }
    let sum = 0;
    for (let j = 0; j < this.count; j++) sum += out[j] = this.share[j]! * betweenWalls(j * this.spacing, eta, tau);
    for (let j = 0; j < this.count; j++) out[j]! /= sum;
    return out;
  }

  /** Weights by which the nodes give the value at a place across. */
  weightsAt(bank: Bank): Float64Array {
    const out = new Float64Array(this.count);
    this.spread(out, etaOf(bank));
    return out;
  }

  private spread(out: Float64Array, eta: number): void {
    const at = eta / this.spacing;
    const low = Math.min(this.count - 2, Math.floor(at));
    out[low] = 1 - (at - low);
    out[low + 1] = at - low;
  }

  /**
   * Concentrations after the water takes the stretch [low, low + share] of a joined river whose other water is clean:
   * each tube of the joined river gets what of the old tubes falls into it. The section mean becomes `share` times the
   * old one, exactly. `out` takes this.count numbers, `value` holds as many from `at`.
   */
  join(out: Float64Array, value: Float64Array, at: number, low: number, share: number): void {
    const edge = (j: number): number => Math.min(1, Math.max(0, (j - 0.5) * this.spacing));
    out.fill(0, 0, this.count);
    for (let i = 0; i < this.count; i++) {
      const [a, b] = [low + share * edge(i), low + share * edge(i + 1)];
      const first = Math.max(0, Math.floor(a / this.spacing - 0.5));
      for (let j = first; j < this.count && edge(j) < b; j++) {
        const overlap = Math.min(b, edge(j + 1)) - Math.max(a, edge(j));
        if (overlap > 0) out[j]! += (value[at + i]! * overlap) / this.share[j]!;
      }
    }
  }

  /**
   * One implicit step of mixing across: dC/dt = (e/W2) d2C/deta2, no flux through the banks, in place. Crank-Nicolson
   * where that keeps values positive, else as implicit as that needs. Keeps the sum of share times value.
   *
   * @param strength  (e/W2) dt / spacing^2
   * @param scratch   2 * count numbers, overwritten
   */
  mix(value: Float64Array, at: number, strength: number, scratch: Float64Array): void {
    const n = this.count;
    const implicit = Math.max(0.5, 1 - 1 / (2 * strength));
    const [a, e] = [implicit * strength, (1 - implicit) * strength];
    // Thomas algorithm; end rows carry the whole exchange of their half tube: 2 (C1 - C0).
    let before = value[at]!;
    scratch[0] = (-2 * a) / (1 + 2 * a);
    scratch[n] = (before + 2 * e * (value[at + 1]! - before)) / (1 + 2 * a);
    for (let j = 1; j < n; j++) {
      const now = value[at + j]!;
      const isEnd = j === n - 1;
      const right = isEnd ? before : value[at + j + 1]!;
      const lower = isEnd ? 2 * a : a;
      const pivot = 1 / (1 + 2 * a + lower * scratch[j - 1]!);
      scratch[j] = -a * pivot;
      scratch[n + j] = (now + e * (before - 2 * now + right) + lower * scratch[n + j - 1]!) * pivot;
      before = now;
    }
    value[at + n - 1] = scratch[2 * n - 1]!;
    for (let j = n - 2; j >= 0; j--) value[at + j] = scratch[n + j]! - scratch[j]! * value[at + j + 1]!;
  }
}
