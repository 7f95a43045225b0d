import { z } from 'zod';

/**
 * What an estimate answers. SI; times in seconds after T0; concentrations kg/m3 or counts/m3.
 * `low`, `likely` and `high` follow the released amount's range unless a run says otherwise.
 */

const triple = z.object({ low: z.number().nullable(), likely: z.number().nullable(), high: z.number().nullable() });

export const levelSchema = z.object({ value: z.number(), isActionValue: z.boolean(), label: z.string() });
export type Level = z.infer<typeof levelSchema>;

/** One line of the working: what was reckoned, by which formula, with which figures, from which source. */
export const workingLineSchema = z.object({
  label: z.string(),
  formula: z.string(),
  substituted: z.string(),
  value: z.number().nullable(),
  unit: z.string(),
  source: z.string(),
});
export type WorkingLine = z.infer<typeof workingLineSchema>;

export const receptorVerdicts = ['may exceed', 'not predicted to exceed', 'cannot be estimated'] as const;

export const actionAnswerSchema = z.object({
  /** Position in the receptor's `actionValues`. */
  index: z.number().int(),
  value: z.number(),
  verdict: z.enum(receptorVerdicts),
  reason: z.string(),
  /** First time above the action value; `early` for the high amount, `late` for the low one; null where it is not exceeded. */
  arrivalS: z.object({ early: z.number().nullable(), likely: z.number().nullable(), late: z.number().nullable() }),
  /** Last time above; null where not exceeded; `endOpen` when still above at the end of the estimate. */
  endS: z.object({ early: z.number().nullable(), likely: z.number().nullable(), late: z.number().nullable() }),
  endOpen: z.boolean(),
  timeAboveS: triple,
  /** Likely peak over the action value, a plain ratio. */
  ratio: z.number().nullable(),
  pulses: z.array(z.object({ startS: z.number(), endS: z.number() })),
});
export type ActionAnswer = z.infer<typeof actionAnswerSchema>;

export const receptorAnswerSchema = z.object({
  receptorId: z.string(),
  /** The worst of its action answers; without action values, whether it is reached at all is told by the peak. */
  verdict: z.enum([...receptorVerdicts, 'no action value']),
  reason: z.string(),
  distanceM: z.number().nullable(),
  peak: triple,
  peakS: z.number().nullable(),
  /** Leading edge: first time the likely series reaches 2 % of its peak. */
  leadingEdgeS: z.number().nullable(),
  /** Integral of the concentration over the estimate, (kg/m3)·s or (counts/m3)·s. */
  dose: triple,
  answers: z.array(actionAnswerSchema),
  /** Likely concentration against time; the peak and the crossings are among the times. Low and high scale with the amount. */
  series: z.object({ timesS: z.array(z.number()), likely: z.array(z.number()), low: z.array(z.number()).nullable(), high: z.array(z.number()).nullable() }),
  /** The same with losses applied, when the estimate itself is conservative and the substance has a loss. */
  withLosses: z.object({ peak: z.number(), likely: z.array(z.number()) }).nullable(),
  working: z.array(workingLineSchema),
});
export type ReceptorAnswer = z.infer<typeof receptorAnswerSchema>;

export const checkSchema = z.object({
  code: z.string(),
  severity: z.enum(['note', 'warn', 'stop']),
  title: z.string(),
  /** The numbers that tripped it, with units. */
  detail: z.string(),
  remedy: z.string(),
  receptorId: z.string().nullable(),
});
export type Check = z.infer<typeof checkSchema>;

export const diagnosticsSchema = z.object({
  massReleased: z.number(),
  massInWater: z.number(),
  massLost: z.number(),
  massLeft: z.number(),
  /** Released - in water - lost - left, over released. */
  massResidual: z.number(),
  /** At which time the books above were closed, s. */
  booksAtS: z.number(),
  quadratureError: z.number(),
  evaluations: z.number(),
  cappedValues: z.number().int(),
});

/** Leading edge: first time at 2 % of the peak; end: last time at 10 % of it, null where still above at the end of the estimate. */
export const travelTimeSchema = z.object({
  reachId: z.string(),
  chainageKm: z.number(),
  leadingEdgeS: z.number(),
  peakS: z.number(),
  endS: z.number().nullable(),
  peak: z.number(),
});
export type TravelTime = z.infer<typeof travelTimeSchema>;

export const estimateResultSchema = z.object({
  engineVersion: z.string(),
  solver: z.string(),
  seed: z.number().int(),
  /** "kg/m3" or "counts/m3". */
  unit: z.enum(['kg/m3', 'counts/m3']),
  levels: z.array(levelSchema),
  frameTimesS: z.array(z.number()),
  receptors: z.array(receptorAnswerSchema),
  /** Rivers: section-mean concentration by time and chainage along the path below the release; rows are times. */
  distanceTime: z
    .object({ timesS: z.array(z.number()), chainageKm: z.array(z.number()), reachIds: z.array(z.string()), values: z.array(z.array(z.number())) })
    .nullable(),
  /** Rivers: passage of the cloud by chainage, from the likely section mean. */
  travelTimes: z.array(travelTimeSchema).optional(),
  checks: z.array(checkSchema),
  diagnostics: diagnosticsSchema,
  /** Working common to all receptors: amounts, hydraulics, coefficients. */
  working: z.array(workingLineSchema),
});
export type EstimateResult = z.infer<typeof estimateResultSchema>;
