/**
 * Transfer velocities of a substance through the water film (k_w) and the air film (k_a) at a water surface, m/s.
 */
const DAY_S = 86_400;
const HOUR_CM = 360_000;
/** Oxygen in water at 20 °C, m2/s; gives 3.95 U^0.5/h^1.5 a day, printed as 3.93 by O'Connor & Dobbins 1958. */
export const OXYGEN_M2S = 2.09e-9;
/** Kinematic viscosities at 20 °C, m2/s. */
const WATER_VISCOSITY = 1e-6;
const AIR_VISCOSITY = 1.5e-5;
/** No surface takes up oxygen slower than 0.6 m a day. Source: as used with the laws below (from memory). */
const LEAST_OXYGEN_MPS = 0.6 / DAY_S;

/** Molecular diffusivity in water, m2/s: 2.7e-8 M^-0.71, M in g/mol. Source: Schwarzenbach, Gschwend & Imboden 2003 (from memory). */
export const waterDiffusivityM2s = (molarMassGMol: number): number => 2.7e-8 * molarMassGMol ** -0.71;
/** The same in air: 1.55e-4 M^-0.65. Source: Schwarzenbach, Gschwend & Imboden 2003 (from memory). */
export const airDiffusivityM2s = (molarMassGMol: number): number => 1.55e-4 * molarMassGMol ** -0.65;

export type Films = { readonly waterMps: number; readonly airMps: number };

/** Friction velocity of the wind on water: u* = 0.01 U10 sqrt(6.1 + 0.63 U10), m/s. Source: Mackay & Yeun 1983, Environ. Sci. Technol. 17: 211. */
export const windFrictionMps = (windMps: number): number => 0.01 * windMps * Math.sqrt(6.1 + 0.63 * windMps);

/**
 * Both films under a wind, with Schmidt numbers Sc = viscosity over diffusivity:
 *   k_w = 1e-6 + 34.1e-4 u* Sc_w^-0.5 where u* > 0.3 m/s, else 1e-6 + 144e-4 u*^2.2 Sc_w^-0.5;  k_a = 1e-3 + 46.2e-3 u* Sc_a^-0.67.
 * Range: wind 10 m above the water 0 to 15 m/s. Source: Mackay & Yeun 1983, Environ. Sci. Technol. 17: 211.
 */
export function windFilms(windMps: number, waterM2s: number, airM2s: number): Films {
  const friction = windFrictionMps(windMps);
  const rough = friction > 0.3 ? 34.1e-4 * friction : 144e-4 * friction ** 2.2;
  return {
    waterMps: 1e-6 + rough * (WATER_VISCOSITY / waterM2s) ** -0.5,
    airMps: 1e-3 + 46.2e-3 * friction * (AIR_VISCOSITY / airM2s) ** -0.67,
  };
}

export type CurrentLaw = 'oconnor-dobbins' | 'churchill' | 'owens';

/** Re-aeration by a current, 1/s at 20 °C, for speed U (m/s) and depth h (m), in 1/d: the published forms. */
const reaerationPerDay: Record<CurrentLaw, (U: number, h: number) => number> = {
  /** 0.3 to 9 m, 0.15 to 0.5 m/s. Source: O'Connor & Dobbins 1958, Trans. ASCE 123: 641. */
  'oconnor-dobbins': (U, h) => (DAY_S * Math.sqrt(OXYGEN_M2S) * U ** 0.5) / h ** 1.5,
  /** 0.6 to 3 m, 0.55 to 1.5 m/s. Source: Churchill, Elmore & Buckingham 1962, J. San. Eng. Div. ASCE 88(SA4): 1. */
  churchill: (U, h) => (5.03 * U ** 0.969) / h ** 1.673,
  /** 0.1 to 3 m, 0.03 to 1.5 m/s. Source: Owens, Edwards & Gibbs 1964, Int. J. Air Water Pollut. 8: 469. */
  owens: (U, h) => (5.32 * U ** 0.67) / h ** 1.85,
};

export const currentRanges: Record<CurrentLaw, { depthM: readonly [number, number]; speedMps: readonly [number, number] }> = {
  'oconnor-dobbins': { depthM: [0.3, 9], speedMps: [0.15, 0.5] },
  churchill: { depthM: [0.6, 3], speedMps: [0.55, 1.5] },
  owens: { depthM: [0.1, 3], speedMps: [0.03, 1.5] },
};

/**
 * The law for a depth and speed: Owens in water shallower than 0.61 m, Churchill where it is fast for its depth
 * (h < 3.45 U^2.5), O'Connor & Dobbins otherwise. Source: Covar 1976 (from memory).
 */
export const currentLawFor = (speedMps: number, depthM: number): CurrentLaw =>
  depthM < 0.61 ? 'owens' : depthM < 3.45 * speedMps ** 2.5 ? 'churchill' : 'oconnor-dobbins';

/**
 * Water film by a current: re-aeration times depth, not below 0.6 m a day, times sqrt(D / D_oxygen).
 * With O'Connor & Dobbins this is sqrt(D U / h), the film that is renewed once a depth.
 */
export function currentFilmMps(law: CurrentLaw, speedMps: number, depthM: number, waterM2s: number): number {
  const oxygenMps = (reaerationPerDay[law](speedMps, depthM) * depthM) / DAY_S;
  return Math.max(LEAST_OXYGEN_MPS, oxygenMps) * Math.sqrt(waterM2s / OXYGEN_M2S);
}

/**
 * Screening films of small streams and lakes, from speed V and depth Z (m/s, m), wind w (m/s) and molar mass M (g/mol):
 *   k_w = 23.51 V^0.969 / Z^0.673 sqrt(32/M) cm/h, times exp(0.526 (w - 1.9)) from 1.9 m/s on;  k_a = 1137.5 (w + V) sqrt(18/M) cm/h.
 * Source: Southworth 1979, Bull. Environ. Contam. Toxicol. 21: 507; Lyman, Reehl & Rosenblatt 1982, Handbook of Chemical
 * Property Estimation Methods, chapter 15 (constants from memory; they reproduce published half-lives).
 */
export function screeningFilms(windMps: number, speedMps: number, depthM: number, molarMassGMol: number): Films {
  const gusts = windMps >= 1.9 ? Math.exp(0.526 * (windMps - 1.9)) : 1;
  return {
    waterMps: ((23.51 * speedMps ** 0.969) / depthM ** 0.673) * Math.sqrt(32 / molarMassGMol) * (gusts / HOUR_CM),
    airMps: (1137.5 * (windMps + speedMps) * Math.sqrt(18 / molarMassGMol)) / HOUR_CM,
  };
}

/**
 * Both films in series: 1/K = 1/k_w + 1/(k_a H'), m/s, H' air over water at equilibrium (plain).
 * Source: Whitman 1923, Chem. Metall. Eng. 29: 146; Liss & Slater 1974, Nature 247: 181.
 */
export const twoFilmMps = ({ waterMps, airMps }: Films, ratio: number): number => (ratio <= 0 ? 0 : 1 / (1 / waterMps + 1 / (airMps * ratio)));
