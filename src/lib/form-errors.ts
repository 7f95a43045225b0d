import type { FieldPath, FieldValues, UseFormSetError } from 'react-hook-form';
import { ApiError } from './api-client';

const splitPath = (path: string): string => path.replace(/^body\./, '').replace(/^\//, '').replaceAll('/', '.').replace(/\[(\d+)\]/g, '.$1');

/**
 * Places the problem's errors on the fields they name. What belongs to no known field comes back as one text
 * for a notice above the form; null when every error found its field.
 */
export function placeErrors<T extends FieldValues>(error: unknown, setError: UseFormSetError<T>, fields: readonly FieldPath<T>[]): string | null {
  if (!(error instanceof ApiError)) return 'Something went wrong in this page. Load it again; what was saved is kept.';
  const { problem } = error;
  const homeless: string[] = [];
  let hasFocus = false;
  for (const { path, message } of problem.errors ?? []) {
    const name = splitPath(path);
    const field = fields.find((known) => name === known) ?? fields.find((known) => name.startsWith(`${known}.`));
    if (!field) {
      homeless.push(name ? `${name}: ${message}` : message);
      continue;
    }
    setError(field, { type: 'server', message }, { shouldFocus: !hasFocus });
    hasFocus = true;
  }
  if (homeless.length > 0) return homeless.join('. ');
  return hasFocus ? null : [problem.title, problem.detail].filter(Boolean).join('. ');
}

const sentence = (text: string): string => (/[.!?]$/.test(text) ? text : `${text}.`);

/** One readable text for any failure, with the request id to quote. */
export function errorText(error: unknown): string {
  if (!(error instanceof ApiError)) return 'Something went wrong in this page. Load it again; what was saved is kept.';
  const { title, detail, instance } = error.problem;
  return [title, detail, instance ? `Request ${instance}` : ''].filter(Boolean).map(sentence).join(' ');
}
