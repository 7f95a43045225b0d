import { Router, type Request, type Response } from 'express';
import type { z } from 'zod';
import { type Action, type Role, allows } from '../../shared/permissions';
import { AppError, fieldErrors } from './problems';

/** Who asks: set by the session, never by the request. */
export type Actor = Readonly<{ id: string; name: string; email: string; roles: readonly Role[] }>;

type Parsed<S> = S extends z.ZodType ? z.output<S> : undefined;
export type RouteContext<B, Q, P, A> = { body: Parsed<B>; query: Parsed<Q>; params: Parsed<P>; actor: A; req: Request; res: Response };

/** One route: who may call it, what it takes, what it answers. The router, the OpenAPI page and the tests all read this. */
export type Route = Readonly<{
  method: 'get' | 'post' | 'put' | 'delete';
  /** Express path, for example /api/runs/:runId. */
  path: string;
  action: Action | 'public';
  summary: string;
  tag: string;
  body?: z.ZodType;
  query?: z.ZodType;
  params?: z.ZodType;
  response?: z.ZodType;
  /** Status of a good answer; 200 unless said. */
  status?: number;
  /** Media type when the answer is not JSON. */
  produces?: string;
  handle: (context: RouteContext<undefined, undefined, undefined, Actor | null>) => Promise<unknown> | unknown;
}>;

/** Declares a route with its types tied together. A handler that answers by itself returns undefined. */
export function route<
  A extends Action | 'public',
  B extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
  P extends z.ZodType | undefined = undefined,
>(definition: {
  method: Route['method'];
  path: string;
  action: A;
  summary: string;
  tag: string;
  body?: B;
  query?: Q;
  params?: P;
  response?: z.ZodType;
  status?: number;
  produces?: string;
  handle: (context: RouteContext<B, Q, P, A extends 'public' ? Actor | null : Actor>) => Promise<unknown> | unknown;
}): Route {
  return definition as unknown as Route;
}

function parsePart(schema: z.ZodType | undefined, input: unknown): unknown {
  if (!schema) return undefined;
  const parsed = schema.safeParse(input);
  if (!parsed.success) {
    const errors = fieldErrors(parsed.error, input);
    throw new AppError('bad-input', errors[0] ? `${errors[0].path || 'body'}: ${errors[0].message}` : 'The input cannot be used', { errors });
  }
  return parsed.data;
}

/** Mounts routes: permission first, then validation, then the handler, whose value is the JSON answer. */
export function mountRoutes(routes: readonly Route[], actorOf: (req: Request) => Promise<Actor | null>): Router {
  const router = Router();
  for (const item of routes) {
    router[item.method](item.path, async (req, res) => {
      const actor = await actorOf(req);
      if (item.action !== 'public') {
        if (!actor) throw new AppError('not-signed-in');
        if (!allows(actor.roles, item.action)) throw new AppError('not-allowed', `This needs the right "${item.action}", which your roles (${actor.roles.join(', ')}) do not give`);
      }
      const context = { params: parsePart(item.params, req.params), query: parsePart(item.query, req.query), body: parsePart(item.body, req.body), actor, req, res };
      const answer = await item.handle(context as never);
      if (answer === undefined) {
        if (!res.headersSent) res.status(item.status ?? 204).end();
        return;
      }
      res.status(item.status ?? 200).json(answer);
    });
  }
  return router;
}
