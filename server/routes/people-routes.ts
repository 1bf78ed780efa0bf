import type { EndpointRouter } from '../middleware/endpoint-router';
import type { Services } from '../services/services';

export function peopleRoutes(router: EndpointRouter, { accounts, passwords }: Services): void {
  router
    .on('GET /people', () => accounts.list())
    .on('POST /people', ({ account, body }) => accounts.create(account, body))
    .on('PATCH /people/:id', ({ account, params, body }) => accounts.change(account, params.id, body))
    .on('POST /people/:id/reset-link', ({ account, params }) => passwords.makeLink(account, params.id));
}
