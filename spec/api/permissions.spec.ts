import type { Express } from 'express';
import express from 'express';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Role } from '#shared/contract/http/accounts';
import { ROLES } from '#shared/contract/http/accounts';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import { refuseGaps } from '../../server/middleware/endpoint-router';
import { refuseUnlistedRoutes } from '../../server/middleware/route-audit';
import type { Permission } from '../../server/permissions';
import { PERMISSIONS, permissionOf } from '../../server/permissions';
import { askEndpoint, furnish, successOf } from './ask-endpoint';
import type { Furniture } from './endpoint-requests';
import { REQUESTS } from './endpoint-requests';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

const KEYS = Object.keys(ENDPOINTS) as EndpointKey[];
type Listed = Exclude<Permission, 'public'>;

let workspace: Workspace;
let neighbour: Person;
let there: Furniture;

beforeAll(async () => {
  workspace = await Workspace.open();
  // So that no request of these tests meets the last admin.
  await workspace.person('admin');
  neighbour = await workspace.person('firmware');
  there = await furnish(workspace, neighbour);
});
afterAll(() => workspace.close());

async function askAs(who: Person | undefined, key: EndpointKey, owner: Person) {
  const parts = await REQUESTS[key].good(workspace, there, owner);
  return { parts, answer: await askEndpoint(workspace, key, parts, who?.token) };
}

describe.each(KEYS)('%s', (key) => {
  const permission = permissionOf(key);
  const isOwned = permission !== 'public' && permission.own !== undefined;

  if (permission === 'public') {
    it('answers anybody', async () => {
      const { answer } = await askAs(undefined, key, await workspace.person('support'));
      expect(answer.status, answer.text).toBe(successOf(key));
    });
    return;
  }

  it('refuses who is not signed in', async () => {
    const { parts, answer } = await askAs(undefined, key, neighbour);
    expectProblem(answer, 401, 'not-signed-in');
    expectProblem(await askEndpoint(workspace, key, parts, 'no.such.token'), 401, 'not-signed-in');
  });

  it.each(ROLES)(`${isOwned ? 'on things of others ' : ''}decides about %s`, async (role) => {
    const who = await workspace.person(role);
    const { parts, answer } = await askAs(who, key, isOwned ? neighbour : who);
    const { any, own } = permission as Listed;
    if (any.includes(role)) {
      expect(answer.status, answer.text).toBe(successOf(key));
    } else {
      expectProblem(answer, 403, own?.includes(role) === true ? 'not-yours' : 'role');
      if (isOwned) await expectUnharmed(key, parts.params!);
    }
  });

  if (!isOwned) return;

  it.each((permission as Required<Listed>).own)('lets %s do it to what is their own', async (role) => {
    const who = await workspace.person(role);
    const { answer } = await askAs(who, key, who);
    expect(answer.status, answer.text).toBe(successOf(key));
  });
});

/** A refused request changed nothing: the owner still finds the thing. */
async function expectUnharmed(key: EndpointKey, params: Readonly<Record<string, string | number>>) {
  if (key === 'DELETE /captures/:number') {
    expect((await workspace.ask(neighbour, 'get', `/captures/${params['number']}`)).status).toBe(200);
  } else if (key === 'DELETE /presets/:id') {
    const { body } = await workspace.ask(neighbour, 'get', '/presets');
    expect((body as { id: number }[]).map(({ id }) => id)).toContain(params['id']);
  } else {
    const job = await workspace.finished(neighbour, Number(params['id']));
    expect(job.state).toBe('done');
  }
}

describe('the table of permissions', () => {
  const keysWhere = (test: (permission: Permission) => boolean) =>
    KEYS.filter((key) => test(permissionOf(key)));
  const isFor = (permission: Permission, roles: readonly Role[]) =>
    permission !== 'public' && permission.own === undefined && String(permission.any) === String(roles);

  // Source: the product's description, "Who may do what". Written out once more: a slip in the table must not be its own witness.
  it('lets anybody do only what leads to a session, and read what the API is', () => {
    expect(keysWhere((permission) => permission === 'public')).toEqual([
      'GET /workspace',
      'POST /session',
      'POST /session/refresh',
      'DELETE /session',
      'POST /password-reset',
      'POST /password-reset/check',
      'GET /downloads/:ticket',
      'GET /openapi.json',
      'GET /docs',
    ]);
  });

  it('keeps people for admins, and devices and builds from support', () => {
    expect(keysWhere((permission) => isFor(permission, ['admin']))).toEqual([
      'GET /people',
      'POST /people',
      'PATCH /people/:id',
      'POST /people/:id/reset-link',
    ]);
    expect(keysWhere((permission) => isFor(permission, ['firmware', 'qa', 'admin']))).toEqual([
      'POST /devices',
      'PATCH /devices/:id',
      'POST /devices/:id/builds',
      'PATCH /builds/:id',
    ]);
  });

  it('lets everybody remove what is theirs, and admins everything', () => {
    const owned = keysWhere((permission) => permission !== 'public' && permission.own !== undefined);
    expect(owned).toEqual(['DELETE /captures/:number', 'DELETE /presets/:id', 'DELETE /jobs/:id']);
    for (const key of owned) {
      expect(permissionOf(key)).toEqual({ any: ['admin'], own: ['firmware', 'qa', 'support'] });
    }
  });

  it('is asked in these tests about every endpoint of the contract, and knows no other', () => {
    expect(Object.keys(REQUESTS).sort()).toEqual([...KEYS].sort());
    expect(Object.keys(PERMISSIONS).sort()).toEqual([...KEYS].sort());
  });

  it('stops the start over an endpoint without permission or without handler', () => {
    expect(() => refuseGaps(KEYS)).not.toThrow();
    expect(() => refuseGaps([...KEYS, 'GET /secrets'])).toThrow('GET /secrets has no permission');
    expect(() => refuseGaps(KEYS.slice(1))).toThrow(`${KEYS[0]} has no handler`);
  });

  it('stops the start over a route that was added past it, however deep', () => {
    const app: Express = express();
    const router = express.Router();
    router.get('/captures', () => undefined);
    app.use('/api', router);
    expect(() => refuseUnlistedRoutes(app)).not.toThrow();
    router.use(express.Router().delete('/captures', () => undefined));
    expect(() => refuseUnlistedRoutes(app)).toThrow('DELETE /captures');
  });
});
