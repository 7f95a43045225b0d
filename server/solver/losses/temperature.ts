/** Rates are given at this temperature, °C, unless said otherwise. */
export const REFERENCE_C = 20;

/** Usual temperature bases; all from memory, as printed in water-quality handbooks, except re-aeration (Churchill et al. 1962). */
export const THETA = { reaeration: 1.024, oxygenDemand: 1.047, coliforms: 1.07, nitrification: 1.08 } as const;

/**
 * First-order rate at a water temperature: k(T) = k20 theta^(T - 20), 1/s for k20 in 1/s, T in °C.
 * Range: 5 to 30 °C, where bases were fitted. Source: Streeter & Phelps 1925, US Public Health Bulletin 146.
 */
export const rateAtTemperature = (rate20PerS: number, theta: number, temperatureC: number): number => rate20PerS * theta ** (temperatureC - REFERENCE_C);
