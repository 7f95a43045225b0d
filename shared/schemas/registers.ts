import { z } from 'zod';
import { type RuleProblem, substanceProblems, waterProblems } from '../register-rules';
import { bankSchema, daySchema, idSchema, instantSchema, lonLatSchema, nameSchema, notNegative, positive, ringSchema, textSchema } from './basics';
import { currentPartSchema, lossSchema, mixingSchema, reachSchema, receptorKindSchema } from './estimate';

/** The five registers. One table, one service and one set of pages serve them all; what differs is the data below. */
export const registerNames = ['waters', 'receptors', 'sources', 'substances', 'stations'] as const;
export const registerNameSchema = z.enum(registerNames);
export type RegisterName = z.infer<typeof registerNameSchema>;

const report =
  <T>(rule: (data: T) => RuleProblem[]) =>
  (data: T, ctx: { addIssue: (issue: { code: 'custom'; path: (string | number)[]; message: string }) => void }): void =>
    rule(data).forEach(({ path, message }) => ctx.addIssue({ code: 'custom', path, message }));

/* ---------- waters ---------- */

const riverDataSchema = z.object({
  kind: z.literal('river'),
  chainageOrigin: textSchema(200),
  /** Named flows in the order they are offered, the usual one first. */
  flowNames: z.array(z.string().trim().min(1).max(40)).min(1).max(30),
  reaches: z.array(reachSchema).min(1).max(200),
  note: textSchema(2_000).default(''),
});

const openDataSchema = z.object({
  kind: z.enum(['lake', 'harbour', 'estuary', 'coast']),
  area: z.array(ringSchema).min(1).max(200),
  depthM: positive('m', 12_000),
  mixingDepthM: positive('m', 12_000),
  /** Offered as named states, for example "springs" and "neaps"; the first is the usual one. */
  currents: z.array(z.object({ name: nameSchema, parts: z.array(currentPartSchema).max(40) })).max(20).default([]),
  tide: textSchema(500).default(''),
  mixing: mixingSchema,
  calibrated: z.boolean().default(false),
  note: textSchema(2_000).default(''),
});
export const waterDataSchema = z.discriminatedUnion('kind', [riverDataSchema, openDataSchema]).superRefine(report(waterProblems));
export type RiverData = z.infer<typeof riverDataSchema>;
export type OpenWaterData = z.infer<typeof openDataSchema>;
export type WaterData = RiverData | OpenWaterData;

/* ---------- receptors ---------- */

export const receptorDataSchema = z.object({
  kind: receptorKindSchema,
  position: lonLatSchema,
  /** Id of the water it stands on. */
  waterId: idSchema,
  channel: z.object({ reachId: z.string().min(1).max(64), chainageKm: z.number(), bank: bankSchema }).nullable().default(null),
  /** Depths below the surface from which it draws, m; empty means at the shore or surface. */
  depthsM: z.array(notNegative('m', 12_000)).max(10).default([]),
  closingMinutes: notNegative('min', 43_200).nullable().default(null),
  storageHours: notNegative('h', 8_760).nullable().default(null),
  peopleServed: z.number().int().min(0).max(1e9).nullable().default(null),
  contact: z.object({ name: textSchema(120).default(''), phone: textSchema(60).default(''), email: textSchema(200).default('') }),
  actionValues: z
    .array(
      z.object({
        substanceId: idSchema,
        value: positive('in the unit beside it', 1e12),
        unit: z.enum(['ug/l', 'mg/l', 'counts/100ml']),
        basis: textSchema(40).default(''),
        averagingMinutes: notNegative('min', 525_600).default(0),
        source: textSchema(300),
      }),
    )
    .max(60)
    .default([]),
  note: textSchema(2_000).default(''),
});
export type ReceptorData = z.infer<typeof receptorDataSchema>;

/* ---------- sources ---------- */

