import { z } from 'zod';
import { isInArea } from '../geo';
import { bankSchema, instantSchema, lonLatSchema, nameSchema, notNegative, positive, rangeSchema, ringSchema, textSchema } from './basics';
import { behaviourSchema, conditionsSchema } from './conditions';
import { lossProcessSchema } from './losses';

/**
 * The estimate document: everything one estimate needs, self-contained, SI throughout.
 * A scenario's draft and its revisions hold one; the API and the command line solve the same document.
 *
 * Amounts are kilograms, or counts when `substance.measure` is `count` (micro-organisms).
 * Concentrations are kg/m3, or counts/m3. Times named `...S` are seconds after `startAt`.
 * Directions are degrees true. Banks are looking downstream.
 */

export const estimateLimits = {
  releases: 20,
  receptors: 500,
  actionValues: 8,
  reaches: 200,
  centrelinePoints: 5_000,
  tableRows: 2_000,
  seriesRows: 20_000,
  horizonS: 31 * 86_400,
  frames: 240,
} as const;

/* ---------- what was released ---------- */

const MAX_AMOUNT = 1e20;

export const lossSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('none') }),
  z.object({ kind: z.literal('first-order'), ratePerS: notNegative('1/s', 1), source: textSchema(300).default('') }),
  z.object({
    kind: z.literal('day-night'),
    dayRatePerS: notNegative('1/s', 1),
    nightRatePerS: notNegative('1/s', 1),
    /** Local hours, 0 to 24, in the UTC offset of `startAt`. */
    sunriseHour: z.number().min(0).max(24),
    sunsetHour: z.number().min(0).max(24),
    source: textSchema(300).default(''),
  }),
]);
export type Loss = z.infer<typeof lossSchema>;

export const estimateSubstanceSchema = z.object({
  registerId: z.string().max(64).nullable().default(null),
  name: nameSchema,
  cas: textSchema(20).default(''),
  /** What a figure counts, for example "as N", "as Cr", "dissolved". */
  basis: textSchema(40).default(''),
  measure: z.enum(['mass', 'count']).default('mass'),
  /** Caps the result; null when unknown or miscible. */
  solubilityKgM3: positive('kg/m3', 1e4).nullable().default(null),
  densityKgM3: positive('kg/m3', 2e4).nullable().default(null),
  loss: lossSchema.default({ kind: 'none' }),
  /** Further processes whose rates add to `loss`. */
  losses: z.array(lossProcessSchema).max(10, 'At most 10 processes').optional(),
  behaviour: behaviourSchema.optional(),
  /** False: the estimate is conservative and the figures with losses are only shown beside it. */
  applyLoss: z.boolean().default(false),
});
export type EstimateSubstance = z.infer<typeof estimateSubstanceSchema>;

/** How much, with the working kept. Every form comes down to kg (or counts): see `amountOf` in shared/amount.ts. */
export const amountSchema = z.discriminatedUnion('how', [
  /** `activeFraction`: kg of the substance reckoned (on its basis) per kg spilled. */
  z.object({ how: z.literal('mass'), massKg: rangeSchema('kg', MAX_AMOUNT), activeFraction: positive('kg/kg', 1).default(1) }),
  z.object({ how: z.literal('volume-strength'), volumeM3: rangeSchema('m3', 1e9), strengthKgM3: positive('kg/m3', 2e4) }),
  z.object({ how: z.literal('volume-density'), volumeM3: rangeSchema('m3', 1e9), densityKgM3: positive('kg/m3', 2e4), activeFraction: positive('kg/kg', 1).default(1) }),
  z.object({ how: z.literal('count'), count: rangeSchema('organisms', MAX_AMOUNT) }),
  z.object({ how: z.literal('volume-count'), volumeM3: rangeSchema('m3', 1e9), countPerM3: positive('organisms/m3', 1e16) }),
  /** Not known. With a stand-in the estimate uses it and says so; without, answers are per kilogram and no exceedance is claimed. */
  z.object({ how: z.literal('unknown'), standIn: positive('kg', MAX_AMOUNT).nullable().default(null) }),
]);
export type Amount = z.infer<typeof amountSchema>;

