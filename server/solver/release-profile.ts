import { amountOf, type AmountFigures } from '../../shared/amount';
import type { EstimateDocument, Release, ReleaseTiming } from '../../shared/schemas/estimate';

/** How a release is spread over time, as a share of the amount. */
export type ReleaseProfile = {
  readonly startS: number;
  readonly stopS: number;
  readonly isInstant: boolean;
  /** True where the rate is one constant. */
  readonly isSteady: boolean;
  /** Share of the amount released per second, 1/s; zero outside. */
  rate(tS: number): number;
  /** Share released up to t. */
  released(tS: number): number;
  /** Start, kinks and stop. */
  readonly knotsS: readonly number[];
};

export function releaseProfile(timing: ReleaseTiming): ReleaseProfile {
  if (timing.kind === 'instantaneous')
    return { startS: timing.atS, stopS: timing.atS, isInstant: true, isSteady: false, rate: () => 0, released: (t) => (t > timing.atS ? 1 : 0), knotsS: [timing.atS] };
  if (timing.kind === 'steady') {
    const { startS, durationS } = timing;
    const stopS = startS + durationS;
    return {
      startS,
      stopS,
      isInstant: false,
      isSteady: true,
      rate: (t) => (t >= startS && t <= stopS ? 1 / durationS : 0),
      released: (t) => Math.min(1, Math.max(0, (t - startS) / durationS)),
      knotsS: [startS, stopS],
    };
  }
  return tableProfile(timing.rows);
}

/** Piecewise-linear rate scaled so that it integrates to one. */
function tableProfile(rows: readonly { atS: number; rate: number }[]): ReleaseProfile {
  const sums = [0];
  for (let i = 1; i < rows.length; i++) sums.push(sums[i - 1]! + ((rows[i]!.atS - rows[i - 1]!.atS) * (rows[i]!.rate + rows[i - 1]!.rate)) / 2);
  const total = sums[sums.length - 1]!;
  const startS = rows[0]!.atS;
  const stopS = rows[rows.length - 1]!.atS;
  const rowAt = (t: number): number => {
    let low = 0;
    let high = rows.length - 2;
    while (low < high) {
      const mid = (low + high + 1) >> 1;
      if (rows[mid]!.atS <= t) low = mid;
      else high = mid - 1;
    }
    return low;
  };
  const rate = (t: number): number => {
    if (t < startS || t > stopS) return 0;
    const i = rowAt(t);
    const a = rows[i]!;
    const b = rows[i + 1]!;
    return (a.rate + ((b.rate - a.rate) * (t - a.atS)) / (b.atS - a.atS)) / total;
  };
  const released = (t: number): number => {
    if (t <= startS) return 0;
    if (t >= stopS) return 1;
    const i = rowAt(t);
    return sums[i]! / total + ((t - rows[i]!.atS) * (rows[i]!.rate / total + rate(t))) / 2;
  };
  return { startS, stopS, isInstant: false, isSteady: false, rate, released, knotsS: rows.map((row) => row.atS) };
}

export type ResolvedRelease = {
  readonly index: number;
  readonly release: Release;
  readonly profile: ReleaseProfile;
  readonly amount: AmountFigures;
  /** Largest concentration per kilogram released, 1/m3: one over the volume spilled. */
  readonly capPerKg: number;
};

/** The amounts that scale the unit answers of the releases. */
export type Weights = readonly number[];
export type WeightSet = {
  readonly low: Weights | null;
  readonly likely: Weights;
  readonly high: Weights | null;
  /** No amount is known: figures are for one kilogram (or count) from each release. */
  readonly isPerUnit: boolean;
  /** Some amounts are not known: figures leave those releases out. */
  readonly isPartial: boolean;
};

export const resolveReleases = (doc: EstimateDocument): ResolvedRelease[] =>
  doc.releases.map((release, index) => ({
    index,
    release,
    profile: releaseProfile(release.timing),
    amount: amountOf(release.amount),
    capPerKg: release.spilledVolumeM3 === null ? Infinity : 1 / release.spilledVolumeM3,
  }));

export function weightsOf(releases: readonly ResolvedRelease[]): WeightSet {
  const known = releases.filter((release) => release.amount.likely !== null);
  if (known.length === 0) return { low: null, likely: releases.map(() => 1), high: null, isPerUnit: true, isPartial: false };
  const end = (which: 'low' | 'high'): Weights | null =>
    releases.some((release) => release.amount[which] !== null) ? releases.map(({ amount }) => amount[which] ?? amount.likely ?? 0) : null;
  return { low: end('low'), likely: releases.map(({ amount }) => amount.likely ?? 0), high: end('high'), isPerUnit: false, isPartial: known.length < releases.length };
}
