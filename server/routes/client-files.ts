import { existsSync } from 'node:fs';
import { join } from 'node:path';
import type { RequestHandler } from 'express';
import { Router } from 'express';
import sirv from 'sirv';

/** Names that change with their content, and the editor's folder, which carries its version. */
const HASHED = /-[0-9A-Z]{8}\.(js|css|woff2?)$/;
const VERSIONED = /^\/assets\/monaco\/[^/]*\d[^/]*\//;
const IMMUTABLE = 'public, max-age=31536000, immutable';

/** The built client: files as they are, packed where the build packed them, and the start page for every route of its own. */
export function clientFiles(folder: string): RequestHandler {
  const router = Router();
  if (!existsSync(join(folder, 'index.html'))) {
    router.get('/', (_req, res) => {
      res.status(503).type('text/plain').send('The client is not built. Run npm run build.\n');
    });
    return router;
  }
  router.use(
    sirv(folder, {
      brotli: true,
      gzip: true,
      dev: false,
      extensions: [],
      setHeaders: (res, path) => {
        const isImmutable = HASHED.test(path) || VERSIONED.test(path);
        res.setHeader('Cache-Control', isImmutable ? IMMUTABLE : 'no-cache');
      },
    }),
  );
  router.get('/{*path}', (req, res, next) => {
    // A missing file must be missing, not a page.
    if (/\.[^/]*$/.test(req.path)) {
      next();
      return;
    }
    res.set('Cache-Control', 'no-store').sendFile(join(folder, 'index.html'), { cacheControl: false });
  });
  return router;
}
