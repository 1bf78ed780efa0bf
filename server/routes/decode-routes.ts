import { listRulebooks, viewRulebook } from '../jobs/rulebooks';
import type { EndpointRouter } from '../middleware/endpoint-router';
import type { Services } from '../services/services';

export function decodeRoutes(router: EndpointRouter, { decodes, checks, jobs }: Services): void {
  router
    .on('POST /captures/:number/decodes', ({ account, params, body }) =>
      decodes.ask(account, params.number, body),
    )
    .on('POST /captures/decodes', ({ account, body }) => decodes.askMany(account, body))
    .on('GET /captures/:number/decodes', ({ params }) => decodes.listOf(params.number))
    .on('GET /decodes/:id', ({ params }) => decodes.view(params.id))
    .on('POST /decodes/:id/checks', ({ account, params, body }) =>
      decodes.askForCheck(account, params.id, body.rulebook),
    )
    .on('GET /decodes/:id/checks', ({ params }) => checks.listOf(params.id))
    .on('GET /checks/:id', ({ params }) => checks.view(params.id))
    .on('GET /checks/:id/changes', ({ params, query }) => checks.changes(params.id, query.from))
    .on('GET /rulebooks', () => listRulebooks())
    .on('GET /rulebooks/:key', ({ params }) => viewRulebook(params.key))
    .on('GET /jobs', ({ account }) => jobs.listOpen(account.id))
    .on('GET /jobs/:id', ({ params }) => jobs.view(params.id))
    .onOwned(
      'DELETE /jobs/:id',
      ({ id }) => jobs.ownerOf(id),
      ({ account, params }) => jobs.cancel(account, params.id),
    );
}
