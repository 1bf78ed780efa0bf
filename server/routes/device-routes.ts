import type { EndpointRouter } from '../middleware/endpoint-router';
import type { Services } from '../services/services';

const MOST_CAPTURES = 200;

export function deviceRoutes(router: EndpointRouter, { devices, captures }: Services): void {
  router
    .on('GET /devices', () => devices.list())
    .on('POST /devices', ({ account, body }) => devices.create(account, body))
    .on('GET /devices/:id', ({ params }) => devices.find(params.id))
    .on('PATCH /devices/:id', ({ account, params, body }) => devices.change(account, params.id, body))
    .on('POST /devices/:id/builds', ({ account, params, body }) =>
      devices.createBuild(account, params.id, body),
    )
    .on('GET /builds/:id', async ({ account, params }) => ({
      ...(await devices.findBuild(params.id)),
      captureList: await captures.listOfBuild(account, params.id, MOST_CAPTURES),
    }))
    .on('PATCH /builds/:id', ({ account, params, body }) => devices.changeBuild(account, params.id, body));
}
