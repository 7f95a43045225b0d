import { z } from 'zod';

/** WGS 84 position, degrees: longitude first, as in RFC 7946. */
export const lonLatSchema = z.tuple([
  z.number().min(-180, 'Longitude runs from -180 to 180 degrees').max(180, 'Longitude runs from -180 to 180 degrees'),
  z.number().min(-85, 'Latitude runs from -85 to 85 degrees').max(85, 'Latitude runs from -85 to 85 degrees'),
]);
export type LonLat = z.infer<typeof lonLatSchema>;

/** Closed ring: first and last position equal, at least four positions. */
export const ringSchema = z
  .array(lonLatSchema)
  .min(4, 'A ring needs at least four positions')
  .max(20_000, 'A ring may have at most 20,000 positions; simplify it')
  .refine((ring) => {
    const first = ring[0];
    const last = ring[ring.length - 1];
    return !!first && !!last && first[0] === last[0] && first[1] === last[1];
  }, 'The ring is open: repeat the first position at its end');

/** Instant with its UTC offset, for example 2031-05-12T06:40:00-08:00. */
export const instantSchema = z.iso.datetime({
  offset: true,
  error: 'Give a date and time with its UTC offset, for example 2031-05-12T06:40:00-08:00',
});

/** Calendar day, for example 2031-05-12. */
export const daySchema = z.iso.date('Give a day as yyyy-mm-dd');

export const textSchema = (max: number) =>
  z.string().trim().max(max, `At most ${max} characters`);
export const nameSchema = z.string().trim().min(1, 'Give a name').max(120, 'At most 120 characters');
export const idSchema = z.string().regex(/^[a-z0-9][a-z0-9-]{0,63}$/, 'An id is made of a-z, 0-9 and hyphens');

/** Below this a figure is none that anybody means, and reckoning with it loses all digits. */
const SMALLEST = 1e-30;

/** Finite number above zero and at most `max`, with the unit in the message. */
export const positive = (unit: string, max: number, min = 0) =>
  z
    .number({ error: `Give a number in ${unit}` })
    .gt(min, `Must be above ${min} ${unit}`)
    .max(max, `Must be at most ${max} ${unit}`)
    .refine((value) => value <= 0 || value >= SMALLEST, `Too small to be meant: give at least ${SMALLEST} ${unit}, or 0 where that is allowed`);

/** Finite number of zero or more and at most `max`, with the unit in the message. */
export const notNegative = (unit: string, max: number) =>
  z
    .number({ error: `Give a number in ${unit}` })
    .min(0, `Must not be below 0 ${unit}`)
    .max(max, `Must be at most ${max} ${unit}`);

export const bankSchema = z.enum(['left', 'right', 'mid']);
/** Bank looking downstream; `mid` is mid-channel. */
export type Bank = z.infer<typeof bankSchema>;

/** A likely figure with its low and high figures; low <= likely <= high. */
export const rangeSchema = (unit: string, max: number) =>
  z
    .object({
      low: notNegative(unit, max).nullable().default(null),
      likely: positive(unit, max),
      high: positive(unit, max).nullable().default(null),
    })
    .superRefine((range, ctx) => {
      if (range.low !== null && range.low > range.likely)
        ctx.addIssue({ code: 'custom', path: ['low'], message: `Low (${range.low}) is above likely (${range.likely}) ${unit}: lower it` });
      if (range.high !== null && range.high < range.likely)
        ctx.addIssue({ code: 'custom', path: ['high'], message: `High (${range.high}) is below likely (${range.likely}) ${unit}: raise it` });
    });
export type Range = { low: number | null; likely: number; high: number | null };
