import { z } from 'zod';
import { notNegative, positive } from './basics';

/** What is known of the water at the time, beyond depth and current. Everything may be left out; losses and validity rules ask for what they need. */
export const conditionsSchema = z.object({
  temperatureC: z.number().min(-2, 'Water temperature runs from -2 to 60 °C').max(60, 'Water temperature runs from -2 to 60 °C').optional(),
  /** 10 m above the water. */
  windSpeedMps: notNegative('m/s', 80).optional(),
  pH: z.number().min(0, 'pH runs from 0 to 14').max(14, 'pH runs from 0 to 14').optional(),
  alkalinityEqM3: notNegative('eq/m3', 1_000).optional(),
  suspendedKgM3: notNegative('kg/m3', 100).optional(),
  /** A closed cover of ice. */
  ice: z.boolean().optional(),
  waterDensityKgM3: positive('kg/m3', 1_100, 950).optional(),
  /** Two layers: how much denser the lower one is, and how deep the upper one reaches. */
  stratification: z.object({ densityStepKgM3: notNegative('kg/m3', 100), layerDepthM: positive('m', 1_000) }).optional(),
  /** Fresh water into an estuary, its width, and the speed of the tide (root mean square). */
  estuary: z.object({ freshM3s: notNegative('m3/s', 1e6), widthM: positive('m', 1e5), tidalSpeedMps: positive('m/s', 10), densityStepKgM3: notNegative('kg/m3', 100).default(25) }).optional(),
  /** An outfall or hole from which the release comes as a jet. */
  dischargeJet: z.object({ flowM3s: positive('m3/s', 1e4), speedMps: positive('m/s', 100), densityKgM3: positive('kg/m3', 2e4) }).optional(),
  /** Rising or falling stage: change of discharge with time, either sign. */
  dischargeChangeM3sPerS: z.number().min(-1e4).max(1e4).optional(),
  meanDischargeM3s: positive('m3/s', 1e6).optional(),
  /** Reservoirs, locks or weirs on the way, weeds or many branches, and dead water over flowing section. */
  hasReservoir: z.boolean().optional(),
  isWeedyOrBraided: z.boolean().optional(),
  deadZoneShare: notNegative('m2/m2', 100).optional(),
  /** Breaking waves at the shore. */
  isSurfZone: z.boolean().optional(),
});
export type Conditions = z.infer<typeof conditionsSchema>;

/** How the substance behaves, for the rules that say when an estimate is not to be trusted. */
export const behaviourSchema = z.object({
  isAcidOrBase: z.boolean().optional(),
  /** Equivalents of acid or base in a kilogram. */
  equivalentsPerKg: notNegative('eq/kg', 1_000).optional(),
  /** Reacts in the water: chlorine, ammonia, cyanide, metals. */
  isReactive: z.boolean().optional(),
  /** Gas it may give off, for example hydrogen cyanide; empty for none. */
  gas: z.string().trim().max(60).optional(),
  oxygenDemandKgPerKg: notNegative('kg/kg', 10).optional(),
  kdM3Kg: notNegative('m3/kg', 1e4).optional(),
  settlingMps: notNegative('m/s', 1).optional(),
});
export type Behaviour = z.infer<typeof behaviourSchema>;
