import { TOOL } from '#shared/decode/version';
import type { Config } from '../config';
import type { EndpointRouter } from '../middleware/endpoint-router';
import { toAccountView } from '../services/account-view';
import { Unauthorized } from '../services/service-error';
import type { Services } from '../services/services';
import { RefreshCookie } from './refresh-cookie';

export function sessionRoutes(
  router: EndpointRouter,
  { sessions, accounts, passwords, events }: Services,
  config: Pick<Config, 'publicUrl' | 'workspaceName' | 'uploadLimitBytes'>,
): void {
  const cookie = new RefreshCookie(config.publicUrl.startsWith('https:'));
  router
    .on('GET /workspace', () => ({
      name: config.workspaceName,
      toolVersion: TOOL.version,
      uploadLimitBytes: config.uploadLimitBytes,
    }))
    .on('POST /session', async ({ body, req, res }) => {
      const opened = await sessions.signIn(body, req.ip ?? 'unknown');
      cookie.set(res, opened.refreshToken);
      return opened.session;
    })
    .on('POST /session/refresh', async ({ req, res }) => {
      try {
        const opened = await sessions.refresh(cookie.read(req));
        cookie.set(res, opened.refreshToken);
        return opened.session;
      } catch (error) {
        // A token that opens nothing would only be sent again.
        if (error instanceof Unauthorized) cookie.clear(res);
        throw error;
      }
    })
    .on('DELETE /session', async ({ req, res }) => {
      await sessions.signOut(cookie.read(req));
      cookie.clear(res);
    })
    .on('DELETE /sessions', async ({ account, res }) => {
      await sessions.signOutEverywhere(account);
      events.endStreamsOf(account.id);
      cookie.clear(res);
    })
    .on('GET /me', ({ account }) => toAccountView(account))
    .on('PUT /me/preferences', ({ account, body }) => accounts.setPreferences(account, body))
    .on('POST /me/password', async ({ account, body, res }) => {
      await passwords.change(account, body);
      const opened = await sessions.open(account);
      cookie.set(res, opened.refreshToken);
      return opened.session;
    })
    .on('POST /password-reset', async ({ body, res }) => {
      await passwords.reset(body);
      cookie.clear(res);
    })
    .on('POST /password-reset/check', ({ body }) => passwords.check(body.token));
}
