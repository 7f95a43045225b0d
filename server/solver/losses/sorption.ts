/** Litres per kilogram to m3/kg. */
const LITRE_M3 = 1e-3;

/** Share dissolved among suspended matter: 1 / (1 + Kd S), Kd in m3/kg, S in kg/m3. Linear sorption at equilibrium. Source: Karickhoff, Brown & Scott 1979, Water Res. 13: 241. */
export const dissolvedFraction = (kdM3Kg: number, suspendedKgM3: number): number => 1 / (1 + kdM3Kg * suspendedKgM3);

/** Koc, m3/kg, from log10 Kow: log Koc = 0.7919 log Kow + 0.0784 (L/kg). Source: US EPA 1996, Soil Screening Guidance, EPA/540/R-95/128, eq. 71; R2 0.97. */
export const kocFromKow = (logKow: number): number => LITRE_M3 * 10 ** (0.7919 * logKow + 0.0784);

/** Kd = f_oc Koc, m3/kg, f_oc the share of organic carbon in the particles. Source: Karickhoff, Brown & Scott 1979. */
export const kdFromKoc = (kocM3Kg: number, organicFraction: number): number => organicFraction * kocM3Kg;
