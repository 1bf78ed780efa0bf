import { request as httpRequest } from 'node:http';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import { askEndpoint, furnish } from './ask-endpoint';
import type { Furniture } from './endpoint-requests';
import { REQUESTS } from './endpoint-requests';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

const KEYS = Object.keys(ENDPOINTS) as EndpointKey[];

let workspace: Workspace;
let admin: Person;
let there: Furniture;

beforeAll(async () => {
  workspace = await Workspace.open();
  admin = await workspace.person('admin');
  there = await furnish(workspace, admin);
});
afterAll(() => workspace.close());

describe('what does not exist', () => {
  const withParams = KEYS.filter((key) => 'params' in ENDPOINTS[key]);

  it('is tried with every endpoint that names something', () => {
    expect(withParams.filter((key) => REQUESTS[key].unknown === undefined)).toEqual([]);
  });

  it.each(withParams)('is not found: %s', async (key) => {
    const parts = await REQUESTS[key].good(workspace, there, admin);
    const answer = await askEndpoint(
      workspace,
      key,
      { ...parts, params: REQUESTS[key].unknown },
      admin.token,
    );
    expectProblem(answer, 404, 'not-found');
  });

  it.each(withParams.filter((key) => !/:(ticket|key)/.test(key)))(
    'and what is no number of anything is refused by name: %s',
    async (key) => {
      const parts = await REQUESTS[key].good(workspace, there, admin);
      for (const nonsense of ['nonsense', '-1', '1.5', "1' OR 1=1", '9'.repeat(30), 'LW-1', '../1']) {
        const params = Object.fromEntries(Object.keys(parts.params!).map((name) => [name, nonsense]));
        const answer = await askEndpoint(workspace, key, { ...parts, params }, admin.token);
        const { fields } = expectProblem(answer, 400, 'invalid');
        expect(fields?.map(({ path }) => path)).toEqual(Object.keys(params));
      }
    },
  );
});

describe('a body that cannot be used', () => {
  const withBody = KEYS.filter((key) => 'body' in ENDPOINTS[key] && !('isUpload' in ENDPOINTS[key]));

  it('is tried with every endpoint that takes one', () => {
    expect(withBody.filter((key) => REQUESTS[key].bad === undefined)).toEqual([]);
  });

  it.each(withBody)('is refused with the field to blame: %s', async (key) => {
    const { body, field } = REQUESTS[key].bad!;
    const parts = await REQUESTS[key].good(workspace, there, admin);
    const answer = await askEndpoint(workspace, key, { ...parts, body }, admin.token);
    const { fields } = expectProblem(answer, 400);
    expect(fields?.map(({ path }) => path)).toEqual([field]);
    expect(fields?.every(({ message }) => message !== '')).toBe(true);
  });

  it.each(withBody.filter((key) => key !== 'PUT /me/preferences'))(
    'is refused for what the contract does not know, and for a list: %s',
    async (key) => {
      const parts = await REQUESTS[key].good(workspace, there, admin);
      const stranger = { ...(parts.body as object), isAdmin: true };
      for (const body of [stranger, [parts.body]]) {
        const answer = await askEndpoint(workspace, key, { ...parts, body }, admin.token);
        expectProblem(answer, 400, 'invalid');
      }
    },
  );

  const post = (path: string, body: string, type = 'application/json') =>
    workspace.ask(admin, 'post', path).set('Content-Type', type).send(body);

  it('is refused where it is no JSON', async () => {
    for (const body of ['{"name":', '{name: 1}', 'null', '"text"', '7']) {
      expectProblem(await post('/devices', body), 400, 'bad-json');
    }
  });

  it('is refused where it is larger than any request needs to be', async () => {
    expectProblem(await post('/devices', JSON.stringify({ name: 'x'.repeat(600_000) })), 413, 'too-large');
  });

  it('is refused where its type or packing is not known', async () => {
    expectProblem(await post('/devices', 'name=Mouse&kind=mouse', 'application/x-www-form-urlencoded'), 400);
    const packed = post('/devices', '{}').set('Content-Encoding', 'compress');
    expectProblem(await packed, 415);
    const strange = post('/devices', '{}', 'application/json; charset=klingon');
    expectProblem(await strange, 415);
  });

  it('never makes the server fall over its prototypes', async () => {
    const body = '{"__proto__":{"role":"admin"},"name":"Mouse","kind":"mouse"}';
    expectProblem(await post('/devices', body), 400, 'invalid');
    const { body: me } = await workspace.ask(admin, 'put', '/me/preferences').send({ constructor: 'x' });
    expect((me as { preferences: object }).preferences).toEqual({ constructor: 'x' });
  });
});

describe('a query that cannot be used', () => {
  it.each([
    ['/captures?page=0', 'page'],
    ['/captures?sort=fastest', 'sort'],
    ['/captures?search=a&search=b', 'search'],
    ['/captures?owner=me', 'owner'],
  ])('is refused with the field to blame: %s', async (path, field) => {
    const { fields } = expectProblem(await workspace.ask(admin, 'get', path), 400, 'invalid');
    expect(fields?.map(({ path: where }) => where)).toEqual([field]);
  });
});

