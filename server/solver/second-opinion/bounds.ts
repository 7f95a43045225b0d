/**
 * How far two methods may differ. The product promises a peak within a factor of 2 and times within a quarter of the
 * travel time (what field tests of calibrated estimates reach; common practice, no source): where two ways of solving
 * the same equation with the same coefficients differ by more than that, beyond what chance explains, neither can
 * stand. Within a third of those (a factor of 1.3, a tenth) they count as agreeing: the width of the counting
 * area makes up to 6 % of it.
 */
export const BOUNDS = {
  peakFactor: 2,
  timeShare: 0.25,
  agreesPeakFactor: 1.3,
  agreesTimeShare: 0.1,
  /** Differences are judged after this many standard errors of the sampling are taken off: 1 in 370 by chance. */
  standardErrors: 3,
} as const;

/** Arrival and end are read where a curve passes this share of its own peak: enough paths are there to tell. */
export const FRONT_SHARE = 0.1;
/**
 * A peak worth less than this many paths standing in the middle of the counting area says nothing: with about twice as
 * many anywhere in it, its standard error is above a quarter.
 */
export const LEAST_PATHS = 8;
