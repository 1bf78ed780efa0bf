import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import type { Session } from '#shared/contract/http/accounts';
import { REUSE_GRACE_MS } from '../../server/services/session-service';
import type { Answer, Person } from './workspace';
import { cookieOf, expectProblem, Workspace } from './workspace';

const MINUTE_MS = 60_000;

let workspace: Workspace;

beforeAll(async () => {
  workspace = await Workspace.open();
});
afterAll(() => workspace.close());
afterEach(() => vi.useRealTimers());

/** Only the clock is moved: sockets and timers go on as they are. */
function later(ms: number): void {
  const now = Date.now() + ms;
  vi.useFakeTimers({ toFake: ['Date'], now });
}

function signIn(email: string, password: string) {
  return workspace.ask(undefined, 'post', '/session').send({ email, password });
}

function refresh(cookie: string) {
  return workspace.ask(undefined, 'post', '/session/refresh').set('Cookie', cookie);
}

async function isOpen(answer: Answer): Promise<boolean> {
  const { accessToken } = answer.body as Session;
  return (await workspace.ask({ token: accessToken }, 'get', '/me')).status === 200;
}

describe('signing in', () => {
  it('gives a token of minutes, and a cookie no script reads and no other site sends', async () => {
    const { account, password } = await workspace.person('qa');
    const answer = await signIn(account.email.toUpperCase(), password);
    expect(answer.status).toBe(200);
    const session = answer.body as Session;
    expect(session.account).toMatchObject({
      email: account.email,
      role: 'qa',
      initials: 'Q' + account.name.slice(3)[0],
    });
    const minutes = (Date.parse(session.expiresAt) - Date.now()) / MINUTE_MS;
    expect(minutes).toBeGreaterThan(1);
    expect(minutes).toBeLessThanOrEqual(15);
    const [line] = answer.headers['set-cookie'] as unknown as string[];
    expect(line).toMatch(
      /^lw_refresh=[\w-]{43}; Max-Age=\d+; Path=\/api\/session; .*HttpOnly; SameSite=Strict$/,
    );
    expect(JSON.stringify(session)).not.toContain(cookieOf(answer)!.split('=')[1]);
    expect(await isOpen(answer)).toBe(true);
  });

  it('marks the cookie Secure where people come by https, and tells browsers to stay there', async () => {
    const secure = await Workspace.open({ config: { publicUrl: 'https://bench.norrhavn.example' } });
    try {
      const { account, password } = await secure.person('qa');
      const answer = await secure.ask(undefined, 'post', '/session').send({ email: account.email, password });
      expect((answer.headers['set-cookie'] as unknown as string[])[0]).toContain('; Secure;');
      expect(answer.headers['strict-transport-security']).toMatch(/^max-age=\d+/);
    } finally {
      await secure.close();
    }
  });

  it('fails alike for a wrong password, an unknown address, somebody deactivated and somebody without a password', async () => {
    const admin = await workspace.person('admin');
    const known = await workspace.person('qa');
    const gone = await workspace.person('qa');
    const path = `/people/${gone.account.id}`;
    expect((await workspace.ask(admin, 'patch', path).send({ isActive: false })).status).toBe(200);
    const fresh = { email: 'fresh@quintal.example', name: 'Fresh', role: 'qa' };
    expect((await workspace.ask(admin, 'post', '/people').send(fresh)).status).toBe(201);
    const answers = await Promise.all([
      signIn(known.account.email, 'not the password'),
      signIn('nobody@quintal.example', 'not the password'),
      signIn(gone.account.email, gone.password),
      signIn(fresh.email, 'not the password'),
    ]);
    const told = answers.map((answer) => {
      const { requestId, ...problem } = expectProblem(answer, 401, 'wrong-credentials');
      expect(requestId).toBeDefined();
      expect(cookieOf(answer)).toBeUndefined();
      return { problem, headers: Object.keys(answer.headers as object).sort() };
    });
    for (const one of told) expect(one).toEqual(told[0]);
  });

  it('takes the work of a password also where there is no account', async () => {
    const compare = vi.spyOn((await import('bcrypt')).default, 'compare');
    await signIn('nobody-at-all@quintal.example', 'not the password');
    expect(compare).toHaveBeenCalledTimes(1);
    expect(compare.mock.calls[0][1]).toMatch(/^\$2b\$04\$.{53}$/);
    compare.mockRestore();
  });

  it('makes whoever fails again and again wait, account or not, twice as long each time', async () => {
    const { account, password } = await workspace.person('qa');
    const waitsOf = async (email: string): Promise<(number | undefined)[]> => {
      // The clock stands still, so that no wait is over because this machine is slow.
      later(0);
      for (let i = 0; i < 5; i++) expectProblem(await signIn(email, 'wrong'), 401);
      const waits: (number | undefined)[] = [];
      for (let i = 0; i < 4; i++) {
        const { retryAfterS } = expectProblem(await signIn(email, 'wrong'), 429, 'wait');
        waits.push(retryAfterS);
        later(retryAfterS! * 1000);
        expectProblem(await signIn(email, 'wrong'), 401);
      }
      return waits;
    };
    expect(await waitsOf(account.email)).toEqual([1, 2, 4, 8]);
    expect(await waitsOf('nobody2@quintal.example')).toEqual([1, 2, 4, 8]);
    // Also the right password has to wait, or waiting would tell.
    expectProblem(await signIn(account.email, password), 429, 'wait');
    const other = await workspace.person('qa');
    expect((await signIn(other.account.email, other.password)).status).toBe(200);
    later(5 * MINUTE_MS);
    expect((await signIn(account.email, password)).status).toBe(200);
    expectProblem(await signIn(account.email, 'wrong'), 401);
  });
});

