import type { Response } from 'express';
import { captureNumberSchema } from '#shared/contract/http/capture-number';
import { productQuerySchema } from '#shared/contract/http/decodes';
import type { EndpointRouter } from '../middleware/endpoint-router';
import type { Download, DownloadKind } from '../services/download-service';
import { Invalid } from '../services/service-error';
import type { Services } from '../services/services';

const YEAR_MS = 365 * 24 * 3600_000;
const CAPTURE_PATH = /^\/captures\/([^/]+)\/file$/;
const PRODUCT_PATH = /^\/decodes\/(\d{1,15})\/(result|tape|log|packets\.csv)$/;

export function downloadRoutes(router: EndpointRouter, { downloads, tickets }: Services): void {
  const product = (kind: DownloadKind, id: number, check?: number) => downloads.product(kind, id, check);
  router
    .on('GET /captures/:number/file', async ({ params, res }) =>
      send(res, await downloads.capture(params.number)),
    )
    .on('GET /decodes/:id/result', async ({ params, query, res }) =>
      send(res, await product('result', params.id, query.check)),
    )
    .on('GET /decodes/:id/log', async ({ params, query, res }) =>
      send(res, await product('log', params.id, query.check)),
    )
    .on('GET /decodes/:id/tape', async ({ params, res }) => send(res, await product('tape', params.id)))
    .on('GET /decodes/:id/packets.csv', async ({ params, res }) =>
      send(res, await product('packets.csv', params.id)),
    )
    .on('POST /download-tickets', async ({ body }) => {
      const { ticket, expiresAt } = tickets.issue(await findDownload(downloads, body.path));
      return { url: `/api/downloads/${ticket}`, expiresAt: new Date(expiresAt).toISOString() };
    })
    .on('GET /downloads/:ticket', async ({ params, res }) => {
      const download = tickets.redeem(params.ticket);
      res.attachment(download.name);
      return send(res, { ...download, isImmutable: false });
    });
}

/** The download a path below `/api` stands for. Whoever may sign in may have all of them: see the table of permissions. */
async function findDownload(downloads: Services['downloads'], path: string): Promise<Download> {
  const [pathname, query] = path.split('?', 2);
  const capture = captureNumberSchema.safeParse(CAPTURE_PATH.exec(pathname)?.[1]);
  if (capture.success) return downloads.capture(capture.data);
  const [, id, kind] = PRODUCT_PATH.exec(pathname) ?? [];
  if (kind !== undefined) {
    const { check } = productQuerySchema.parse(Object.fromEntries(new URLSearchParams(query)));
    return downloads.product(kind as DownloadKind, Number(id), check);
  }
  throw new Invalid('no-download', 'This is no path of a download.', {
    fields: [{ path: 'path', message: 'no path of a download' }],
  });
}

/** Resolves once the file is out, or rejects where it could not be sent. */
function send(res: Response, { path, name, type, isImmutable }: Download): Promise<undefined> {
  // An attachment: what was uploaded must never be taken for a page of ours.
  if (res.get('Content-Disposition') === undefined) res.attachment(name);
  res.type(type);
  return new Promise((resolve, reject) => {
    const options = {
      dotfiles: 'allow',
      ...(isImmutable ? { immutable: true, maxAge: YEAR_MS } : { cacheControl: false }),
    } as const;
    if (!isImmutable) res.set('Cache-Control', 'no-store');
    res.sendFile(path, options, (error?: Error) => {
      // Whoever went away meanwhile needs no answer.
      if (error === undefined || res.headersSent) resolve(undefined);
      else reject(error);
    });
  });
}
