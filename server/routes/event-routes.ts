import { createSession } from 'better-sse';
import type { ServerEvent } from '#shared/contract/http/events';
import { TOOL } from '#shared/decode/version';
import type { Role } from '#shared/contract/http/accounts';
import type { EndpointRouter } from '../middleware/endpoint-router';
import type { NumberedEvent } from '../services/event-hub';
import type { Services } from '../services/services';

const KEEP_ALIVE_MS = 20_000;
const RETRY_MS = 2000;
/** A reader this far behind is let go: it connects again and loads anew. */
const MOST_UNREAD_BYTES = 1 << 20;

export function eventRoutes(router: EndpointRouter, { events }: Services): void {
  router.on('GET /events', async ({ account, req, res }) => {
    const session = await createSession(req, res, {
      keepAlive: KEEP_ALIVE_MS,
      retry: RETRY_MS,
      headers: { 'X-Accel-Buffering': 'no' },
    });
    const push = (event: ServerEvent, id: string): void => {
      session.push(event, event.kind, id);
    };
    const take = ({ id, event }: NumberedEvent): void => {
      if (mayRead(event, account.role)) push(event, id);
      if (res.writableLength > MOST_UNREAD_BYTES) res.end();
    };
    const missed = session.lastId === '' ? null : events.since(session.lastId);
    push(
      { kind: 'hello', toolVersion: TOOL.version, isComplete: missed !== null },
      missed === null ? events.lastId : session.lastId,
    );
    missed?.forEach(take);
    const stop = events.listen({ accountId: account.id, take, end: () => res.end() });
    // A stream must not outlive the token it was opened with.
    const expiry = setTimeout(() => res.end(), Math.max(0, req.user!.expiresAt - Date.now()));
    session.once('disconnected', () => {
      clearTimeout(expiry);
      stop();
    });
    return undefined;
  });
}

function mayRead(event: ServerEvent, role: Role): boolean {
  return event.kind !== 'person' || role === 'admin';
}