export const releaseTimingSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('instantaneous'), atS: z.number().min(-30 * 86_400).max(estimateLimits.horizonS).default(0) }),
  z.object({
    kind: z.literal('steady'),
    startS: z.number().min(-30 * 86_400).max(estimateLimits.horizonS).default(0),
    durationS: positive('s', estimateLimits.horizonS),
  }),
  /** Piecewise-linear relative rate; scaled so that its integral is the amount. Times ascend. */
  z.object({
    kind: z.literal('table'),
    rows: z
      .array(z.object({ atS: z.number().min(-30 * 86_400).max(estimateLimits.horizonS), rate: notNegative('kg/s', 1e12) }))
      .min(2, 'A table of rates needs at least two rows')
      .max(estimateLimits.tableRows, `At most ${estimateLimits.tableRows} rows`)
      .superRefine((rows, ctx) => {
        rows.forEach((row, i) => {
          const before = rows[i - 1];
          if (before && row.atS <= before.atS)
            ctx.addIssue({ code: 'custom', path: [i, 'atS'], message: `Times must ascend: row ${i + 1} (${row.atS} s) is not after row ${i} (${before.atS} s)` });
        });
        if (rows.every((row) => row.rate === 0))
          ctx.addIssue({ code: 'custom', path: [0, 'rate'], message: 'Every rate is 0: give at least one above 0' });
      }),
  }),
]);
export type ReleaseTiming = z.infer<typeof releaseTimingSchema>;

/** A place on the river network: reach, chainage in km, and where across. */
export const channelPlaceSchema = z.object({
  reachId: z.string().min(1).max(64),
  chainageKm: z.number().min(-10_000).max(10_000),
  bank: bankSchema,
});
export type ChannelPlace = z.infer<typeof channelPlaceSchema>;

export const releaseSchema = z.object({
  id: z.string().min(1).max(64),
  name: nameSchema,
  position: lonLatSchema,
  channel: channelPlaceSchema.nullable().default(null),
  timing: releaseTimingSchema,
  amount: amountSchema,
  /** Radius of the cloud when it starts to spread, m; 0 is a point. */
  initialRadiusM: notNegative('m', 20_000).default(0),
  /** Volume spilled, m3: caps the concentration at amount/volume. */
  spilledVolumeM3: positive('m3', 1e9).nullable().default(null),
  evidence: textSchema(2_000).default(''),
  /** Below the surface, m; counts where mixing over depth is slow. */
  depthM: notNegative('m', 12_000).optional(),
  /** A release that moves, for example from a ship: straight and even between its rows. */
  path: z
    .array(z.object({ atS: z.number().min(-30 * 86_400).max(estimateLimits.horizonS), position: lonLatSchema }))
    .min(2, 'A path needs at least two rows')
    .max(500, 'At most 500 rows')
    .superRefine((rows, ctx) => {
      rows.forEach((row, i) => {
        const before = rows[i - 1];
        if (before && row.atS <= before.atS)
          ctx.addIssue({ code: 'custom', path: [i, 'atS'], message: `Times must ascend: row ${i + 1} (${row.atS} s) is not after row ${i} (${before.atS} s)` });
      });
    })
    .optional(),
});
export type Release = z.infer<typeof releaseSchema>;

/* ---------- the water ---------- */

export const hydraulicsRowSchema = z.object({
  /** For example Q95, "exceeded 95 % of the time". */
  flowName: z.string().trim().min(1).max(40),
  exceededPercent: z.number().min(0).max(100).nullable().default(null),
  dischargeM3s: positive('m3/s', 1e6),
  widthM: positive('m', 20_000),
  depthM: positive('m', 12_000),
  velocityMps: positive('m/s', 20),
});
export type HydraulicsRow = z.infer<typeof hydraulicsRowSchema>;

