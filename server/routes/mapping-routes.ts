import type { EndpointRouter } from '../middleware/endpoint-router';
import type { Services } from '../services/services';

export function mappingRoutes(router: EndpointRouter, { mappings, presets }: Services): void {
  router
    .on('GET /captures/:number/lines', ({ account, params, query }) =>
      mappings.lines(account, params.number, query.sampleRateHz),
    )
    .on('POST /captures/:number/preview', ({ params, body }) =>
      mappings.preview(params.number, body.map, body.options),
    )
    .on('GET /presets', ({ account }) => presets.list(account))
    .on('POST /presets', ({ account, body }) => presets.create(account, body))
    .onOwned(
      'DELETE /presets/:id',
      ({ id }) => presets.ownerOf(id),
      ({ account, params }) => presets.remove(account, params.id),
    );
}
