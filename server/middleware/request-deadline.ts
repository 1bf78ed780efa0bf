import type { RequestHandler } from 'express';

const LONGEST_MS = 60_000;

/** Gives up on a request whose body does not come in. Uploads may take longer: they watch their pace themselves. */
export const requestDeadline: RequestHandler = (req, _res, next) => {
  if (!req.is('multipart/form-data') && !req.complete) {
    const timer = setTimeout(() => req.destroy(), LONGEST_MS);
    timer.unref();
    req.once('end', () => clearTimeout(timer));
    req.once('close', () => clearTimeout(timer));
  }
  next();
};