export const reachSchema = z.object({
  id: z.string().min(1).max(64),
  name: nameSchema,
  /** Letters before a chainage, for example OL. */
  chainagePrefix: textSchema(8).default('km'),
  /** Vertices in downstream order: lon, lat, chainage in km. Chainage falls downstream and gives the length. */
  centreline: z
    .array(z.tuple([z.number().min(-180).max(180), z.number().min(-85).max(85), z.number().min(-10_000).max(10_000)]))
    .min(2, 'A centreline needs at least two positions')
    .max(estimateLimits.centrelinePoints, `At most ${estimateLimits.centrelinePoints} positions`)
    .superRefine((line, ctx) => {
      line.forEach((vertex, i) => {
        const before = line[i - 1];
        if (before && vertex[2] >= before[2])
          ctx.addIssue({ code: 'custom', path: [i, 2], message: `Chainage must fall downstream: ${vertex[2]} km follows ${before[2]} km. Reverse the line or mend the chainage` });
      });
    }),
  downstreamReachId: z.string().max(64).nullable().default(null),
  /** Bank of the receiving water on which this reach enters it; null when it is the main stem itself. */
  joinsOnBank: z.enum(['left', 'right']).nullable().default(null),
  slope: positive('m/m', 0.5).nullable().default(null),
  manningN: positive('s/m^(1/3)', 1).nullable().default(null),
  hydraulics: z.array(hydraulicsRowSchema).min(1, 'Give width, depth and velocity for at least one flow').max(30),
  /** Longitudinal dispersion, m2/s; null means by Fischer 1979 from the hydraulics. */
  dispersionM2s: positive('m2/s', 1e5).nullable().default(null),
  /** Transverse mixing, m2/s; null means 0.6 H u* (Fischer et al. 1979). */
  transverseM2s: positive('m2/s', 1e3).nullable().default(null),
  coefficientNote: textSchema(500).default(''),
  calibrated: z.boolean().default(false),
  tidal: z.boolean().default(false),
  /** Dead zones beside the stream: their area over that of the stream, and the share of the stream exchanged with them per second. */
  storage: z.object({ areaRatio: positive('m2/m2', 20), exchangePerS: positive('1/s', 1) }).optional(),
  /** Stirred water at the head of the reach through which all of its flow passes: `tanks` equal volumes in a row. */
  structure: z.object({ kind: z.enum(['weir', 'reservoir']), volumeM3: positive('m3', 1e11), tanks: z.number().int().min(1, 'At least 1 tank').max(20, 'At most 20 tanks').default(1) }).optional(),
  /**
   * Tidal current added to the river's own: amplitude at the lower end of the reach, largest ebb (seaward) at `maxEbbS`.
   * It falls evenly up the reach to that of the tidal reach above, or to none where the tide ends.
   */
  tide: z.object({ amplitudeMps: positive('m/s', 10), periodS: positive('s', 40 * 86_400, 600), maxEbbS: z.number().min(-40 * 86_400).max(40 * 86_400) }).optional(),
});
export type Reach = z.infer<typeof reachSchema>;

export const dischargeSeriesSchema = z.object({
  reachId: z.string().min(1).max(64),
  rows: z
    .array(z.object({ atS: z.number().min(-60 * 86_400).max(120 * 86_400), dischargeM3s: positive('m3/s', 1e6) }))
    .min(2, 'A series of discharges needs at least two rows')
    .max(estimateLimits.tableRows, `At most ${estimateLimits.tableRows} rows`)
    .superRefine((rows, ctx) => {
      rows.forEach((row, i) => {
        const before = rows[i - 1];
        if (before && row.atS <= before.atS)
          ctx.addIssue({ code: 'custom', path: [i, 'atS'], message: `Times must ascend: row ${i + 1} (${row.atS} s) is not after row ${i} (${before.atS} s)` });
      });
    }),
});
export type DischargeSeries = z.infer<typeof dischargeSeriesSchema>;

export const riverWaterSchema = z.object({
  kind: z.literal('river'),
  registerId: z.string().max(64).nullable().default(null),
  name: nameSchema,
  chainageOrigin: textSchema(200).default(''),
  reaches: z.array(reachSchema).min(1, 'A river needs at least one reach').max(estimateLimits.reaches, `At most ${estimateLimits.reaches} reaches`),
  flow: z.object({
    /** Named flow used where no discharge is given. */
    name: z.string().trim().min(1).max(40),
    /** Discharge set for a reach, m3/s; width, depth and velocity follow by power laws through the named flows. */
    discharges: z.array(z.object({ reachId: z.string().max(64), dischargeM3s: positive('m3/s', 1e6) })).max(estimateLimits.reaches).default([]),
    /** Discharge at the head of a reach against time, linear between rows; times ascend and cover the estimate. Reaches below take up the change as it runs down. */
    series: z.array(dischargeSeriesSchema).max(estimateLimits.reaches).optional(),
    source: textSchema(300).default(''),
    readAt: instantSchema.nullable().default(null),
  }),
  temperatureC: z.number().min(-2).max(60).nullable().default(null),
});
export type RiverWater = z.infer<typeof riverWaterSchema>;

