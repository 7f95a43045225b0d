import type { LossProcess, Partition, Particles, Volatilisation } from '../../../shared/schemas/losses';
import { sig } from '../format';
import { airWaterRatio, henryAt } from './henry';
import { unionisedAcid, unionisedAmmonia, unionisedBase } from './ionisation';
import type { LossWater } from './loss-water';
import { fergusonChurchMps, stokesMps } from './settling';
import { dissolvedFraction, kdFromKoc, kocFromKow } from './sorption';
import { rateAtTemperature, THETA } from './temperature';
import { airDiffusivityM2s, currentFilmMps, currentLawFor, screeningFilms, twoFilmMps, waterDiffusivityM2s, windFilms, type Films } from './transfer-velocity';

/** A rate with how it was found. */
export type ProcessRate = { readonly name: string; readonly ratePerS: number; readonly formula: string; readonly substituted: string; readonly source: string };

type Steady = Exclude<LossProcess, { kind: 'day-night' }>;

/** First-order rate of one process in the water of the estimate, 1/s. */
export function processRate(process: Steady, water: LossWater): ProcessRate {
  switch (process.kind) {
    case 'decay':
      return {
        name: process.name,
        ratePerS: rateAtTemperature(process.ratePerS, process.theta, water.temperatureC),
        formula: 'k = k20 θ^(T − 20)',
        substituted: `${sig(process.ratePerS)} 1/s · ${sig(process.theta)}^(${sig(water.temperatureC)} − 20); ${water.how}`,
        source: process.source || 'temperature by Streeter & Phelps 1925',
      };
    case 'volatilisation':
      return volatilisationRate(process, water);
    case 'settling':
      return settlingRate(process, water);
    case 'flushing':
      return {
        name: 'Flushing',
        ratePerS: process.inflowM3s / process.volumeM3,
        formula: 'k = Q/V',
        substituted: `${sig(process.inflowM3s)} m³/s / ${sig(process.volumeM3)} m³`,
        source: process.source || 'stirred basin',
      };
  }
}

/** The films that the stated driver gives, with the words for the working. */
export function filmsOf(process: Volatilisation, water: LossWater): { films: Films; how: string } {
  const waterM2s = process.waterDiffusivityM2s ?? waterDiffusivityM2s(process.molarMassGMol);
  const airM2s = process.airDiffusivityM2s ?? airDiffusivityM2s(process.molarMassGMol);
  const windMps = water.windMps ?? 0;
  if (process.driver === 'screening') return { films: screeningFilms(windMps, water.speedMps, water.depthM, process.molarMassGMol), how: 'Southworth 1979, Lyman et al. 1982' };
  const wind = windFilms(windMps, waterM2s, airM2s);
  const law = process.currentLaw ?? currentLawFor(water.speedMps, water.depthM);
  const currentMps = currentFilmMps(law, water.speedMps, water.depthM, waterM2s) * rateAtTemperature(1, THETA.reaeration, water.temperatureC);
  const byCurrent = process.driver === 'current' || (process.driver === 'greater' && currentMps > wind.waterMps);
  const names = { 'oconnor-dobbins': "O'Connor & Dobbins 1958", churchill: 'Churchill et al. 1962', owens: 'Owens et al. 1964' };
  return byCurrent
    ? { films: { waterMps: currentMps, airMps: wind.airMps }, how: `water film by the current, ${names[law]}; air film by the wind, Mackay & Yeun 1983` }
    : { films: wind, how: 'both films by the wind, Mackay & Yeun 1983' };
}

function volatilisationRate(process: Volatilisation, water: LossWater): ProcessRate {
  const ratio = airWaterRatio(henryAt(process.henryPaM3Mol, process.henrySlopeK, water.temperatureC), water.temperatureC);
  const { films, how } = filmsOf(process, water);
  const velocity = twoFilmMps(films, ratio);
  const free = freeShare(process, water);
  const share = free === 1 ? '' : `; un-ionised share ${sig(free)} at pH ${sig(water.pH ?? 7)}`;
  return {
    name: 'Volatilisation',
    ratePerS: water.isIced ? 0 : (free * velocity) / water.depthM,
    formula: "k = K/h, 1/K = 1/k_w + 1/(k_a H')",
    substituted: water.isIced
      ? 'closed by ice: none'
      : `k_w = ${sig(films.waterMps)} m/s, k_a = ${sig(films.airMps)} m/s, H' = ${sig(ratio)}, K = ${sig(velocity)} m/s, h = ${sig(water.depthM)} m${share}; ${water.how}`,
    source: `Whitman 1923; ${how}${process.source ? `; ${process.source}` : ''}`,
  };
}

function freeShare({ ionisation }: Volatilisation, { pH, temperatureC }: LossWater): number {
  if (!ionisation || pH === null) return 1;
  if (ionisation.kind === 'ammonia') return unionisedAmmonia(temperatureC, pH);
  return ionisation.kind === 'base' ? unionisedBase(ionisation.pKa, pH) : unionisedAcid(ionisation.pKa, pH);
}

export function kdOf(partition: Partition): number {
  if (partition.kind === 'kd') return partition.kdM3Kg;
  return kdFromKoc(partition.kind === 'koc' ? partition.kocM3Kg : kocFromKow(partition.logKow), partition.organicFraction);
}

export function settlingMpsOf(particles: Particles): number {
  if (particles.kind === 'speed') return particles.settlingMps;
  return particles.law === 'stokes' ? stokesMps(particles.diameterM, particles.densityKgM3) : fergusonChurchMps(particles.diameterM, particles.densityKgM3, particles.law);
}

function settlingRate(process: Extract<LossProcess, { kind: 'settling' }>, water: LossWater): ProcessRate {
  const kd = kdOf(process.partition);
  const suspended = water.suspendedKgM3 ?? 0;
  const sorbed = 1 - dissolvedFraction(kd, suspended);
  const fall = settlingMpsOf(process.particles);
  return {
    name: 'Settling with particles',
    ratePerS: (sorbed * fall) / water.depthM,
    formula: 'k = (1 − f) w/h, f = 1/(1 + Kd S)',
    substituted: `Kd = ${sig(kd)} m³/kg, S = ${sig(suspended)} kg/m³, sorbed share ${sig(sorbed)}, w = ${sig(fall)} m/s, h = ${sig(water.depthM)} m`,
    source: `${process.partition.kind === 'kow' ? 'Koc from Kow, US EPA 1996; ' : ''}${process.particles.kind === 'grain' ? (process.particles.law === 'stokes' ? 'Stokes 1851' : 'Ferguson & Church 2004') : 'settling speed as stated'}${process.source ? `; ${process.source}` : ''}`,
  };
}
