import { join } from 'node:path';
import compression from 'compression';
import express, { type Express, type RequestHandler } from 'express';
import helmet from 'helmet';
import type { Deps } from './deps';
import { allRoutes } from './features';
import { findActor } from './features/people/person.service';
import { createTilesRouter } from './features/tiles/tiles.router';
import { attemptLimits } from './http/attempt-limits';
import { limitBody, refuseDeepNesting, refuseForeignWrites, requestId, requireJson } from './http/guards';
import { notFoundHandler, problemHandler } from './http/problems';
import { mountRoutes } from './http/routes';
import { sessionMiddleware } from './http/sessions';

const BODY_LIMIT = 4 * 1024 * 1024;

/** Nothing from any other host: no page needs it and no page may ask for it. */
const securityHeaders = (isDevelopment: boolean): RequestHandler =>
  helmet({
    contentSecurityPolicy: isDevelopment
      ? false
      : {
          useDefaults: false,
          directives: {
            defaultSrc: ["'self'"],
            scriptSrc: ["'self'"],
            styleSrc: ["'self'"],
            imgSrc: ["'self'", 'data:', 'blob:'],
            fontSrc: ["'self'"],
            connectSrc: ["'self'"],
            workerSrc: ["'self'", 'blob:'],
            objectSrc: ["'none'"],
            baseUri: ["'none'"],
            formAction: ["'self'"],
            frameAncestors: ["'none'"],
          },
        },
    strictTransportSecurity: false,
    crossOriginOpenerPolicy: false,
    originAgentCluster: false,
  });

const isCompressible: NonNullable<Parameters<typeof compression>[0]>['filter'] = (req, res) =>
  !String(res.getHeader('content-type') ?? '').startsWith('text/event-stream') && compression.filter(req, res);

/** The whole application, listening to nothing. `client` serves the pages: built files, or Vite in development. */
export function createApp(deps: Deps, client?: RequestHandler): Express {
  const app = express();
  app.disable('x-powered-by');
  if (deps.config.isBehindProxy) app.set('trust proxy', 1);
  app.use(requestId, securityHeaders(deps.config.isDevelopment));
  app.use(compression({ filter: isCompressible }));
  app.use('/tiles', createTilesRouter({ folder: deps.config.tilesFolder }));
  app.use('/api', refuseForeignWrites, requireJson, limitBody(BODY_LIMIT), express.json({ limit: BODY_LIMIT }), refuseDeepNesting, ...sessionMiddleware(deps.config, deps.sessions, () => deps.now().getTime()));
  app.use(attemptLimits(deps.now));
  app.use(mountRoutes(allRoutes(deps), (req) => findActor(deps.db, req.session.personId)));
  app.use('/api', notFoundHandler);
  if (client) app.use(client);
  app.use(problemHandler(deps.log));
  return app;
}

/** Serves the built client: hashed assets for good, every other address the page itself. */
export function builtClient(folder: string): RequestHandler {
  const router = express.Router();
  router.use('/assets', express.static(join(folder, 'assets'), { immutable: true, maxAge: '1y', fallthrough: false }));
  router.use(express.static(folder, { index: false }));
  router.get('/{*path}', (_req, res) => res.set('cache-control', 'no-cache').sendFile(join(folder, 'index.html')));
  return router;
}