const towardDeg = z.number({ error: 'Give a direction in degrees true' }).min(0, 'Directions run from 0 to 360 degrees').max(360, 'Directions run from 0 to 360 degrees');

export const currentPartSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('residual'), speedMps: notNegative('m/s', 10), towardDeg }),
  /** Tidal ellipse: `majorMps` toward `floodTowardDeg` at `maxFloodS`; minor axis positive turns anticlockwise. */
  z.object({
    kind: z.literal('tide'),
    name: textSchema(40).default('M2'),
    majorMps: notNegative('m/s', 10),
    minorMps: z.number().min(-10).max(10).default(0),
    floodTowardDeg: towardDeg,
    periodS: positive('s', 40 * 86_400),
    maxFloodS: z.number().min(-40 * 86_400).max(40 * 86_400),
  }),
  /** Wind drift: a share of the wind, turned clockwise by `turnDeg` from the down-wind direction. */
  z.object({
    kind: z.literal('wind'),
    windSpeedMps: notNegative('m/s', 80),
    windFromDeg: towardDeg,
    driftFraction: notNegative('m/s per m/s', 0.1),
    turnDeg: z.number().min(-90).max(90).default(0),
  }),
  /** Measured or forecast current, linear between rows; times ascend and cover the estimate. */
  z.object({
    kind: z.literal('series'),
    rows: z
      .array(z.object({ atS: z.number().min(-60 * 86_400).max(120 * 86_400), eastMps: z.number().min(-10).max(10), northMps: z.number().min(-10).max(10) }))
      .min(2)
      .max(estimateLimits.seriesRows)
      .superRefine((rows, ctx) => {
        rows.forEach((row, i) => {
          const before = rows[i - 1];
          if (before && row.atS <= before.atS)
            ctx.addIssue({ code: 'custom', path: [i, 'atS'], message: `Times must ascend: row ${i + 1} (${row.atS} s) is not after row ${i} (${before.atS} s)` });
        });
      }),
  }),
]);
export type CurrentPart = z.infer<typeof currentPartSchema>;

export const mixingSchema = z.discriminatedUnion('kind', [
  /** Constant horizontal tensor. With `turnsWithCurrent` the along axis follows the current; otherwise `axisTowardDeg`. */
  z.object({
    kind: z.literal('constant'),
    /** Water does not mix less than by the motion of its molecules. */
    alongM2s: positive('m2/s', 1e5, 1e-9),
    acrossM2s: positive('m2/s', 1e5, 1e-9),
    turnsWithCurrent: z.boolean().default(true),
    axisTowardDeg: towardDeg.default(0),
  }),
  /** Spread growing with the age of the cloud after Okubo 1971, times `varianceFactor`. */
  z.object({ kind: z.literal('okubo'), varianceFactor: positive('times', 100).default(1) }),
  /**
   * Diffusivity growing with the size l of the cloud, K = coefficient l^n: n 4/3 (Richardson 1926), 1.15 (Okubo 1971), or
   * 1.1 in lakes (Lawrence et al. 1995). Null takes the published coefficient, and no upper limit.
   */
  z.object({
    kind: z.literal('growing'),
    law: z.enum(['four-thirds', 'okubo', 'lake']),
    coefficient: positive('m^(2-n)/s', 1).nullable().default(null),
    mostM2s: positive('m2/s', 1e5).nullable().default(null),
  }),
]);
export type Mixing = z.infer<typeof mixingSchema>;

/** A stream in or out: through the shore nearest to its position. Positive into the water. */
export const throughflowSchema = z.object({
  name: nameSchema,
  position: lonLatSchema,
  dischargeM3s: z.number({ error: 'Give a discharge in m3/s' }).min(-1e6, 'Must be at least -1000000 m3/s').max(1e6, 'Must be at most 1000000 m3/s'),
});
export type Throughflow = z.infer<typeof throughflowSchema>;

