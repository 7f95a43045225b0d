/**
 * A smooth curve through samples that makes no new extremes: cubics whose slopes are limited, zero at the samples'
 * own peaks. Held at its ends. Order 3 between samples, 2 beside peaks.
 * Source: Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5:300.
 */
export class MonotoneSeries {
  private readonly slopes: Float64Array;

  /** Times ascend; both arrays are kept. */
  constructor(readonly timesS: Float64Array, readonly values: Float64Array) {
    const n = timesS.length;
    this.slopes = new Float64Array(n);
    for (let i = 1; i + 1 < n; i++) {
      const [h0, h1] = [timesS[i]! - timesS[i - 1]!, timesS[i + 1]! - timesS[i]!];
      const [d0, d1] = [(values[i]! - values[i - 1]!) / h0, (values[i + 1]! - values[i]!) / h1];
      if (d0 * d1 > 0) this.slopes[i] = (3 * (h0 + h1)) / ((2 * h1 + h0) / d0 + (h1 + 2 * h0) / d1);
    }
  }

  at(tS: number): number {
    const { timesS, values, slopes } = this;
    const last = timesS.length - 1;
    if (last < 0 || tS < timesS[0]!) return 0;
    if (tS >= timesS[last]!) return values[last]!;
    let low = 0;
    let high = last - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (timesS[middle]! <= tS) low = middle;
      else high = middle - 1;
    }
    const h = timesS[low + 1]! - timesS[low]!;
    const z = (tS - timesS[low]!) / h;
    const [a, b] = [values[low]!, values[low + 1]!];
    const value = a + (b - a) * z * z * (3 - 2 * z) + h * z * (1 - z) * (slopes[low]! * (1 - z) - slopes[low + 1]! * z);
    // Rounding must not leave the two samples between which it lies.
    return Math.min(Math.max(value, Math.min(a, b)), Math.max(a, b));
  }
}