describe('the access token', () => {
  it('opens nothing once its minutes are over', async () => {
    const { account, password } = await workspace.person('qa');
    const answer = await signIn(account.email, password);
    later(15 * MINUTE_MS);
    expect(await isOpen(answer)).toBe(false);
    expect(await isOpen(await refresh(cookieOf(answer)!))).toBe(true);
  });
});

describe('refreshing', () => {
  it('exchanges the cookie each time', async () => {
    const { cookie } = await workspace.person('qa');
    const first = await refresh(cookie);
    const second = await refresh(cookieOf(first)!);
    expect([first.status, second.status]).toEqual([200, 200]);
    expect(new Set([cookie, cookieOf(first), cookieOf(second)]).size).toBe(3);
    expect(await isOpen(second)).toBe(true);
  });

  it('keeps both of two tabs that refresh with the same cookie at once', async () => {
    const { cookie } = await workspace.person('qa');
    const tabs = await Promise.all([refresh(cookie), refresh(cookie)]);
    expect(tabs.map(({ status }) => status)).toEqual([200, 200]);
    // And both go on, long after.
    later(REUSE_GRACE_MS * 3);
    for (const tab of tabs) expect((await refresh(cookieOf(tab)!)).status).toBe(200);
  });

  it('ends the whole chain where a cookie comes again long after its exchange', async () => {
    const { cookie, account, password } = await workspace.person('qa');
    const elsewhere = await signIn(account.email, password);
    const honest = await refresh(cookie);
    later(REUSE_GRACE_MS + 1000);
    const stolen = await refresh(cookie);
    expectProblem(stolen, 401, 'session-ended');
    expect(cookieOf(stolen)).toBe('');
    expectProblem(await refresh(cookieOf(honest)!), 401, 'session-ended');
    // Another sign-in is another chain.
    expect((await refresh(cookieOf(elsewhere)!)).status).toBe(200);
  });

  it('opens nothing without a cookie, with a made-up one, or after fourteen days', async () => {
    const { cookie } = await workspace.person('qa');
    for (const wrong of ['other=1', 'lw_refresh=made-up', `lw_refresh=${'x'.repeat(3000)}`]) {
      expectProblem(await refresh(wrong), 401, 'session-ended');
    }
    later(14 * 24 * 60 * MINUTE_MS + 1000);
    expectProblem(await refresh(cookie), 401, 'session-ended');
  });
});

