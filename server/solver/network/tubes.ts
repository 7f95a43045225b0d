import { etaOf } from '../river/path';
import type { Bank } from '../../../shared/schemas/basics';
import { betweenWalls } from '../physics/two-walls';

/** A step of more than this times the tubes squared leaves exp(-4 pi2) = 1e-17 of any difference. */
const EVEN_AFTER = 4;

/**
 * Stream tubes: nodes at even shares of the discharge from the left bank (0) to the right (1), each standing for the
 * tube half-way to its neighbours, so that the tubes at the banks are half as wide and end nodes lie on the banks.
 * Source: Yotsukura & Sayre 1976, Water Resour. Res. 12: 695 (cumulative discharge).
 */
export class Tubes {
  /** Share of the discharge in each tube; they add to 1. */
  readonly share: Float64Array;
  readonly spacing: number;
  private strength = -1;
  private implicit = 0.5;
  private readonly upper: Float64Array;
  private readonly pivot: Float64Array;
  private readonly work: Float64Array;

  constructor(readonly count: number) {
    this.spacing = 1 / (count - 1);
    this.upper = new Float64Array(count);
    this.pivot = new Float64Array(count);
    this.work = new Float64Array(count);
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
   */
  mix(value: Float64Array, at: number, strength: number): void {
    const n = this.count;
    if (isEven(value, at, n)) return;
    if (strength > EVEN_AFTER * n * n) return this.level(value, at);
    if (strength !== this.strength) this.factor(strength);
    const { upper, pivot, work } = this;
    const [a, e] = [this.implicit * strength, (1 - this.implicit) * strength];
    let before = value[at]!;
    work[0] = (before + 2 * e * (value[at + 1]! - before)) * pivot[0]!;
    for (let j = 1; j < n - 1; j++) {
      const now = value[at + j]!;
      work[j] = (now + e * (before - 2 * now + value[at + j + 1]!) + a * work[j - 1]!) * pivot[j]!;
      before = now;
    }
    const last = value[at + n - 1]!;
    let next = (last + 2 * e * (before - last) + 2 * a * work[n - 2]!) * pivot[n - 1]!;
    value[at + n - 1] = next;
    for (let j = n - 2; j >= 0; j--) {
      next = work[j]! - upper[j]! * next;
      value[at + j] = next;
    }
  }

  private level(value: Float64Array, at: number): void {
    let mean = 0;
    for (let j = 0; j < this.count; j++) mean += this.share[j]! * value[at + j]!;
    value.fill(mean, at, at + this.count);
  }

  /** Factors of the tridiagonal system; end rows carry the whole exchange of their half tube: 2 (C1 - C0). */
  private factor(strength: number): void {
    this.strength = strength;
    this.implicit = Math.max(0.5, 1 - 1 / (2 * strength));
    const a = this.implicit * strength;
    this.pivot[0] = 1 / (1 + 2 * a);
    this.upper[0] = -2 * a * this.pivot[0];
    for (let j = 1; j < this.count; j++) {
      const lower = j === this.count - 1 ? 2 * a : a;
      this.pivot[j] = 1 / (1 + 2 * a + lower * this.upper[j - 1]!);
      this.upper[j] = -a * this.pivot[j]!;
    }
  }
}

/** Nothing to mix: the section is even to rounding. */
function isEven(value: Float64Array, at: number, count: number): boolean {
  const first = value[at]!;
  for (let j = at + 1; j < at + count; j++) if (Math.abs(value[j]! - first) > 1e-13 * first) return false;
  return true;
}
