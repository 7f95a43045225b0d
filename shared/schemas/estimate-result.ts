import { z } from 'zod';
import { lonLatSchema } from './basics';

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
  /** Times above, in the likely curve; told apart where it stays below the action value for at least a minute. `releaseId`: which release adds most at the pulse's peak. */
  pulses: z.array(z.object({ startS: z.number(), endS: z.number(), peak: z.number().optional(), peakS: z.number().optional(), releaseId: z.string().optional() })),
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
  /** What took the lost part, kg or counts; together `massLost`. */
  lostBy: z.array(z.object({ process: z.string(), amount: z.number() })).optional(),
  massLeft: z.number(),
  /** Released - in water - lost - left, over released. */
  massResidual: z.number(),
  /** At which time the books above were closed, s. */
  booksAtS: z.number(),
  quadratureError: z.number(),
  evaluations: z.number(),
  cappedValues: z.number().int(),
  /** Largest share of a cell that anything crosses in one step; null for a closed form, which has no steps. */
  maxCourant: z.number().nullable().optional(),
  /** Values that a numeric solver had to set to zero or cut. */
  clippedValues: z.number().int().optional(),
  /** How finely it was solved, and what a coarser solution of the receptors that matter gave: changes relative to the peak, and in seconds. */
  resolution: z.object({ words: z.string(), peakChange: z.number().nullable(), arrivalChangeS: z.number().nullable() }).optional(),
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

export const agreements = ['agrees', 'differs', 'disagrees', 'none'] as const;

/** A second method run on the same document and compared with the first where it matters. */
export const secondOpinionSchema = z.object({
  /** The method that was asked; empty where there is none. */
  solver: z.string(),
  agreement: z.enum(agreements),
  words: z.string(),
  /** Beyond these the answer of a receptor is withdrawn: a factor in the peak, a share of the travel time in the arrival. */
  bounds: z.object({ peakFactor: z.number(), timeShare: z.number(), reason: z.string() }),
  figures: z.array(
    z.object({
      receptorId: z.string(),
      agreement: z.enum(agreements),
      /** Peak of the second method over that of the first, with its standard error from the sampling; null where it cannot tell. */
      peakRatio: z.number().nullable(),
      peakRatioError: z.number().nullable(),
      /** Front (a tenth of the peak) of the second method minus that of the first, s; the same for the end. */
      arrivalDifferenceS: z.number().nullable(),
      endDifferenceS: z.number().nullable(),
      /** Travel time to the front by the first method, s. */
      travelS: z.number().nullable(),
    }),
  ),
  /** Share of the two clouds that lies in the same place at one time. */
  field: z.object({ atS: z.number(), overlap: z.number() }).nullable(),
});
export type SecondOpinion = z.infer<typeof secondOpinionSchema>;

/** Random paths: some to draw, and what all of them say at the receptors. */
export const pathsSchema = z.object({
  /** How many were walked. */
  count: z.number().int(),
  /** Share that the current carried onto land before the end. */
  ashoreShare: z.number(),
  timesS: z.array(z.number()),
  /** Longitude and latitude to five decimals. A line ends at the last of the times; one released later is shorter. */
  lines: z.array(z.array(lonLatSchema)),
  receptors: z.array(
    z.object({
      receptorId: z.string(),
      /** Over what paths were counted, in words. */
      counted: z.string(),
      peak: z.number(),
      peakError: z.number(),
      peakS: z.number().nullable(),
      /** Share of the paths that ever arrives, with its standard error. */
      arriveShare: z.number(),
      arriveShareError: z.number(),
      /** Quantiles of the first arrival among those that arrive, s; null where too few do. */
      firstArrivalS: z.object({ p5: z.number(), p50: z.number(), p95: z.number() }).nullable(),
      medianErrorS: z.number().nullable(),
    }),
  ),
});
export type Paths = z.infer<typeof pathsSchema>;

const lonLatRing = z.array(z.tuple([z.number(), z.number()]));
/** Rings of longitude and latitude, closed; outer first and anticlockwise, then holes. */
const polygonsSchema = z.array(z.array(lonLatRing));

/** Everything that has been at or above a value by one time. */
export const isochroneSchema = z.object({
  timeS: z.number(),
  polygons: polygonsSchema,
  /** Open water: the edge without shore. */
  lines: z.array(lonLatRing),
  /** Rivers: chainages down to which it has come. */
  fronts: z.array(z.object({ reachId: z.string(), chainageKm: z.number() })),
});
export type Isochrone = z.infer<typeof isochroneSchema>;

/** Lines of first arrival of one concentration, and the outline of all that it reaches. */
export const reachedSchema = z.object({ value: z.number(), isActionValue: z.boolean(), isochrones: z.array(isochroneSchema), envelopePolygons: polygonsSchema });
export type Reached = z.infer<typeof reachedSchema>;

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
  /** For the lowest action value, or without one the lowest level; null when no amount is known. */
  reached: reachedSchema.nullable().optional(),
  checks: z.array(checkSchema),
  diagnostics: diagnosticsSchema,
  /** Working common to all receptors: amounts, hydraulics, coefficients. */
  working: z.array(workingLineSchema),
  secondOpinion: secondOpinionSchema.optional(),
  paths: pathsSchema.optional(),
});
export type EstimateResult = z.infer<typeof estimateResultSchema>;
