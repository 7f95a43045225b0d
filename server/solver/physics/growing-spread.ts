/**
 * Clouds whose diffusivity grows with their size: K = a l^n, l = c sigma, d(sigma^2)/dt = 2 K. In closed form, with p = 1 - n/2,
 *   sigma^(2p) = sigma0^(2p) + 2 p a c^n t  (n < 2).
 * Where the published K is an apparent one, sigma^2/(2t) of a patch since it was a point, K = Ka/p and the factor p falls away.
 * Variances are along each axis, m2; t in s; K in m2/s; l in m.
 */
export type GrowthLaw = {
  readonly coefficient: number;
  readonly exponent: number;
  /** Size in the law over standard deviation along an axis. */
  readonly sizeOverSigma: number;
  readonly isApparent: boolean;
  /** Largest diffusivity, m2/s; Infinity where nothing limits it. */
  readonly mostM2s: number;
};

/** cm^(2/3) in m^(2/3). */
const CM_TWO_THIRDS = 0.01 ** (2 / 3);

/** 0.002 to 0.01 cm^(2/3)/s in open coastal water, the middle taken. Source: Richardson 1926, Proc. R. Soc. A 110: 709; Batchelor 1950, Q. J. R. Meteorol. Soc. 76: 133 (range from memory). */
export const FOUR_THIRDS_COEFFICIENT = 0.005 * CM_TWO_THIRDS;

/** K = alpha l^(4/3), l the width of the even cloud with the same variance, sqrt(12) sigma. */
export const fourThirdsLaw = (coefficient = FOUR_THIRDS_COEFFICIENT, mostM2s = Infinity): GrowthLaw => ({ coefficient, exponent: 4 / 3, sizeOverSigma: Math.sqrt(12), isApparent: false, mostM2s });

/** Ka = 0.0103 l^1.15 (cm2/s, cm), apparent, l three radial standard deviations, which are sqrt(2) times those along an axis. 100 m to 100 km. Source: Okubo 1971, Deep-Sea Res. 18: 789. */
export const okuboSizeLaw = (coefficient = 0.0103 * 1e-4 * 100 ** 1.15, mostM2s = Infinity): GrowthLaw => ({ coefficient, exponent: 1.15, sizeOverSigma: 3 * Math.SQRT2, isApparent: true, mostM2s });

/** K = 3.2e-4 l^1.1 (m2/s, m), 10 m to 100 km, lakes, l = 3 sigma. Source: Lawrence, Ashley, Yonemitsu & Ellis 1995, Limnol. Oceanogr. 40: 1519 (from memory). */
export const lakeSizeLaw = (coefficient = 3.2e-4, mostM2s = Infinity): GrowthLaw => ({ coefficient, exponent: 1.1, sizeOverSigma: 3, isApparent: false, mostM2s });

/** The published coefficient at a size, m2/s, apparent where the law is. */
export const coefficientAtSize = ({ coefficient, exponent }: GrowthLaw, sizeM: number): number => coefficient * sizeM ** exponent;

/** Half the rate of growth of the variance, m2/s, before any limit. */
export function diffusivityAt(law: GrowthLaw, varianceM2: number): number {
  const published = coefficientAtSize(law, law.sizeOverSigma * Math.sqrt(varianceM2));
  return law.isApparent ? published / (1 - law.exponent / 2) : published;
}

/** Variance along an axis after `ageS`, from `startM2`; once K has reached its limit it grows as 2 K t. Exact. */
export function grownVarianceM2(law: GrowthLaw, startM2: number, ageS: number): number {
  if (ageS <= 0) return startM2;
  const p = 1 - law.exponent / 2;
  const rate = 2 * law.coefficient * law.sizeOverSigma ** law.exponent * (law.isApparent ? 1 : p);
  const limitM2 = limitVarianceM2(law);
  if (startM2 >= limitM2) return startM2 + 2 * law.mostM2s * ageS;
  const limitS = limitM2 === Infinity ? Infinity : (limitM2 ** p - startM2 ** p) / rate;
  return ageS <= limitS ? (startM2 ** p + rate * ageS) ** (1 / p) : limitM2 + 2 * law.mostM2s * (ageS - limitS);
}

/** Variance at which K meets its limit. */
function limitVarianceM2({ coefficient, exponent, sizeOverSigma, isApparent, mostM2s }: GrowthLaw): number {
  if (mostM2s === Infinity) return Infinity;
  const published = isApparent ? mostM2s * (1 - exponent / 2) : mostM2s;
  return ((published / coefficient) ** (1 / exponent) / sizeOverSigma) ** 2;
}
