import { problemSchema, type Problem, type ProblemCode } from '../../shared/problem';
import { noteServerDate } from './server-clock';

/** Every failed request ends as one of these; `problem` is safe to show. Status 0: the server did not answer. */
export class ApiError extends Error {
  constructor(
    readonly status: number,
    readonly problem: Problem,
  ) {
    super(`${problem.title}. ${problem.detail}`);
    this.name = 'ApiError';
  }

  is(code: ProblemCode): boolean {
    return this.problem.code === code;
  }
}

type Options = { signal?: AbortSignal };

const noAnswer = (): ApiError =>
  new ApiError(0, {
    type: 'about:blank',
    title: 'The server does not answer',
    status: 0,
    detail: 'Check the connection to this network, then try again. What you have typed is still here.',
    instance: '',
    code: 'unavailable' satisfies ProblemCode,
  });

async function errorOf(response: Response): Promise<ApiError> {
  const body: unknown = await response.json().catch(() => null);
  const parsed = problemSchema.safeParse(body);
  if (parsed.success) return new ApiError(response.status, parsed.data);
  return new ApiError(response.status, {
    type: 'about:blank',
    title: 'The server answered something unreadable',
    status: response.status,
    detail: `Status ${response.status}. Try again; if it stays so, tell your administrator.`,
    instance: response.headers.get('x-request-id') ?? '',
    code: 'internal' satisfies ProblemCode,
  });
}

async function send(method: string, path: string, body: unknown, { signal }: Options): Promise<Response> {
  const hasBody = body !== undefined;
  const response = await fetch(path, {
    method,
    credentials: 'same-origin',
    headers: { accept: 'application/json, application/problem+json', ...(hasBody ? { 'content-type': 'application/json' } : {}) },
    ...(hasBody ? { body: JSON.stringify(body) } : {}),
    ...(signal ? { signal } : {}),
  }).catch((error: unknown) => {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw noAnswer();
  });
  noteServerDate(response.headers.get('date'), Date.now());
  if (!response.ok) throw await errorOf(response);
  return response;
}

async function json<T>(method: string, path: string, body: unknown, options: Options = {}): Promise<T> {
  const response = await send(method, path, body, options);
  if (response.status === 204) return undefined as T;
  return (await response.json()) as T;
}

export const api = {
  get: <T>(path: string, options?: Options) => json<T>('GET', path, undefined, options),
  post: <T>(path: string, body: unknown = {}, options?: Options) => json<T>('POST', path, body, options),
  put: <T>(path: string, body: unknown, options?: Options) => json<T>('PUT', path, body, options),
  /** The bare answer, for streams and files. Throws ApiError as the others do. */
  raw: (method: 'GET' | 'POST', path: string, body?: unknown, options: Options = {}) => send(method, path, body, options),
};
