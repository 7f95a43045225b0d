import { z } from 'zod';
import { roles } from '../permissions';
import { nameSchema, textSchema } from './basics';

export const roleSchema = z.enum(roles);
export const emailSchema = z.string().trim().toLowerCase().max(200, 'At most 200 characters').pipe(z.email('Give an e-mail address such as name@example.org'));
/** Length rules after NIST SP 800-63B: long is what counts, no composition rules. */
export const newPasswordSchema = z.string().min(12, 'At least 12 characters').max(200, 'At most 200 characters');

export const signInSchema = z.object({ email: emailSchema, password: z.string().min(1, 'Give your password').max(200) });
export const passwordChangeSchema = z.object({ currentPassword: z.string().min(1).max(200), newPassword: newPasswordSchema });
export const passwordForgottenSchema = z.object({ email: emailSchema });
/** Used for invitations and resets alike: a one-time token from the mailed link sets the password. */
export const passwordSetSchema = z.object({ token: z.string().min(20).max(200), newPassword: newPasswordSchema });
/** What a one-time link is for, asked before the password is typed. */
export const passwordLinkSchema = z.object({ token: z.string().min(20).max(200) });
export const passwordLinkAnswerSchema = z.object({ purpose: z.enum(['invitation', 'reset']), name: z.string(), email: z.string(), expiresAt: z.string() });
export type PasswordLinkAnswer = z.infer<typeof passwordLinkAnswerSchema>;
export const personCreateSchema = z.object({ name: nameSchema, email: emailSchema, roles: z.array(roleSchema).min(1, 'Choose at least one role').max(5), phone: textSchema(60).default(''), licenceNumber: textSchema(60).default('') });
export const personUpdateSchema = personCreateSchema.omit({ email: true }).extend({ isActive: z.boolean(), version: z.number().int().min(1) });

export const personSchema = z.object({
  id: z.string(),
  name: z.string(),
  email: z.string(),
  roles: z.array(roleSchema),
  phone: z.string(),
  licenceNumber: z.string(),
  isActive: z.boolean(),
  hasPassword: z.boolean(),
  lastSignInAt: z.string().nullable(),
  version: z.number().int(),
});
export type Person = z.infer<typeof personSchema>;

/** GET /api/session: who is signed in; `person` is null for a visitor. */
export const sessionSchema = z.object({
  person: z.object({ id: z.string(), name: z.string(), email: z.string(), roles: z.array(roleSchema) }).nullable(),
  isDemo: z.boolean(),
  /** Demo mode only: the sign-ins offered on the sign-in page. */
  demoSignIns: z.array(z.object({ email: z.string(), password: z.string(), name: z.string(), role: roleSchema, roles: z.array(roleSchema) })),
  productVersion: z.string(),
  engineVersion: z.string(),
  /** Offset used where no incident sets one, for example "-08:00". */
  utcOffset: z.string(),
  organisation: z.string(),
});
export type Session = z.infer<typeof sessionSchema>;
