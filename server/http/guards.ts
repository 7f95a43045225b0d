import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import { TOO_LARGE, sendProblem } from './problems';

/** Gives every request an id, sent back as x-request-id and quoted in problems. */
export const requestId: RequestHandler = (_req, res, next) => {
  res.locals.requestId = randomUUID();
  res.set('x-request-id', String(res.locals.requestId));
  next();
};

/** Refuses writes that another site's page started. Browsers say so in Sec-Fetch-Site, older ones in Origin. */
export const refuseForeignWrites: RequestHandler = (req, res, next) => {
  if (req.method === 'GET' || req.method === 'HEAD' || req.method === 'OPTIONS') return next();
  const site = req.get('sec-fetch-site');
  const origin = req.get('origin');
  const foreign = site ? site !== 'same-origin' && site !== 'none' : origin ? hostOf(origin) !== req.get('host') : false;
  if (foreign) return sendProblem(res, 'foreign-request', 'Writes are taken from Downreach pages and from programs, not from other sites');
  next();
};

const hostOf = (origin: string): string => {
  try {
    return new URL(origin).host;
  } catch {
    return '';
  }
};

/** JSON is the only body the API takes. */
export const requireJson: RequestHandler = (req, res, next) => {
  const length = Number(req.get('content-length') ?? 0);
  if ((length > 0 || req.get('transfer-encoding')) && !req.is('application/json')) return sendProblem(res, 'unsupported-type', `Send application/json, not ${req.get('content-type') ?? 'an unnamed type'}`);
  next();
};

/** Refuses a body as soon as it is known to be too large, without waiting for the rest of it. */
export const limitBody =
  (maxBytes: number): RequestHandler =>
  (req, res, next) => {
    const refuse = () => {
      res.set('connection', 'close');
      sendProblem(res, 'too-large', TOO_LARGE);
    };
    if (Number(req.get('content-length') ?? 0) > maxBytes) return refuse();
    if (req.get('transfer-encoding')) {
      let received = 0;
      req.on('data', function count(chunk: Buffer) {
        received += chunk.length;
        if (received <= maxBytes) return;
        req.off('data', count);
        refuse();
      });
    }
    next();
  };

/** Deepest nesting of a body. An estimate document needs a tenth of it. */
const MAX_DEPTH = 100;

/** Refuses bodies whose nesting would exhaust the stack of whatever walks through them. Goes level by level itself. */
export const refuseDeepNesting: RequestHandler = (req, res, next) => {
  let level: unknown[] = [req.body];
  for (let depth = 0; level.length > 0; depth++) {
    if (depth > MAX_DEPTH) return sendProblem(res, 'bad-json', `The body is nested more than ${MAX_DEPTH} levels deep: send a flatter one`);
    level = level.flatMap((item) => (item !== null && typeof item === 'object' ? Object.values(item) : []));
  }
  next();
};