describe('signing out', () => {
  const signOut = (path: string, { token, cookie }: Pick<Person, 'token' | 'cookie'>) =>
    workspace.ask({ token }, 'delete', path).set('Cookie', cookie);

  it('here ends this session and leaves the others', async () => {
    const person = await workspace.person('qa');
    const other = await signIn(person.account.email, person.password);
    const answer = await signOut('/session', person);
    expect({ status: answer.status, cookie: cookieOf(answer) }).toEqual({ status: 204, cookie: '' });
    expectProblem(await refresh(person.cookie), 401, 'session-ended');
    expect((await refresh(cookieOf(other)!)).status).toBe(200);
  });

  it('everywhere ends every cookie and every token at once, and nobody else’s', async () => {
    const person = await workspace.person('qa');
    const bystander = await workspace.person('qa');
    const other = await signIn(person.account.email, person.password);
    const answer = await signOut('/sessions', person);
    expect({ status: answer.status, cookie: cookieOf(answer) }).toEqual({ status: 204, cookie: '' });
    expectProblem(await refresh(person.cookie), 401, 'session-ended');
    expectProblem(await refresh(cookieOf(other)!), 401, 'session-ended');
    expect(await isOpen(other)).toBe(false);
    expectProblem(await workspace.ask(person, 'get', '/me'), 401, 'not-signed-in');
    expect((await workspace.ask(bystander, 'get', '/me')).status).toBe(200);
    expect((await signIn(person.account.email, person.password)).status).toBe(200);
  });
});

describe('changing the own password', () => {
  it('ends all other sessions and goes on with a new one', async () => {
    const person = await workspace.person('qa');
    const other = await signIn(person.account.email, person.password);
    const next = 'quite another password';
    const answer = await workspace
      .ask(person, 'post', '/me/password')
      .send({ current: person.password, next });
    expect(answer.status).toBe(200);
    expect(await isOpen(answer)).toBe(true);
    expect((await refresh(cookieOf(answer)!)).status).toBe(200);
    expect(await isOpen(other)).toBe(false);
    expectProblem(await refresh(cookieOf(other)!), 401, 'session-ended');
    expectProblem(await signIn(person.account.email, person.password), 401);
    expect((await signIn(person.account.email, next)).status).toBe(200);
  });

  it('needs the current one', async () => {
    const person = await workspace.person('qa');
    const answer = await workspace
      .ask(person, 'post', '/me/password')
      .send({ current: 'not the password', next: 'quite another password' });
    expect(expectProblem(answer, 400, 'wrong-password').fields).toMatchObject([{ path: 'current' }]);
    expect((await workspace.ask(person, 'get', '/me')).status).toBe(200);
  });

  // Source: bcrypt hashes the first 72 bytes only; Provos and Mazières 1999, from memory.
  it('takes what bcrypt takes whole: 72 bytes, not one more', async () => {
    const person = await workspace.person('qa');
    const change = (next: string) =>
      workspace.ask(person, 'post', '/me/password').send({ current: person.password, next });
    expectProblem(await change('é'.repeat(36) + 'x'), 400, 'invalid');
    expect((await change('é'.repeat(36))).status).toBe(200);
  });
});

describe('preferences', () => {
  it('come back as they were left, with the own account only', async () => {
    const person = await workspace.person('qa');
    const other = await workspace.person('qa');
    const preferences = { theme: 'dark', lanes: ['reply', 'data'] };
    await workspace.ask(person, 'put', '/me/preferences').send(preferences);
    expect((await workspace.ask(person, 'get', '/me')).body).toMatchObject({ preferences });
    expect((await workspace.ask(other, 'get', '/me')).body).toMatchObject({ preferences: {} });
  });
});
