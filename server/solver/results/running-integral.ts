import type { Samples } from './sampling';

/**
 * Running integral of a sampled answer: the parabola through each stretch's three values, integrated exactly
 * (Simpson's rule at the end of a stretch). Zero before the first sample, constant after the last.
 */
export class RunningIntegral {
  private readonly sums: number[] = [0];

  constructor(
    private readonly samples: Samples,
    private readonly values: readonly number[],
  ) {
    samples.parts.forEach(([a, m, b], i) => {
      const h = samples.timesS[b]! - samples.timesS[a]!;
      this.sums.push(this.sums[i]! + (h / 6) * (values[a]! + 4 * values[m]! + values[b]!));
    });
  }

  get total(): number {
    return this.sums[this.sums.length - 1]!;
  }

  at(tS: number): number {
    const { timesS, parts } = this.samples;
    if (parts.length === 0 || tS <= timesS[parts[0]![0]]!) return 0;
    if (tS >= timesS[parts[parts.length - 1]![2]]!) return this.total;
    let low = 0;
    let high = parts.length - 1;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (timesS[parts[mid]![0]]! <= tS) low = mid;
      else high = mid - 1;
    }
    const [a, m, b] = parts[low]!;
    const h = timesS[b]! - timesS[a]!;
    const z = (tS - timesS[a]!) / h;
    const [fa, fm, fb] = [this.values[a]!, this.values[m]!, this.values[b]!];
    // Integral of fa + (-3 fa + 4 fm - fb) z + 2 (fa - 2 fm + fb) z^2.
    return this.sums[low]! + h * z * (fa + (z / 2) * (-3 * fa + 4 * fm - fb) + ((2 * z * z) / 3) * (fa - 2 * fm + fb));
  }

  /** Mean over the `windowS` seconds up to t. */
  mean(tS: number, windowS: number): number {
    return Math.max(0, this.at(tS) - this.at(tS - windowS)) / windowS;
  }
}
