import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import { sendProblem } from './problems';

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