export const sourceDataSchema = z.object({
  kind: z.enum(['site', 'tank', 'bridge', 'outfall', 'berth', 'pipeline', 'store', 'other']),
  position: lonLatSchema,
  waterId: idSchema,
  channel: z.object({ reachId: z.string().min(1).max(64), chainageKm: z.number(), bank: bankSchema }).nullable().default(null),
  /** Where a spill runs: drains, ditches, interceptors. */
  drainPath: textSchema(500).default(''),
  operator: textSchema(120).default(''),
  contact: z.object({ name: textSchema(120).default(''), phone: textSchema(60).default(''), email: textSchema(200).default('') }),
  holdings: z
    .array(z.object({ substanceId: idSchema, largestCredible: positive('kg or counts', 1e20), strengthNote: textSchema(200).default('') }))
    .max(60)
    .default([]),
  note: textSchema(2_000).default(''),
});
export type SourceData = z.infer<typeof sourceDataSchema>;

/* ---------- substances ---------- */

export const substanceDataSchema = z
  .object({
    otherNames: z.array(textSchema(120)).max(30).default([]),
    cas: textSchema(20).default(''),
    unNumber: textSchema(10).default(''),
    /** What its figures count: "as N", "as Cr", "dissolved". */
    basis: textSchema(40).default(''),
    measure: z.enum(['mass', 'count']),
    form: textSchema(200).default(''),
    /** kg of the substance reckoned (on its basis) in one kg of the product as spilled. */
    activeFraction: positive('kg/kg', 1).default(1),
    productDensityKgM3: positive('kg/m3', 2e4).nullable().default(null),
    solubilityKgM3: positive('kg/m3', 1e4).nullable().default(null),
    loss: lossSchema.default({ kind: 'none' }),
    hazards: textSchema(1_000).default(''),
    publishedValues: z
      .array(
        z.object({
          use: z.enum(['drinking', 'bathing', 'irrigation', 'livestock', 'aquatic', 'shellfish', 'other']),
          value: positive('in the unit beside it', 1e12),
          unit: z.enum(['ug/l', 'mg/l', 'counts/100ml']),
          basis: textSchema(40).default(''),
          averaging: textSchema(80).default(''),
          source: textSchema(300).min(1, 'Name where the value is published'),
        }),
      )
      .max(60)
      .default([]),
    sheetSource: textSchema(300).default(''),
    note: textSchema(2_000).default(''),
  })
  .superRefine(report(substanceProblems));
export type SubstanceData = z.infer<typeof substanceDataSchema>;

/* ---------- stations: gauges and sampling points ---------- */

export const stationDataSchema = z.object({
  kind: z.enum(['gauge', 'sampling-point', 'tide-gauge', 'current-meter', 'weather']),
  position: lonLatSchema,
  waterId: idSchema,
  channel: z.object({ reachId: z.string().min(1).max(64), chainageKm: z.number(), bank: bankSchema }).nullable().default(null),
  access: textSchema(500).default(''),
  note: textSchema(2_000).default(''),
});
export type StationData = z.infer<typeof stationDataSchema>;

/* ---------- one item, whichever register ---------- */

export const registerDataSchemas = {
  waters: waterDataSchema,
  receptors: receptorDataSchema,
  sources: sourceDataSchema,
  substances: substanceDataSchema,
  stations: stationDataSchema,
} as const;
export type RegisterData = {
  waters: WaterData;
  receptors: ReceptorData;
  sources: SourceData;
  substances: SubstanceData;
  stations: StationData;
};

const writeFields = {
  /** Short code used on the map and in tables, for example INT-1; unique within its register. */
  code: z.string().trim().min(1, 'Give a short code').max(20, 'At most 20 characters'),
  name: nameSchema,
  ownerName: textSchema(120).default(''),
  lastCheckedOn: daySchema.nullable().default(null),
  /** Why this was written; kept in the history. */
  reason: textSchema(300).default(''),
};
/** Body of POST /api/registers/:register and, with `version`, of PUT /api/registers/:register/:id. */
export const registerWriteSchema = (register: RegisterName) =>
  z.object({ ...writeFields, data: registerDataSchemas[register] as z.ZodType<RegisterData[RegisterName]> });
