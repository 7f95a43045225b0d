import type { PathRandom } from './random';

/**
 * First passage within one step, exact for a constant drift and variance: given both ends, the walk between them is a
 * Brownian bridge whatever the drift, so that large steps miss no crossing.
 *
 * @param startM     distance to the level at the start of the step, above 0
 * @param endM       the same at the end; negative when it lies beyond the level
 * @param varianceM2 variance of the step
 * @param lengthS    length of the step
 * @returns time after the start of the step at which the level is first met, or null where it is not
 *
 * Ends on one side: the level is met with probability exp(-2 a b / variance). Where it is met, s = t / (T - t) is the
 * first passage of a walk with drift |b| to the level a: inverse Gaussian with mean a/|b| and shape a^2/variance.
 * Sources: reflection principle, Karatzas & Shreve 1991, Brownian Motion and Stochastic Calculus, section 2.6 and 4.3;
 * Tweedie 1957, Ann. Math. Stat. 28: 362.
 */
export function passageWithin(startM: number, endM: number, varianceM2: number, lengthS: number, random: PathRandom): number | null {
  if (endM > 0) {
    const exponent = (2 * startM * endM) / varianceM2;
    // exp(-40) = 4e-18: not met.
    if (exponent > 40 || random.uniform() > Math.exp(-exponent)) return null;
  }
  const past = Math.max(Math.abs(endM), 1e-12 * startM);
  const s = random.inverseGaussian(startM / past, (startM * startM) / varianceM2);
  return lengthS * (s / (1 + s));
}

/** First arrivals at a receptor over all paths. */
export type ArrivalFigures = {
  /** Share of the paths that ever arrives within the estimate, and its standard error. */
  readonly share: number;
  readonly shareError: number;
  /** Quantiles of the first arrival among those that arrive, s after T0; null where fewer than twenty do. */
  readonly quantilesS: { readonly p5: number; readonly p50: number; readonly p95: number } | null;
  /** Standard error of the median, s. */
  readonly medianErrorS: number | null;
};

const LEAST_ARRIVALS = 20;

/**
 * @param arrivalsS one entry a path: seconds, or NaN where it never arrives
 * Standard errors: binomial sqrt(p (1 - p) / n) for the share; for the median half the distance between the quantiles
 * one binomial standard deviation to either side (Woodruff 1952, J. Am. Stat. Assoc. 47: 635).
 */
export function arrivalFigures(arrivalsS: Float64Array): ArrivalFigures {
  const met = arrivalsS.filter((t) => !Number.isNaN(t)).sort();
  const n = arrivalsS.length;
  const share = n === 0 ? 0 : met.length / n;
  const quantile = (p: number): number => {
    const at = Math.min(1, Math.max(0, p)) * (met.length - 1);
    const i = Math.floor(at);
    return met[i]! + (at - i) * ((met[i + 1] ?? met[i]!) - met[i]!);
  };
  const isEnough = met.length >= LEAST_ARRIVALS;
  const half = 0.5 / Math.sqrt(met.length || 1);
  return {
    share,
    shareError: n === 0 ? 0 : Math.sqrt((share * (1 - share)) / n),
    quantilesS: isEnough ? { p5: quantile(0.05), p50: quantile(0.5), p95: quantile(0.95) } : null,
    medianErrorS: isEnough ? (quantile(0.5 + half) - quantile(0.5 - half)) / 2 : null,
  };
}
