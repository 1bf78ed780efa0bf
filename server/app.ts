import compression from 'compression';
import cookieParser from 'cookie-parser';
import express from 'express';
import type { Express, Request, Response } from 'express';
import type { Logger } from 'pino';
import { TOOL } from '#shared/decode/version';
import type { Config } from './config';
import { authentication } from './middleware/authentication';
import { EndpointRouter } from './middleware/endpoint-router';
import { problemHandler, sendProblem } from './middleware/problem-handler';
import type { RateLimits } from './middleware/rate-limits';
import { makeRateLimiters, RATE_LIMITS } from './middleware/rate-limits';
import { requestDeadline } from './middleware/request-deadline';
import { requestLog } from './middleware/request-log';
import { refuseUnlistedRoutes } from './middleware/route-audit';
import { sameOrigin } from './middleware/same-origin';
import { securityHeaders } from './middleware/security-headers';
import { captureRoutes } from './routes/capture-routes';
import { clientFiles } from './routes/client-files';
import { decodeRoutes } from './routes/decode-routes';
import { deviceRoutes } from './routes/device-routes';
import { documentRoutes } from './routes/document-routes';
import { downloadRoutes } from './routes/download-routes';
import { eventRoutes } from './routes/event-routes';
import { mappingRoutes } from './routes/mapping-routes';
import { peopleRoutes } from './routes/people-routes';
import { sessionRoutes } from './routes/session-routes';
import type { Services } from './services/services';

const LARGEST_BODY = '512kb';

export interface AppParts {
  readonly config: Config;
  readonly services: Services;
  readonly logger: Logger;
  /** Folder of the built client. */
  readonly clientDir: string;
  readonly rateLimits?: RateLimits;
  /** Hold every answer against the contract: in tests. */
  readonly isChecking?: boolean;
}

/** Puts the server together. It does not listen. */
export function createApp(parts: AppParts): Express {
  const { config, services, logger, clientDir } = parts;
  const app = express();
  app.disable('x-powered-by');
  app.disable('etag');
  app.set('trust proxy', config.trustProxy);
  app.set('query parser', 'simple');
  app.use(requestLog(logger), securityHeaders(config.publicUrl.startsWith('https:')));
  app.get('/healthz', async (_req, res) => {
    await services.store.reader.query('SELECT 1');
    res.set('Cache-Control', 'no-store').json({ status: 'ok', version: TOOL.version });
  });
  app.use('/api', apiRouter(parts));
  app.all('/api/*rest', (_req, res) => {
    sendProblem(res, { status: 404, code: 'no-such-path', detail: 'There is no such path.' });
  });
  app.use(clientFiles(clientDir));
  app.use((_req, res) => {
    sendProblem(res, { status: 404, code: 'no-such-path', detail: 'There is no such path.' });
  });
  app.use(problemHandler(logger));
  refuseUnlistedRoutes(app);
  return app;
}

function apiRouter({ config, services, rateLimits, isChecking }: AppParts): express.Router {
  const endpoints = new EndpointRouter();
  sessionRoutes(endpoints, services, config);
  peopleRoutes(endpoints, services);
  captureRoutes(endpoints, services, config);
  mappingRoutes(endpoints, services);
  decodeRoutes(endpoints, services);
  deviceRoutes(endpoints, services);
  downloadRoutes(endpoints, services);
  eventRoutes(endpoints, services);
  documentRoutes(endpoints, config);
  const router = express.Router();
  router.use(
    requestDeadline,
    compression({ filter: shouldCompress }),
    cookieParser(),
    sameOrigin,
    express.json({ limit: LARGEST_BODY }),
    endpoints.build({
      authenticate: authentication(services.sessions),
      limiterOf: makeRateLimiters(rateLimits ?? RATE_LIMITS),
      isChecking: isChecking === true,
    }),
  );
  return router;
}

/** Tapes are numbers in columns: they shrink to a third, though their type does not say so. */
function shouldCompress(req: Request, res: Response): boolean {
  return req.path.endsWith('/tape') || compression.filter(req, res);
}