/** The stretch of outline that is open to other water, between two positions on it; the shorter way round unless said otherwise. */
export const openEdgeSchema = z.object({
  from: lonLatSchema,
  to: lonLatSchema,
  way: z.enum(['shorter', 'longer']).optional(),
  /** High less low water, m; the water that a rising level needs comes through the edge. */
  tideRangeM: notNegative('m', 20).optional(),
  /** 44,714 s (M2) where not given. */
  periodS: positive('s', 40 * 86_400, 600).optional(),
  /** A high water, s after T0; 0 where not given. */
  highWaterS: z.number().min(-40 * 86_400).max(40 * 86_400).optional(),
});
export type OpenEdge = z.infer<typeof openEdgeSchema>;

/** A small basin taken as stirred: what leaves with each tide and with the streams through it. */
export const boxSchema = z.object({
  volumeM3: positive('m3', 1e13),
  surfaceAreaM2: positive('m2', 1e12),
  tidalRangeM: notNegative('m', 20),
  periodS: positive('s', 40 * 86_400, 600),
  /** Share of the water that left on the ebb and comes back on the flood. */
  returnFraction: z.number().min(0, 'Runs from 0 to 1').max(1, 'Runs from 0 to 1'),
  dischargeM3s: notNegative('m3/s', 1e6).optional(),
});
export type Box = z.infer<typeof boxSchema>;

const gradientPart = z.number().min(-0.1, 'A velocity gradient lies between -0.1 and 0.1 1/s').max(0.1, 'A velocity gradient lies between -0.1 and 0.1 1/s').default(0);
const velocityGradientSchema = z.object({
  eastByEastPerS: gradientPart,
  eastByNorthPerS: gradientPart,
  northByEastPerS: gradientPart,
  /** Where the stated currents hold; the first release where it is left out. */
  at: lonLatSchema.optional(),
});

export const openWaterSchema = z.object({
  kind: z.literal('open'),
  registerId: z.string().max(64).nullable().default(null),
  waterKind: z.enum(['lake', 'harbour', 'estuary', 'coast']),
  name: nameSchema,
  /** Outer ring, then islands. */
  area: z.array(ringSchema).min(1, 'Draw the outline of the water').max(200),
  depthM: positive('m', 12_000),
  /** Depth over which the substance is taken as mixed; not above the water depth. */
  mixingDepthM: positive('m', 12_000),
  current: z.array(currentPartSchema).max(40).default([]),
  mixing: mixingSchema,
  /** Straight shore used by images: the line through two positions, water on the side of the release. */
  /** `oppositeM`: a second shore, parallel, that far across the water. */
  straightShore: z.object({ from: lonLatSchema, to: lonLatSchema, oppositeM: positive('m', 1e6).optional() }).nullable().default(null),
  /** A current that changes evenly in space: east and north speed by distance east and north, 1/s. No divergence: north by north is minus east by east. */
  velocityGradient: velocityGradientSchema.optional(),
  /** Slow mixing over depth; without it the substance is mixed over the mixing depth at once. */
  vertical: z.object({ kzM2s: positive('m2/s', 10, 1e-9) }).optional(),
  throughflows: z.array(throughflowSchema).max(60, 'At most 60 streams').optional(),
  openEdge: openEdgeSchema.optional(),
  /** Steady currents known at points, without the tide. */
  measuredCurrents: z.array(z.object({ position: lonLatSchema, eastMps: z.number().min(-10).max(10), northMps: z.number().min(-10).max(10) })).max(200, 'At most 200 measured currents').optional(),
  /** Soundings; between them the depth is interpolated, and without any it is `depthM` throughout. */
  depthPoints: z.array(z.object({ position: lonLatSchema, depthM: positive('m', 12_000) })).max(2_000, 'At most 2,000 depths').optional(),
  box: boxSchema.optional(),
  coefficientNote: textSchema(500).default(''),
  calibrated: z.boolean().default(false),
}).superRefine((water, ctx) => {
  if (water.mixingDepthM > water.depthM)
    ctx.addIssue({ code: 'custom', path: ['mixingDepthM'], message: `The mixing depth (${water.mixingDepthM} m) is above the water depth (${water.depthM} m): lower it` });
});
export type OpenWater = z.infer<typeof openWaterSchema>;

