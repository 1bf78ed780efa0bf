import type { RequestHandler } from 'express';
import { Forbidden } from '../services/service-error';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses changes asked for by another site's page. The cookie is SameSite=Strict already; this holds also where a browser takes a
 * neighbouring origin for the same site. Source: W3C Fetch Metadata Request Headers, Sec-Fetch-Site.
 */
export const sameOrigin: RequestHandler = (req, _res, next) => {
  const site = req.get('sec-fetch-site');
  if (READING.has(req.method) || site === undefined || site === 'same-origin' || site === 'none') next();
  else next(new Forbidden('other-site', 'This was asked for by the page of another site.'));
};
