import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { CapturePage } from '#shared/contract/http/captures';
import { ServerProcess } from './server-process';

const folder = mkdtempSync(join(tmpdir(), 'linewitness-start-'));

afterAll(async () => {
  await ServerProcess.endAll();
  rmSync(folder, { recursive: true });
});

let folders = 0;
const newFolder = (): string => join(folder, String(++folders), 'data');

/** That a start with these settings ends at once with one line that begins with the setting's name. */
async function expectRefusal(settings: Readonly<Record<string, string>>, name: string): Promise<void> {
  const server = await ServerProcess.spawn({ DATA_DIR: newFolder(), ...settings });
  const { code } = await server.ended;
  expect({ code, out: server.out }).toEqual({ code: 1, out: '' });
  expect(server.err).toMatch(new RegExp(`^${name} [^\\n]+\\n$`));
}

describe('a start that cannot be', () => {
  it('says in one line that a setting is wrong', () => expectRefusal({ PORT: 'http' }, 'PORT'));

  it('says in one line that the data folder is none', async () => {
    const file = join(folder, 'a-file');
    writeFileSync(file, '');
    await expectRefusal({ DATA_DIR: join(file, 'data') }, 'DATA_DIR');
  });

  it('says in one line that the port is taken', async () => {
    const other = createServer().listen(0, '127.0.0.1');
    await new Promise((resolve) => other.once('listening', resolve));
    await expectRefusal({ PORT: String((other.address() as AddressInfo).port) }, 'PORT');
    other.close();
  });

  // 192.0.2.0/24 belongs to no machine. Source: RFC 5737.
  it('says in one line that the address is not this machine’s', () =>
    expectRefusal({ HOST: '192.0.2.1' }, 'HOST'));

  it('says in one line that another server has the data folder, and leaves that one alone', async () => {
    const DATA_DIR = newFolder();
    const first = await ServerProcess.start({ DATA_DIR });
    await expectRefusal({ DATA_DIR }, 'DATA_DIR');
    expect((await fetch(`${first.url}/healthz`)).status).toBe(200);
    expect(await first.terminate()).toEqual({ code: 0, signal: null });
  });
});

describe('the first start', () => {
  it('in production prints one link that makes the first admin, and later starts print none', async () => {
    const DATA_DIR = newFolder();
    const first = await ServerProcess.start({ DATA_DIR });
    await first.firstAdmin();
    expect(first.out.match(/set-password#/g)).toHaveLength(1);
    expect(first.out).not.toContain('Demo');
    expect(statSync(DATA_DIR).mode & 0o777).toBe(0o700);
    expect(statSync(join(DATA_DIR, 'secrets', 'token-key')).mode & 0o777).toBe(0o600);
    await first.terminate();
    const second = await ServerProcess.start({ DATA_DIR });
    await second.terminate();
    expect(second.out).not.toContain('set-password');
  });

  it('prints a new link, and only the last works, as long as nobody used one', async () => {
    const DATA_DIR = newFolder();
    const first = await ServerProcess.start({ DATA_DIR });
    const [, older] = await first.says(/set-password#(\S+)\n/);
    await first.terminate();
    const second = await ServerProcess.start({ DATA_DIR });
    await second.says(/set-password#(\S+)\n/);
    await second.ask(undefined, 'post', '/password-reset/check').send({ token: older }).expect(403);
    expect(await second.firstAdmin()).toEqual(expect.any(String));
    await second.terminate();
  });

  it(
    'elsewhere makes the demo: people with random passwords, and captures that are decoded',
    { timeout: 120_000 },
    async () => {
      const DATA_DIR = newFolder();
      const server = await ServerProcess.start({ DATA_DIR, NODE_ENV: 'development' });
      const file = join(DATA_DIR, 'secrets', 'demo-accounts.txt');
      const pattern = /^ {2}(\w+) +(\S+@\S+) +(\S{16,})$/gm;
      await expect
        .poll(() => [...server.out.matchAll(pattern)].length, { timeout: 60_000 })
        .toBeGreaterThanOrEqual(8);
      const logins = [...server.out.matchAll(pattern)].map(([, role, email, password]) => ({
        role,
        email,
        password,
      }));
      expect(new Set(logins.map(({ password }) => password)).size).toBe(logins.length);
      expect(new Set(logins.map(({ role }) => role))).toEqual(
        new Set(['firmware', 'qa', 'support', 'admin']),
      );
      expect(statSync(file).mode & 0o777).toBe(0o600);
      for (const { password } of logins) expect(readFileSync(file, 'utf8')).toContain(password);
      const { email, password } = logins[0];
      const session = await server.ask(undefined, 'post', '/session').send({ email, password }).expect(200);
      const { accessToken } = session.body as { accessToken: string };
      const list = async () => (await server.ask(accessToken, 'get', '/captures')).body as CapturePage;
      await expect
        .poll(async () => (await list()).captures.map(({ state }) => state).sort(), { timeout: 60_000 })
        .toEqual([...Array.from({ length: 10 }, () => 'decoded'), 'received']);
      await server.terminate();
      const again = await ServerProcess.start({ DATA_DIR, NODE_ENV: 'development' });
      await again.ask(undefined, 'post', '/session').send({ email, password }).expect(200);
      await again.terminate();
      expect(again.out).not.toContain(password);
    },
  );

  it('warns where browsers would not take the address for safe', async () => {
    const settings = { DATA_DIR: newFolder(), PUBLIC_URL: 'http://bench.norrhavn.example:4780' };
    const server = await ServerProcess.start(settings);
    await server.says(/Warning: PUBLIC_URL is plain http/);
    const [, link] = await server.says(/(\S+)#\S+\n/);
    expect(link).toBe('http://bench.norrhavn.example:4780/set-password');
    await server.terminate();
  });
});

describe('what the server prints', () => {
  it('holds no token, password, ticket, query or body, however much it logs', async () => {
    const server = await ServerProcess.start({ DATA_DIR: newFolder(), LOG_LEVEL: 'debug' });
    const token = await server.firstAdmin();
    await server.ask(token, 'get', '/captures?search=a-secret-subject').expect(200);
    const wrong = { email: 'ines@norrhavn.example', password: 'a secret guess' };
    await server.ask(undefined, 'post', '/session').send(wrong).expect(401);
    await server.ask(undefined, 'get', '/downloads/a-ticket-of-somebody-who-came-late').expect(404);
    await server.ask(token, 'get', '/jobs').expect(200);
    const { code } = await server.terminate();
    expect(code).toBe(0);
    const log = `${server.out}${server.err}`;
    expect(log).toContain('"path":"/api/jobs"');
    const [, link] = /set-password#(\S+)\n/.exec(server.out)!;
    expect(log.split(link)).toHaveLength(2);
    for (const secret of [
      token,
      'a password for tests',
      'a-secret-subject',
      'a secret guess',
      'a-ticket-of',
    ]) {
      expect(log).not.toContain(secret);
    }
    expect(log).not.toMatch(/lw_refresh|authorization|cookie/i);
  });
});
