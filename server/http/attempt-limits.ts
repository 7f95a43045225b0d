import { type NextFunction, type Request, type RequestHandler, type Response, Router } from 'express';
import { type ClientRateLimitInfo, ipKeyGenerator, rateLimit, type Store } from 'express-rate-limit';
import { apiPaths } from '../../shared/api-paths';
import { sendProblem } from './problems';

const MINUTE_MS = 60_000;

/** Counts per key in fixed windows by the server's own clock. One process answers, so memory is enough. */
class WindowStore implements Store {
  readonly localKeys = true;
  private readonly windows = new Map<string, { totalHits: number; endsAt: number }>();
  private nextSweepAt = 0;

  constructor(private readonly now: () => number, private readonly windowMs: number) {}

  increment(key: string): ClientRateLimitInfo {
    this.sweep();
    const known = this.windows.get(key);
    const window = known && known.endsAt > this.now() ? known : { totalHits: 0, endsAt: this.now() + this.windowMs };
    window.totalHits += 1;
    this.windows.set(key, window);
    return { totalHits: window.totalHits, resetTime: new Date(window.endsAt) };
  }

  decrement(key: string): void {
    const window = this.windows.get(key);
    if (window) window.totalHits = Math.max(0, window.totalHits - 1);
  }

  resetKey(key: string): void {
    this.windows.delete(key);
  }

  private sweep(): void {
    if (this.now() < this.nextSweepAt) return;
    this.nextSweepAt = this.now() + this.windowMs;
    for (const [key, { endsAt }] of this.windows) if (endsAt <= this.now()) this.windows.delete(key);
  }
}

type Limit = { limit: number; windowMs: number; keyOf: (req: Request) => string; counts: (res: Response) => boolean };

const addressOf = (req: Request): string => ipKeyGenerator(req.ip ?? '');
const accountOf = (req: Request): string => {
  const { email } = (req.body ?? {}) as { email?: unknown };
  return typeof email === 'string' ? email.trim().toLowerCase().slice(0, 200) : '';
};
const accountAndAddress = (req: Request): string => `${accountOf(req)} ${addressOf(req)}`;
const personOf = (req: Request): string => req.session.personId ?? addressOf(req);

const always = () => true;
const refused = (res: Response) => res.statusCode === 401;
const failed = (res: Response) => res.statusCode >= 400;

/**
 * Guessing is slowed per account from one address, per address, and per account from everywhere. The last is wide, so that
 * nobody can lock a colleague out from outside, and stays below the 100 failures that NIST SP 800-63B, section 5.2.2 (2017) allows.
 */
export function attemptLimits(clock: () => Date): RequestHandler {
  const now = () => clock().getTime();
  const limited = (limit: Limit): RequestHandler => limiter(limit, now);
  const router = Router();
  router.post(
    apiPaths.signIn,
    limited({ limit: 30, windowMs: 15 * MINUTE_MS, keyOf: addressOf, counts: refused }),
    limited({ limit: 8, windowMs: 15 * MINUTE_MS, keyOf: accountAndAddress, counts: refused }),
    limited({ limit: 90, windowMs: 60 * MINUTE_MS, keyOf: accountOf, counts: refused }),
  );
  router.post(
    apiPaths.passwordForgotten,
    limited({ limit: 20, windowMs: 60 * MINUTE_MS, keyOf: addressOf, counts: always }),
    limited({ limit: 4, windowMs: 60 * MINUTE_MS, keyOf: accountOf, counts: always }),
  );
  const links = limited({ limit: 30, windowMs: 15 * MINUTE_MS, keyOf: addressOf, counts: failed });
  router.post(apiPaths.passwordSet, links);
  router.post(apiPaths.passwordLink, links);
  router.post(apiPaths.passwordChange, limited({ limit: 10, windowMs: 15 * MINUTE_MS, keyOf: personOf, counts: failed }));
  return router;
}

function limiter({ limit, windowMs, keyOf, counts }: Limit, now: () => number): RequestHandler {
  return rateLimit({
    limit,
    windowMs,
    store: new WindowStore(now, windowMs),
    keyGenerator: keyOf,
    skipSuccessfulRequests: true,
    requestWasSuccessful: (_req, res) => !counts(res),
    legacyHeaders: false,
    standardHeaders: false,
    validate: false,
    handler: (req: Request & { rateLimit?: { resetTime?: Date } }, res: Response, _next: NextFunction) => {
      const waitS = Math.max(1, Math.ceil(((req.rateLimit?.resetTime?.getTime() ?? now() + windowMs) - now()) / 1_000));
      res.set('retry-after', String(waitS));
      sendProblem(res, 'too-many-attempts', `Try again in ${inWords(waitS)}`);
    },
  });
}

const inWords = (seconds: number): string => {
  const minutes = Math.ceil(seconds / 60);
  return minutes === 1 ? '1 minute' : `${minutes} minutes`;
};