export const estimateWaterSchema = z.discriminatedUnion('kind', [riverWaterSchema, openWaterSchema]);
export type EstimateWater = z.infer<typeof estimateWaterSchema>;

/* ---------- whom it may reach ---------- */

export const receptorKinds = ['intake', 'bathing', 'irrigation', 'industry', 'hatchery', 'fish-farm', 'shellfish', 'ecological', 'other'] as const;
export const receptorKindSchema = z.enum(receptorKinds);
export type ReceptorKind = z.infer<typeof receptorKindSchema>;

export const actionValueSchema = z.object({
  /** Concentration, kg/m3 or counts/m3. */
  value: positive('kg/m3', 1e16, 1e-18),
  basis: textSchema(40).default(''),
  /** 0 means the momentary value decides. */
  averagingS: notNegative('s', 365 * 86_400).default(0),
  source: textSchema(300).default(''),
  label: textSchema(80).default(''),
});
export type ActionValue = z.infer<typeof actionValueSchema>;

export const estimateReceptorSchema = z.object({
  id: z.string().min(1).max(64),
  registerId: z.string().max(64).nullable().default(null),
  code: textSchema(20).default(''),
  name: nameSchema,
  kind: receptorKindSchema,
  position: lonLatSchema,
  channel: channelPlaceSchema.nullable().default(null),
  depthM: notNegative('m', 12_000).nullable().default(null),
  closingS: notNegative('s', 30 * 86_400).nullable().default(null),
  storageS: notNegative('s', 365 * 86_400).nullable().default(null),
  actionValues: z.array(actionValueSchema).max(estimateLimits.actionValues).default([]),
});
export type EstimateReceptor = z.infer<typeof estimateReceptorSchema>;

/* ---------- the document ---------- */

export const ESTIMATE_FORMAT = 'downreach-estimate/1';

