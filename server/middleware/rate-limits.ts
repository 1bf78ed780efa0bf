import type { RequestHandler } from 'express';
import { ipKeyGenerator, rateLimit } from 'express-rate-limit';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { sendProblem } from './problem-handler';

/** Requests a minute from one address. */
export interface RateLimits {
  /** Passwords and links: each costs the server a quarter of a second, or could be a guess. */
  readonly guesses: number;
  /** Reading a whole capture while somebody waits. */
  readonly previews: number;
  readonly others: number;
}

export const RATE_LIMITS: RateLimits = { guesses: 30, previews: 120, others: 1800 };

const GUESSES: ReadonlySet<EndpointKey> = new Set<EndpointKey>([
  'POST /session',
  'POST /me/password',
  'POST /password-reset',
  'POST /password-reset/check',
]);
const PREVIEWS: ReadonlySet<EndpointKey> = new Set<EndpointKey>([
  'GET /captures/:number/lines',
  'POST /captures/:number/preview',
]);

/** The limiter of each endpoint: endpoints of a kind share one. */
export function makeRateLimiters(limits: RateLimits): (key: EndpointKey) => RequestHandler {
  const guesses = limiter(limits.guesses);
  const previews = limiter(limits.previews);
  const others = limiter(limits.others);
  return (key) => {
    if (GUESSES.has(key)) return guesses;
    return PREVIEWS.has(key) ? previews : others;
  };
}

function limiter(limit: number): RequestHandler {
  return rateLimit({
    windowMs: 60_000,
    limit,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    keyGenerator: (req) => ipKeyGenerator(req.ip ?? 'unknown'),
    handler: (req, res) => {
      const resetMs = (req as { rateLimit?: { resetTime?: Date } }).rateLimit?.resetTime?.getTime();
      const retryAfterS = Math.max(1, Math.ceil(((resetMs ?? Date.now() + 60_000) - Date.now()) / 1000));
      const detail = `Too many requests. Wait ${retryAfterS} s and try again.`;
      sendProblem(res, { status: 429, code: 'too-many', detail, retryAfterS });
    },
  });
}