export const registerUpdateSchema = (register: RegisterName) => registerWriteSchema(register).extend({ version: z.number().int().min(1) });

export type RegisterItem<R extends RegisterName = RegisterName> = {
  id: string;
  register: R;
  code: string;
  name: string;
  ownerName: string;
  lastCheckedOn: string | null;
  /** Not checked within the age set for its register, or never. */
  isStale: boolean;
  version: number;
  updatedAt: string;
  updatedBy: string;
  isArchived: boolean;
  data: RegisterData[R];
  abilities: { update: boolean };
};

export const registerItemSchema = z.object({
  id: z.string(),
  register: registerNameSchema,
  code: z.string(),
  name: z.string(),
  ownerName: z.string(),
  lastCheckedOn: daySchema.nullable(),
  isStale: z.boolean(),
  version: z.number().int(),
  updatedAt: instantSchema,
  updatedBy: z.string(),
  isArchived: z.boolean(),
  data: z.unknown(),
  abilities: z.object({ update: z.boolean() }),
});

/** Days after which an unchecked entry is stale. Common practice, no source. */
export const staleAfterDays: Record<RegisterName, number> = { waters: 1_095, receptors: 365, sources: 365, substances: 1_095, stations: 730 };
/** "a year", "3 years": all the limits are whole years. */
export const staleAfterWords = (register: RegisterName): string => (staleAfterDays[register] === 365 ? 'a year' : `${staleAfterDays[register] / 365} years`);

/** What differs from the version before: path, and both values as short text ('' where there was none). */
export const registerChangeSchema = z.object({ path: z.string(), from: z.string(), to: z.string() });
export type RegisterChange = z.infer<typeof registerChangeSchema>;
export const registerHistoryEntrySchema = z.object({
  version: z.number().int(),
  at: z.string(),
  by: z.string(),
  reason: z.string(),
  name: z.string(),
  code: z.string(),
  changedPaths: z.array(z.string()),
  changes: z.array(registerChangeSchema),
});
export type RegisterHistoryEntry = z.infer<typeof registerHistoryEntrySchema>;

/** One stored version, whole. */
export const registerVersionSchema = z.object({
  version: z.number().int(),
  at: z.string(),
  by: z.string(),
  reason: z.string(),
  code: z.string(),
  name: z.string(),
  ownerName: z.string(),
  lastCheckedOn: z.string().nullable(),
  isArchived: z.boolean(),
  data: z.unknown(),
});
export type RegisterVersion<R extends RegisterName = RegisterName> = Omit<z.infer<typeof registerVersionSchema>, 'data'> & { data: RegisterData[R] };

const yesNo = z.enum(['true', 'false', '1', '0']).transform((text) => text === 'true' || text === '1');
/** Query of GET /api/registers/:register. Without a page size the whole register comes at once. */
export const registerListQuerySchema = z.object({
  search: z.string().trim().max(200, 'At most 200 characters').default(''),
  stale: yesNo.default(false),
  archived: yesNo.default(false),
  page: z.coerce.number().int().min(1, 'Pages count from 1').max(100_000).default(1),
  pageSize: z.coerce.number().int().min(1, 'At least 1').max(2_000, 'At most 2,000 a page').default(2_000),
});
export type RegisterListQuery = z.output<typeof registerListQuerySchema>;
/** `total` counts what the search found, `staleCount` the stale ones of the whole register in use. */
export const registerListSchema = z.object({ items: z.array(registerItemSchema), total: z.number().int(), page: z.number().int(), pageSize: z.number().int(), staleCount: z.number().int() });
export type RegisterList<R extends RegisterName = RegisterName> = Omit<z.infer<typeof registerListSchema>, 'items'> & { items: RegisterItem<R>[] };

/** Body of archive and restore. */
export const registerMoveSchema = z.object({ version: z.number().int().min(1), reason: textSchema(300).default('') });
/** Body of "checked": somebody has looked at the entry and found it right, today unless said. */
export const registerCheckedSchema = z.object({ version: z.number().int().min(1), on: daySchema.optional(), reason: textSchema(300).default('') });