export const estimateDocumentSchema = z
  .object({
    format: z.literal(ESTIMATE_FORMAT),
    title: textSchema(200).default(''),
    /** T0: the zero of elapsed time, with the UTC offset in which times are shown. */
    startAt: instantSchema,
    horizonS: positive('s', estimateLimits.horizonS).min(60, 'Must be at least 60 s'),
    frameCount: z.number().int().min(2).max(estimateLimits.frames, `At most ${estimateLimits.frames} frames`).default(48),
    substance: estimateSubstanceSchema,
    conditions: conditionsSchema.optional(),
    water: estimateWaterSchema,
    releases: z.array(releaseSchema).min(1, 'Place at least one release').max(estimateLimits.releases, `At most ${estimateLimits.releases} releases`),
    receptors: z.array(estimateReceptorSchema).max(estimateLimits.receptors, `At most ${estimateLimits.receptors} receptors: leave out those not on this water`).default([]),
    seed: z.number().int().min(0).max(4_294_967_295).default(1),
    /** Which way to solve; auto, the default, takes the closed form where it is exact enough. */
    solver: z.enum(['auto', 'closed-form', 'network', 'bounded', 'box', 'paths']).optional(),
    /** Relative error asked of the release-time integral. */
    tolerance: z.number().min(1e-10).max(1e-2).default(1e-6),
  })
  .superRefine((doc, ctx) => {
    const seen = new Set<string>();
    doc.releases.forEach((release, i) => {
      if (seen.has(release.id)) ctx.addIssue({ code: 'custom', path: ['releases', i, 'id'], message: `Two releases have the id ${release.id}` });
      seen.add(release.id);
      const starts = release.timing.kind === 'instantaneous' ? release.timing.atS : release.timing.kind === 'steady' ? release.timing.startS : (release.timing.rows[0]?.atS ?? 0);
      if (starts >= doc.horizonS)
        ctx.addIssue({ code: 'custom', path: ['releases', i, 'timing'], message: `The release starts ${starts} s after T0, at or after the end of the estimate (${doc.horizonS} s): lengthen the estimate or mend the time` });
      const counts = release.amount.how === 'count' || release.amount.how === 'volume-count';
      if (release.amount.how !== 'unknown' && counts !== (doc.substance.measure === 'count'))
        ctx.addIssue({ code: 'custom', path: ['releases', i, 'amount', 'how'], message: doc.substance.measure === 'count' ? 'This substance is counted: give a count, not a mass' : 'This substance is weighed: give a mass, not a count' });
    });
    const receptorIds = new Set<string>();
    doc.receptors.forEach((receptor, i) => {
      if (receptorIds.has(receptor.id)) ctx.addIssue({ code: 'custom', path: ['receptors', i, 'id'], message: `Two receptors have the id ${receptor.id}` });
      receptorIds.add(receptor.id);
    });
    if (doc.water.kind === 'open') {
      const { area, name } = doc.water;
      doc.releases.forEach((release, i) => {
        if (!isInArea(release.position, area))
          ctx.addIssue({ code: 'custom', path: ['releases', i, 'position'], message: `Longitude ${release.position[0]}, latitude ${release.position[1]} lies on land or outside ${name}: move the release onto the water` });
        release.path?.forEach(({ position }, k) => {
          if (!isInArea(position, area))
            ctx.addIssue({ code: 'custom', path: ['releases', i, 'path', k, 'position'], message: `Longitude ${position[0]}, latitude ${position[1]} lies on land or outside ${name}: lead the path over the water` });
        });
      });
    }
    if (doc.water.kind === 'river') {
      const river = doc.water;
      const byId = new Map(river.reaches.map((reach) => [reach.id, reach] as const));
      if (byId.size !== river.reaches.length) ctx.addIssue({ code: 'custom', path: ['water', 'reaches'], message: 'Two reaches have the same id' });
      river.reaches.forEach((reach, i) => {
        if (reach.downstreamReachId !== null && !byId.has(reach.downstreamReachId))
          ctx.addIssue({ code: 'custom', path: ['water', 'reaches', i, 'downstreamReachId'], message: `There is no reach ${reach.downstreamReachId}` });
        const met = new Set<string>([reach.id]);
        for (let next = reach.downstreamReachId; next !== null; ) {
          if (met.has(next)) {
            ctx.addIssue({ code: 'custom', path: ['water', 'reaches', i, 'downstreamReachId'], message: 'The reaches run in a circle: water must leave the network' });
            break;
          }
          met.add(next);
          next = byId.get(next)?.downstreamReachId ?? null;
        }
        if (!reach.hydraulics.some((row) => row.flowName === river.flow.name) && !river.flow.discharges.some((d) => d.reachId === reach.id))
          ctx.addIssue({ code: 'custom', path: ['water', 'flow', 'name'], message: `Reach ${reach.name} has no figures for the flow "${river.flow.name}": choose another flow or give its discharge` });
      });
      const place = (channel: z.infer<typeof channelPlaceSchema> | null, path: (string | number)[]) => {
        if (!channel) {
          ctx.addIssue({ code: 'custom', path, message: 'On a river a place needs its reach, chainage and bank' });
          return;
        }
        const reach = byId.get(channel.reachId);
        if (!reach) {
          ctx.addIssue({ code: 'custom', path: [...path, 'reachId'], message: `There is no reach ${channel.reachId}` });
          return;
        }
        const top = reach.centreline[0]?.[2] ?? 0;
        const bottom = reach.centreline[reach.centreline.length - 1]?.[2] ?? 0;
        if (channel.chainageKm > top || channel.chainageKm < bottom)
          ctx.addIssue({ code: 'custom', path: [...path, 'chainageKm'], message: `km ${channel.chainageKm} is past the end of ${reach.name}, which runs from km ${top} down to km ${bottom}` });
      };
      doc.releases.forEach((release, i) => place(release.channel, ['releases', i, 'channel']));
      doc.receptors.forEach((receptor, i) => { if (receptor.channel) place(receptor.channel, ['receptors', i, 'channel']); });
    }
  });
export type EstimateDocument = z.infer<typeof estimateDocumentSchema>;
/** What a caller may write: defaults left out. */
export type EstimateDocumentInput = z.input<typeof estimateDocumentSchema>;
