import { z } from 'zod';

/** Every error answer leaves as application/problem+json (RFC 9457). Codes and their statuses are this table. */
export const problemCodes = {
  'bad-input': { status: 422, title: 'Some of this cannot be used' },
  'bad-json': { status: 400, title: 'This is not readable JSON' },
  'too-large': { status: 413, title: 'This is larger than the limit' },
  'unsupported-type': { status: 415, title: 'Send JSON' },
  'not-signed-in': { status: 401, title: 'Sign in first' },
  'sign-in-failed': { status: 401, title: 'E-mail and password do not match' },
  'not-allowed': { status: 403, title: 'Your role does not allow this' },
  'foreign-request': { status: 403, title: 'This request came from another site' },
  'not-found': { status: 404, title: 'There is nothing here' },
  'method-not-allowed': { status: 405, title: 'This address does not take that method' },
  'stale-version': { status: 409, title: 'Somebody else has changed this' },
  'wrong-state': { status: 409, title: 'This cannot be done in its present state' },
  duplicate: { status: 409, title: 'This exists already' },
  'link-used-or-expired': { status: 410, title: 'This link has been used or has expired' },
  'too-many-attempts': { status: 429, title: 'Too many attempts: wait and try again' },
  'cannot-be-estimated': { status: 422, title: 'This cannot be estimated' },
  unavailable: { status: 503, title: 'Not available just now' },
  internal: { status: 500, title: 'Something went wrong on our side' },
} as const;
export type ProblemCode = keyof typeof problemCodes;

export const fieldErrorSchema = z.object({ path: z.string(), message: z.string() });
export type FieldError = z.infer<typeof fieldErrorSchema>;

export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  /** The request id, to be quoted when asking for help. */
  instance: z.string(),
  code: z.string(),
  errors: z.array(fieldErrorSchema).optional(),
  /** For stale-version: the present version, so that both can be compared. */
  current: z.unknown().optional(),
});
export type Problem = z.infer<typeof problemSchema>;
