import type { FieldErrors, FieldValues } from 'react-hook-form';
import { ApiError } from '../../../lib/api-client';
import { errorText } from '../../../lib/form-errors';

export type FoundError = { path: string; message: string };

/** Every message under an error of a form, with its path. */
export function errorsUnder(errors: unknown, path = ''): FoundError[] {
  if (typeof errors !== 'object' || errors === null) return [];
  const own = errors as { message?: unknown; ref?: unknown };
  if (typeof own.message === 'string') return [{ path: path.replace(/\.root$/, ''), message: own.message }];
  return Object.entries(errors).flatMap(([key, value]) => (key === 'ref' ? [] : errorsUnder(value, path === '' ? key : `${path}.${key}`)));
}

/** The first message at or under a path. */
export function messageAt(errors: FieldErrors<FieldValues>, path: string): string | undefined {
  const at = path.split('.').reduce<unknown>((node, key) => (typeof node === 'object' && node !== null ? (node as Record<string, unknown>)[key] : undefined), errors);
  return errorsUnder(at, path)[0]?.message;
}

/** A message that stands at the path itself, not deeper: a table is refused as a whole, its cells one by one. */
export function ownMessageAt(errors: FieldErrors<FieldValues>, path: string): string | undefined {
  const at = path.split('.').reduce<unknown>((node, key) => (typeof node === 'object' && node !== null ? (node as Record<string, unknown>)[key] : undefined), errors) as { message?: unknown; root?: { message?: unknown } } | undefined;
  const message = at?.message ?? at?.root?.message;
  return typeof message === 'string' ? message : undefined;
}

/** Every path of a form's values, the deepest first, so that an error lands on the nearest field there is. */
export function pathsOf(values: unknown, path = ''): string[] {
  const children = typeof values === 'object' && values !== null ? Object.entries(values).flatMap(([key, value]) => pathsOf(value, path === '' ? key : `${path}.${key}`)) : [];
  return path === '' ? children.toSorted((a, b) => b.length - a.length) : [...children, path];
}

/** Why something was refused. What the server says of its own rules stands alone; a failure brings the request id. */
export const refusalText = (error: unknown): string => (error instanceof ApiError && error.status >= 400 && error.status < 500 ? error.problem.detail : errorText(error));
