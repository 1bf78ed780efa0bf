import { randomUUID } from 'node:crypto';
import type { IncomingMessage, ServerResponse } from 'node:http';
import type { RequestHandler } from 'express';
import type { Logger } from 'pino';
import { pinoHttp } from 'pino-http';

/** Logs each answer under an id, which the answer carries too. Never a query, a ticket, a token or a body. */
export function requestLog(logger: Logger): RequestHandler {
  return pinoHttp({
    logger,
    genReqId: (_req: IncomingMessage, res: ServerResponse) => {
      const id = randomUUID();
      res.setHeader('X-Request-Id', id);
      return id;
    },
    customLogLevel: (_req, res, error) => {
      if (error !== undefined || res.statusCode >= 500) return 'error';
      return res.statusCode >= 400 ? 'info' : 'debug';
    },
    serializers: {
      req: (req: { id: string; method: string; url: string }) => ({
        id: req.id,
        method: req.method,
        path: req.url.replace(/[?#].*$/s, '').replace(/^(\/api\/downloads\/).*/, '$1…'),
      }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
    },
  });
}
