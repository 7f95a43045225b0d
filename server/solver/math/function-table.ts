import { gaussLegendre } from './quadrature';

/**
 * Running integrals F_k(t) = integral_from^t f_k of several smooth functions, tabulated once to a stated absolute error.
 * Panels are halved until a 10-point and two 10-point Gauss-Legendre sums agree; inside a panel F is read off the
 * quintic through value and slope at both ends and the middle (error shown by the same test).
 */
export class IntegralTable {
  private readonly starts: number[] = [];
  private readonly ends: number[] = [];
  private readonly coefficients: Float64Array[] = [];
  private readonly sums: Float64Array;
  private last = 0;

  /**
   * @param f          writes the K integrands at t into `out`
   * @param cuts       ascending; f is smooth between them; the first is where the integrals are zero
   * @param tolerance  absolute error of each integral per unit of t
   */
  constructor(
    private readonly f: (t: number, out: Float64Array) => void,
    private readonly K: number,
    cuts: readonly number[],
    private readonly tolerance: number,
  ) {
    this.sums = new Float64Array(K);
    for (let i = 1; i < cuts.length; i++) this.addPanel(cuts[i - 1]!, cuts[i]!, 0);
  }

  /** Writes the K integrals up to t into `out`; t must lie between the first and last cut. */
  at(t: number, out: Float64Array): void {
    const low = this.panelOf(t);
    const a = this.starts[low]!;
    const z = (t - a) / (this.ends[low]! - a);
    const c = this.coefficients[low]!;
    for (let k = 0; k < this.K; k++) {
      const o = 6 * k;
      out[k] = c[o]! + z * (c[o + 1]! + z * (c[o + 2]! + z * (c[o + 3]! + z * (c[o + 4]! + z * c[o + 5]!))));
    }
  }

  /** Calls come in runs of times close together: the panel of the last one is tried first. */
  private panelOf(t: number): number {
    const { starts, last } = this;
    if (t >= starts[last]! && (last + 1 === starts.length || t < starts[last + 1]!)) return last;
    let low = 0;
    let high = starts.length - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (starts[mid]! <= t) low = mid;
      else high = mid - 1;
    }
    this.last = low;
    return low;
  }

  private addPanel(a: number, b: number, depth: number): void {
    const mid = (a + b) / 2;
    const left = this.integrate(a, mid);
    const right = this.integrate(mid, b);
    const quintic = this.fit(a, mid, b, left, right);
    if (depth < 40 && !this.isGoodEnough(a, b, quintic)) {
      this.addPanel(a, mid, depth + 1);
      this.addPanel(mid, b, depth + 1);
      return;
    }
    this.starts.push(a);
    this.ends.push(b);
    this.coefficients.push(quintic);
    for (let k = 0; k < this.K; k++) this.sums[k]! += left[k]! + right[k]!;
  }

  private integrate(a: number, b: number): Float64Array {
    const { x, w } = gaussLegendre(10);
    const out = new Float64Array(this.K);
    const value = new Float64Array(this.K);
    for (let i = 0; i < x.length; i++) {
      this.f((a + b) / 2 + ((b - a) / 2) * x[i]!, value);
      for (let k = 0; k < this.K; k++) out[k]! += (w[i]! * value[k]! * (b - a)) / 2;
    }
    return out;
  }

  /** Quintic in z = (t-a)/(b-a) with F and F' at z = 0, 1/2, 1. */
  private fit(a: number, mid: number, b: number, left: Float64Array, right: Float64Array): Float64Array {
    const slopes = [a, mid, b].map((t) => {
      const value = new Float64Array(this.K);
      this.f(t, value);
      return value;
    });
    const out = new Float64Array(6 * this.K);
    for (let k = 0; k < this.K; k++) {
      const h = b - a;
      const [d0, dm, d1] = [slopes[0]![k]! * h, slopes[1]![k]! * h, slopes[2]![k]! * h];
      const m = left[k]!;
      const e = m + right[k]!;
      // F - F(a) = d0 z + c2 z^2 + ... + c5 z^5 through the four remaining conditions.
      out.set([this.sums[k]!, d0, 16 * m - 8 * dm + 7 * e - d1 - 6 * d0, -32 * m + 32 * dm - 34 * e + 5 * d1 + 13 * d0, 16 * m - 40 * dm + 52 * e - 8 * d1 - 12 * d0, 16 * dm - 24 * e + 4 * d1 + 4 * d0], 6 * k);
    }
    return out;
  }

  /** Compares the quintic with Gauss sums at a quarter and three quarters of the panel. */
  private isGoodEnough(a: number, b: number, quintic: Float64Array): boolean {
    // Times this close to one another are not told apart: halving on, beside a jump, would never end. Slope times length is quintic[o + 1].
    const rounding = (16 * Number.EPSILON * Math.max(Math.abs(a), Math.abs(b))) / (b - a);
    for (const z of [0.25, 0.75]) {
      const truth = this.integrate(a, a + z * (b - a));
      for (let k = 0; k < this.K; k++) {
        const o = 6 * k;
        const read = z * (quintic[o + 1]! + z * (quintic[o + 2]! + z * (quintic[o + 3]! + z * (quintic[o + 4]! + z * quintic[o + 5]!))));
        if (Math.abs(read - truth[k]!) > this.tolerance * (b - a) + rounding * Math.abs(quintic[o + 1]!)) return false;
      }
    }
    return true;
  }
}
