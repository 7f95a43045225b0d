import type { ErrorRequestHandler, RequestHandler, Response } from 'express';
import type { z } from 'zod';
import { type FieldError, type Problem, type ProblemCode, problemCodes } from '../../shared/problem';

/** An error the caller can act on; `detail` is safe to show. */
export class AppError extends Error {
  constructor(
    readonly code: ProblemCode,
    readonly detail: string = problemCodes[code].title,
    readonly extra: { errors?: FieldError[]; current?: unknown } = {},
  ) {
    super(detail);
  }
}

const shown = (value: unknown): string => {
  if (value === undefined) return '';
  const text = typeof value === 'string' ? value : JSON.stringify(value);
  return text === undefined ? '' : text.length > 60 ? `${text.slice(0, 57)}...` : text;
};

const valueAt = (input: unknown, path: readonly PropertyKey[]): unknown =>
  path.reduce<unknown>((at, key) => (at !== null && typeof at === 'object' ? (at as Record<PropertyKey, unknown>)[key] : undefined), input);

/** Values of these are never said back: answers end up in logs and screenshots. */
const secretKey = /password|token/i;

/** Issues of a failed parse as field errors that name the field, the value and the remedy. */
export function fieldErrors(error: z.ZodError, input: unknown): FieldError[] {
  return error.issues.slice(0, 50).map((issue) => {
    const value = issue.path.some((key) => secretKey.test(String(key))) ? '' : shown(valueAt(input, issue.path));
    return { path: issue.path.map(String).join('.'), message: value === '' || (issue.code === 'custom' && issue.message.includes(value)) ? issue.message : `${issue.message} (got ${value})` };
  });
}

export function sendProblem(res: Response, code: ProblemCode, detail: string, extra: { errors?: FieldError[]; current?: unknown } = {}): void {
  const { status, title } = problemCodes[code];
  const problem: Problem = { type: `urn:downreach:problem:${code}`, title, status, detail, instance: String(res.locals.requestId ?? ''), code, ...extra };
  res.status(status).type('application/problem+json').send(JSON.stringify(problem));
}

export const notFoundHandler: RequestHandler = (req, res) => sendProblem(res, 'not-found', `No ${req.method} ${req.path} here`);

export const TOO_LARGE = 'The request is larger than 4 MB: send less';

/** Last handler: turns whatever was thrown into a problem. Unknown errors are logged under the request id, never shown. */
export const problemHandler =
  (log: (line: string) => void): ErrorRequestHandler =>
  (error: unknown, req, res, next) => {
    if (res.writableEnded) return;
    if (res.headersSent) return next(error);
    if (error instanceof AppError) return sendProblem(res, error.code, error.detail, error.extra);
    const http = error as { type?: string; status?: number; message?: string };
    if (http?.type === 'entity.too.large') return sendProblem(res, 'too-large', TOO_LARGE);
    if (http?.type === 'entity.parse.failed') return sendProblem(res, 'bad-json', `The body is not JSON: ${http.message ?? ''}`);
    if (http?.status !== undefined && http.status >= 400 && http.status < 500)
      return sendProblem(res, http.status === 415 ? 'unsupported-type' : 'bad-json', `The request cannot be read: ${http.message ?? ''}`);
    log(`[${res.locals.requestId}] ${req.method} ${req.path}: ${error instanceof Error ? (error.stack ?? error.message) : String(error)}`);
    return sendProblem(res, 'internal', `Quote ${res.locals.requestId} when you report this`);
  };