describe('a path', () => {
  it('that leads nowhere is a problem below /api, whatever the method', async () => {
    for (const method of ['get', 'post', 'delete'] as const) {
      expectProblem(await workspace.ask(admin, method, '/nothing/here'), 404, 'no-such-path');
    }
    expectProblem(await workspace.ask(admin, 'delete', '/devices'), 404, 'no-such-path');
  });

  it('with a broken escape is a bad request', async () => {
    expectProblem(await workspace.ask(admin, 'get', '/captures/%E0'), 400, 'bad-path');
    expectProblem(await workspace.ask(undefined, 'get', '/downloads/%E0%A4%A'), 400);
    expectProblem(await supertest(workspace.url).get('/%E0'), 404);
  });

  it('gets out of no folder', async () => {
    for (const path of ['/api/../../etc/passwd', '/..%2f..%2fetc%2fpasswd', '/%2e%2e/secrets/token-key']) {
      const answer = await rawGet(path);
      expect(answer.status).toBeGreaterThanOrEqual(400);
      expect(answer.text).not.toContain('root:');
    }
  });

  /** supertest would tidy the path up before it asks. */
  function rawGet(path: string): Promise<{ status: number; text: string }> {
    return new Promise((resolve, reject) => {
      const { hostname, port } = new URL(workspace.url);
      const request = httpRequest({ hostname, port, path }, (answer) => {
        const chunks: Buffer[] = [];
        answer.on('data', (chunk: Buffer) => chunks.push(chunk));
        answer.on('end', () =>
          resolve({ status: answer.statusCode!, text: Buffer.concat(chunks).toString() }),
        );
      });
      request.on('error', reject).end();
    });
  }
});

describe('the guard at the door', () => {
  // Source: W3C Fetch Metadata Request Headers, Sec-Fetch-Site.
  it('refuses changes that the page of another site asks for, and lets it read nothing but what anybody may', async () => {
    for (const site of ['cross-site', 'same-site']) {
      const test = workspace.ask(undefined, 'post', '/session/refresh').set('Sec-Fetch-Site', site);
      expectProblem(await test.set('Cookie', admin.cookie), 403, 'other-site');
    }
    const own = workspace.ask(undefined, 'post', '/session/refresh').set('Sec-Fetch-Site', 'same-origin');
    expect((await own.set('Cookie', admin.cookie)).status).toBe(200);
  });

  it('takes no token from an address, a cookie or a body', async () => {
    const { token } = admin;
    expectProblem(await workspace.ask(undefined, 'get', `/me?access_token=${token}&token=${token}`), 401);
    expectProblem(await workspace.ask(undefined, 'get', '/me').set('Cookie', `token=${token}`), 401);
    expectProblem(
      await workspace.ask(undefined, 'put', '/me/preferences').send({ access_token: token }),
      401,
    );
  });

  it('takes no token that was not signed here', async () => {
    const [head, claims, signature] = admin.token.split('.');
    const encode = (value: object) => Buffer.from(JSON.stringify(value)).toString('base64url');
    const decoded = JSON.parse(Buffer.from(claims, 'base64url').toString()) as object;
    const forged = [
      `${encode({ alg: 'none', typ: 'JWT' })}.${claims}.`,
      `${head}.${encode({ ...decoded, sub: '1', exp: 4e9 })}.${signature}`,
      `${head}.${claims}.${signature.slice(0, -4)}AAAA`,
      '',
    ];
    for (const token of forged) expectProblem(await workspace.ask({ token }, 'get', '/me'), 401);
    expect((await workspace.ask(admin, 'get', '/me')).status).toBe(200);
  });

  // Source: OWASP HTTP Headers Cheat Sheet, from memory.
  it('sends headers that keep other sites out, and says nothing of what it is made of', async () => {
    const { headers } = await workspace.ask(admin, 'get', '/me');
    expect(headers).toMatchObject({
      'content-security-policy': expect.stringMatching(/default-src 'none'.*script-src 'self';/),
      'x-content-type-options': 'nosniff',
      'cache-control': 'no-store',
      'cross-origin-resource-policy': 'same-origin',
    });
    expect(headers).not.toHaveProperty('x-powered-by');
    expect(headers).not.toHaveProperty('access-control-allow-origin');
    expect(headers).not.toHaveProperty('strict-transport-security');
  });
});

describe('too many requests', () => {
  it('are answered with the seconds to wait, each kind by its own count', async () => {
    const strict = await Workspace.open({ rateLimits: { guesses: 2, previews: 1, others: 3 } });
    try {
      const wrong = { email: 'nobody@norrhavn.example', password: 'no password at all' };
      const guess = () => strict.ask(undefined, 'post', '/session').send(wrong);
      expectProblem(await guess(), 401);
      expectProblem(await guess(), 401);
      const third = await guess();
      const { retryAfterS } = expectProblem(third, 429, 'too-many');
      expect(retryAfterS).toBeGreaterThan(0);
      expect(third.headers['retry-after']).toBe(String(retryAfterS));
      for (let i = 0; i < 3; i++) expect((await strict.ask(undefined, 'get', '/workspace')).status).toBe(200);
      expectProblem(await strict.ask(undefined, 'get', '/workspace'), 429, 'too-many');
    } finally {
      await strict.close();
    }
  });
});
