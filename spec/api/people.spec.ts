import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import type { PasswordReset, Person as PersonView, ResetLink } from '#shared/contract/http/accounts';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

const DAY_MS = 24 * 3600_000;
const PASSWORD = 'a password of their own';

let workspace: Workspace;
let admin: Person;

beforeAll(async () => {
  workspace = await Workspace.open();
  admin = await workspace.person('admin');
});
afterAll(() => workspace.close());
afterEach(() => vi.useRealTimers());

const tokenOf = ({ url }: ResetLink): string => url.split('#')[1];

async function makeLink(id: number): Promise<ResetLink> {
  const answer = await workspace.ask(admin, 'post', `/people/${id}/reset-link`);
  expect(answer.status, answer.text).toBe(201);
  return answer.body as ResetLink;
}

function reset(input: PasswordReset, where = workspace) {
  return where.ask(undefined, 'post', '/password-reset').send(input);
}

function check(token: string, where = workspace) {
  return where.ask(undefined, 'post', '/password-reset/check').send({ token });
}

function change(id: number, input: object, by = admin) {
  return workspace.ask(by, 'patch', `/people/${id}`).send(input);
}

function signIn(email: string, password: string, where = workspace) {
  return where.ask(undefined, 'post', '/session').send({ email, password });
}

describe('a new account', () => {
  it('is made without a password, which its person chooses with a link, once', async () => {
    const person = { email: ' Dora.Lund@Quintal.example ', name: ' Dora Lund ', role: 'support' };
    const made = (await workspace.ask(admin, 'post', '/people').send(person)).body as PersonView;
    expect(made).toMatchObject({
      email: 'dora.lund@quintal.example',
      name: 'Dora Lund',
      initials: 'DL',
      role: 'support',
      isActive: true,
      hasPassword: false,
      lastSeenAt: null,
    });
    const link = await makeLink(made.id);
    // Behind the number sign: no server on the way sees it.
    expect(link.url).toMatch(/^http:\/\/127\.0\.0\.1:\d+\/set-password#[\w-]{43}$/);
    const token = tokenOf(link);
    expect((await check(token)).body).toMatchObject({
      purpose: 'reset',
      email: made.email,
      name: made.name,
      expiresAt: link.expiresAt,
    });
    expect((await reset({ token, password: PASSWORD })).status).toBe(204);
    expect((await signIn(made.email, PASSWORD)).status).toBe(200);
    expectProblem(await reset({ token, password: 'a second password' }), 403, 'link-ended');
    expectProblem(await check(token), 403, 'link-ended');
    const people = (await workspace.ask(admin, 'get', '/people')).body as PersonView[];
    expect(people.find(({ id }) => id === made.id)).toMatchObject({
      hasPassword: true,
      lastSeenAt: expect.any(String),
    });
    expect(JSON.stringify(people)).not.toMatch(/passwordHash|\$2b\$/);
  });

  it('needs an address nobody has', async () => {
    const person = { email: admin.account.email.toUpperCase(), name: 'Double', role: 'qa' };
    const answer = await workspace.ask(admin, 'post', '/people').send(person);
    expect(expectProblem(answer, 409, 'email-taken').fields).toMatchObject([{ path: 'email' }]);
  });
});

describe('a link', () => {
  it('works once, however many use it at the same time', async () => {
    const { account } = await workspace.person('qa');
    const token = tokenOf(await makeLink(account.id));
    const answers = await Promise.all(
      [1, 2, 3, 4].map((n) => reset({ token, password: `${PASSWORD} ${n}` })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 403, 403, 403]);
    const winner = answers.findIndex(({ status }) => status === 204) + 1;
    expect((await signIn(account.email, `${PASSWORD} ${winner}`)).status).toBe(200);
  });

  it('ends with a newer one, with its days, and with the account', async () => {
    const { account } = await workspace.person('qa');
    const first = tokenOf(await makeLink(account.id));
    const second = await makeLink(account.id);
    expectProblem(await check(first), 403, 'link-ended');
    expect((await check(tokenOf(second))).status).toBe(200);
    vi.useFakeTimers({ toFake: ['Date'], now: Date.parse(second.expiresAt) + 1 });
    expectProblem(await check(tokenOf(second)), 403, 'link-ended');
    vi.useRealTimers();
    await change(account.id, { isActive: false });
    expectProblem(await reset({ token: tokenOf(second), password: PASSWORD }), 403, 'link-ended');
    expectProblem(await workspace.ask(admin, 'post', `/people/${account.id}/reset-link`), 409, 'inactive');
    expect((Date.parse(second.expiresAt) - Date.now()) / DAY_MS).toBeLessThanOrEqual(7);
  });

  it('ends the sessions of its person when it is used, not before', async () => {
    const person = await workspace.person('qa');
    const token = tokenOf(await makeLink(person.account.id));
    expect((await workspace.ask(person, 'get', '/me')).status).toBe(200);
    await reset({ token, password: PASSWORD });
    expectProblem(await workspace.ask(person, 'get', '/me'), 401, 'not-signed-in');
  });

  it('gives nobody a name, an address or a role', async () => {
    const { account } = await workspace.person('qa');
    const token = tokenOf(await makeLink(account.id));
    const more = { token, password: PASSWORD, name: 'Other', email: 'other@quintal.example' };
    await reset(more);
    expect((await signIn(account.email, PASSWORD)).body).toMatchObject({
      account: { name: account.name, email: account.email, role: 'qa' },
    });
    expectProblem(await reset({ ...more, role: 'admin' } as PasswordReset), 400, 'invalid');
  });
});

describe('the first admin', () => {
  it('is made with the first link, once', async () => {
    const fresh = await Workspace.open();
    try {
      const { passwords } = fresh.services;
      const older = tokenOf((await passwords.makeFirstAdminLink())!);
      const token = tokenOf((await passwords.makeFirstAdminLink())!);
      expectProblem(await check(older, fresh), 403, 'link-ended');
      expect((await check(token, fresh)).body).toMatchObject({
        purpose: 'first-admin',
        email: null,
        name: null,
      });
      const incomplete = await reset({ token, password: PASSWORD, name: 'Rosa Teixeira' }, fresh);
      expect(expectProblem(incomplete, 400, 'incomplete').fields).toMatchObject([{ path: 'email' }]);
      const input = { token, password: PASSWORD, name: 'Rosa Teixeira', email: 'rosa@norrhavn.example' };
      expect((await reset(input, fresh)).status).toBe(204);
      expectProblem(await reset({ ...input, email: 'second@norrhavn.example' }, fresh), 403, 'link-ended');
      const session = await signIn(input.email, PASSWORD, fresh);
      expect(session.body).toMatchObject({ account: { role: 'admin', name: 'Rosa Teixeira' } });
      expect(await passwords.makeFirstAdminLink()).toBeNull();
    } finally {
      await fresh.close();
    }
  });
});

describe('the last admin', () => {
  it('stays one, and active, until there is another', async () => {
    const others = ((await workspace.ask(admin, 'get', '/people')).body as PersonView[]).filter(
      ({ role, isActive, id }) => role === 'admin' && isActive && id !== admin.account.id,
    );
    expect(others).toEqual([]);
    const { id } = admin.account;
    expectProblem(await change(id, { isActive: false }), 409, 'last-admin');
    expectProblem(await change(id, { role: 'qa' }), 409, 'last-admin');
    expectProblem(await change(id, { role: 'qa', name: 'Renamed' }), 409, 'last-admin');
    const listed = (await workspace.ask(admin, 'get', '/people')).body as PersonView[];
    expect(listed.find((person) => person.id === id)).toMatchObject({
      role: 'admin',
      name: admin.account.name,
    });
    expect((await change(id, { name: 'Renamed' })).status).toBe(200);
    const second = await workspace.person('admin');
    expect((await change(second.account.id, { role: 'qa' })).status).toBe(200);
  });

  it('stays also where two admins remove each other at once', async () => {
    const second = await workspace.person('admin');
    const answers = await Promise.all([
      change(second.account.id, { isActive: false }, admin),
      change(admin.account.id, { isActive: false }, second),
    ]);
    // Whoever comes second is out already, or is the last.
    expect(answers.map(({ status }) => status).filter((status) => status === 200)).toHaveLength(1);
    const winner = answers[0].status === 200 ? admin : second;
    expect((await workspace.ask(winner, 'get', '/people')).status).toBe(200);
    admin = winner;
  });
});

describe('deactivating', () => {
  it('shuts a person out at once and everywhere, and activating lets them sign in again', async () => {
    const person = await workspace.person('firmware');
    const { id, email } = person.account;
    expect((await change(id, { isActive: false })).body).toMatchObject({ isActive: false });
    expectProblem(await workspace.ask(person, 'get', '/me'), 401, 'not-signed-in');
    const refreshed = await workspace.ask(undefined, 'post', '/session/refresh').set('Cookie', person.cookie);
    expectProblem(refreshed, 401, 'session-ended');
    expectProblem(await signIn(email, person.password), 401, 'wrong-credentials');
    await change(id, { isActive: true });
    // The old sessions stay ended.
    expectProblem(await workspace.ask(person, 'get', '/me'), 401, 'not-signed-in');
    expect((await signIn(email, person.password)).status).toBe(200);
  });
});

describe('changing a role', () => {
  it('holds from the next request on', async () => {
    const person = await workspace.person('support');
    const create = () =>
      workspace.ask(person, 'post', '/devices').send({ name: 'Panel mouse', kind: 'mouse' });
    expectProblem(await create(), 403, 'role');
    await change(person.account.id, { role: 'firmware' });
    expect((await create()).status).toBe(201);
    expectProblem(
      await workspace.ask(person, 'patch', `/people/${person.account.id}`).send({ role: 'admin' }),
      403,
    );
  });
});
