import type { Config } from '../config';
import type { EndpointRouter } from '../middleware/endpoint-router';
import { renderApiPage } from './api-page';
import { makeOpenApiDocument } from './open-api';

export function documentRoutes(router: EndpointRouter, { publicUrl }: Pick<Config, 'publicUrl'>): void {
  let document: string | undefined;
  let page: string | undefined;
  router
    .on('GET /openapi.json', ({ res }) => {
      document ??= JSON.stringify(makeOpenApiDocument(publicUrl));
      res.type('application/json').send(document);
      return undefined;
    })
    .on('GET /docs', ({ res }) => {
      page ??= renderApiPage();
      res.type('text/html').send(page);
      return undefined;
    });
}
