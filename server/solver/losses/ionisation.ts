import { KELVIN } from './henry';

/** pKa of ammonium: 0.09018 + 2729.92 / T, T in K, 0 to 30 °C, fresh water. Source: Emerson, Russo, Lund & Thurston 1975, J. Fish. Res. Board Can. 32: 2379. */
export const ammoniumPka = (temperatureC: number): number => 0.09018 + 2729.92 / (temperatureC + KELVIN);

/** Un-ionised share of a base, 1/(1 + 10^(pKa - pH)). Source: Henderson 1908; Hasselbalch 1917. */
export const unionisedBase = (pKa: number, pH: number): number => 1 / (1 + 10 ** (pKa - pH));
/** Un-ionised share of an acid, 1/(1 + 10^(pH - pKa)). Source: Henderson 1908; Hasselbalch 1917. */
export const unionisedAcid = (pKa: number, pH: number): number => 1 / (1 + 10 ** (pH - pKa));

/** Un-ionised share of total ammonia. Source: Emerson et al. 1975. */
export const unionisedAmmonia = (temperatureC: number, pH: number): number => unionisedBase(ammoniumPka(temperatureC), pH);
