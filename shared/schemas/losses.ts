import { z } from 'zod';
import { notNegative, positive, textSchema } from './basics';

/**
 * Processes by which a substance leaves the water, each with its own figures; their rates add.
 * Temperature, wind, ice and suspended matter come from the conditions of the estimate, depth and speed from its water.
 */

const sourceSchema = textSchema(300).default('');

const decaySchema = z.object({
  kind: z.literal('decay'),
  /** What takes it, for example biodegradation. */
  name: textSchema(40).default('Decay'),
  /** Rate at 20 °C. */
  ratePerS: notNegative('1/s', 1),
  /** Factor per degree; 1 leaves temperature out. */
  theta: z.number().min(1, 'The factor per degree runs from 1 to 1.2').max(1.2, 'The factor per degree runs from 1 to 1.2').default(1.047),
  source: sourceSchema,
});

const daylightDecaySchema = z.object({
  kind: z.literal('day-night'),
  name: textSchema(40).default('Decay in daylight'),
  dayRatePerS: notNegative('1/s', 1),
  nightRatePerS: notNegative('1/s', 1),
  /** Local hours, 0 to 24, in the UTC offset of `startAt`. */
  sunriseHour: z.number().min(0).max(24),
  sunsetHour: z.number().min(0).max(24),
  source: sourceSchema,
});

/** Only the un-ionised form leaves: which share that is at the pH of the conditions. */
const ionisationSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('ammonia') }),
  z.object({ kind: z.literal('base'), pKa: z.number().min(-5).max(20) }),
  z.object({ kind: z.literal('acid'), pKa: z.number().min(-5).max(20) }),
]);
export type Ionisation = z.infer<typeof ionisationSchema>;

const volatilisationSchema = z.object({
  kind: z.literal('volatilisation'),
  /** Henry's constant at 25 °C. */
  henryPaM3Mol: notNegative('Pa m3/mol', 1e6),
  /** Enthalpy over gas constant, K; 0 leaves temperature out. */
  henrySlopeK: notNegative('K', 15_000).default(0),
  molarMassGMol: positive('g/mol', 2_000, 1),
  /** In water and in air; null means from the molar mass. */
  waterDiffusivityM2s: positive('m2/s', 1e-7).nullable().default(null),
  airDiffusivityM2s: positive('m2/s', 1e-3).nullable().default(null),
  /** What stirs the surface. `greater` takes the stronger water film of wind and current; `screening` the formulas for small streams and lakes. */
  driver: z.enum(['wind', 'current', 'greater', 'screening']).default('greater'),
  /** Null: the law that fits depth and speed. */
  currentLaw: z.enum(['oconnor-dobbins', 'churchill', 'owens']).nullable().default(null),
  ionisation: ionisationSchema.nullable().default(null),
  source: sourceSchema,
});
export type Volatilisation = z.infer<typeof volatilisationSchema>;

export const partitionSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('kd'), kdM3Kg: notNegative('m3/kg', 1e4) }),
  z.object({ kind: z.literal('koc'), kocM3Kg: notNegative('m3/kg', 1e5), organicFraction: notNegative('kg/kg', 1) }),
  z.object({ kind: z.literal('kow'), logKow: z.number().min(-6).max(10), organicFraction: notNegative('kg/kg', 1) }),
]);
export type Partition = z.infer<typeof partitionSchema>;

export const particlesSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('speed'), settlingMps: notNegative('m/s', 1) }),
  z.object({
    kind: z.literal('grain'),
    diameterM: positive('m', 0.01),
    densityKgM3: positive('kg/m3', 2e4, 1_000),
    law: z.enum(['natural', 'sphere', 'stokes']).default('natural'),
  }),
]);
export type Particles = z.infer<typeof particlesSchema>;

/** Sorbed matter sinks with its particles. Suspended matter comes from the conditions. */
const settlingSchema = z.object({ kind: z.literal('settling'), partition: partitionSchema, particles: particlesSchema, source: sourceSchema });

/** A small lake or basin is flushed: rate Q/V. */
const flushingSchema = z.object({ kind: z.literal('flushing'), inflowM3s: notNegative('m3/s', 1e6), volumeM3: positive('m3', 1e15), source: sourceSchema });

export const lossProcessSchema = z.discriminatedUnion('kind', [decaySchema, daylightDecaySchema, volatilisationSchema, settlingSchema, flushingSchema]);
export type LossProcess = z.infer<typeof lossProcessSchema>;
