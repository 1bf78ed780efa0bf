import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import jwt from 'jsonwebtoken';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import type { CaptureView } from '#shared/contract/http/captures';
import type { JobView } from '#shared/contract/http/jobs';
import { TOKEN_PARTIES } from '../../server/services/session-service';
import { writeSampledCsv } from '../bench/bench-files';
import { EventReader } from './read-events';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

let workspace: Workspace;
let person: Person;
let admin: Person;
const open: EventReader[] = [];

beforeAll(async () => {
  workspace = await Workspace.open();
  person = await workspace.person('qa');
  admin = await workspace.person('admin');
});
afterAll(() => workspace.close());
afterEach(async () => {
  await Promise.all(open.splice(0).map((reader) => reader.close()));
});

async function listen(who: Pick<Person, 'token'>, lastEventId?: string): Promise<EventReader> {
  const reader = await EventReader.open(workspace.url, who.token, lastEventId);
  open.push(reader);
  await expect.poll(() => reader.received.length).toBeGreaterThan(0);
  return reader;
}

describe('the stream of events', () => {
  it('begins with a greeting, and is kept by nobody on the way', async () => {
    const reader = await listen(person);
    expect(reader.received[0].event).toMatchObject({ kind: 'hello', isComplete: false });
    const leave = new AbortController();
    const { headers } = await fetch(`${workspace.url}/api/events`, {
      headers: { authorization: `Bearer ${person.token}`, 'accept-encoding': 'gzip, br' },
      signal: leave.signal,
    });
    leave.abort();
    expect(headers.get('content-type')).toMatch(/^text\/event-stream/);
    expect(headers.get('cache-control')).toMatch(/no-cache.*no-transform|no-transform.*no-cache/);
    expect(headers.get('content-encoding')).toBeNull();
    expect(headers.get('x-accel-buffering')).toBe('no');
  });

  it('takes no token from the address', async () => {
    expectProblem(await workspace.ask(undefined, 'get', `/events?token=${person.token}`), 401);
  });

  it('tells of captures, devices and presets, to everybody', async () => {
    const reader = await listen(admin);
    const number = await workspace.upload(person, 'silent.vcd');
    await workspace.ask(person, 'patch', `/captures/${number}`).send({ about: { subject: 'Silent' } });
    await workspace.ask(person, 'delete', `/captures/${number}`);
    const device = await workspace.ask(person, 'post', '/devices').send({ name: 'Mouse', kind: 'mouse' });
    const preset = { name: 'Rig', channels: ['data'], map: {} };
    await workspace.ask(person, 'post', '/presets').send(preset);
    await expect.poll(() => reader.of('preset')).toHaveLength(1);
    expect(reader.of('capture')).toEqual(
      ['created', 'changed', 'deleted'].map((change) => ({ kind: 'capture', number, change })),
    );
    expect(reader.of('device')).toEqual([{ kind: 'device', id: (device.body as { id: number }).id }]);
  });

  it('tells admins of people, and nobody else', async () => {
    const [forAdmin, forOthers] = [await listen(admin), await listen(person)];
    const input = { email: 'kofi@quintal.example', name: 'Kofi Darko', role: 'support' };
    const made = await workspace.ask(admin, 'post', '/people').send(input);
    await workspace.upload(person, 'silent.vcd');
    await expect.poll(() => forOthers.of('capture')).toHaveLength(1);
    expect(forAdmin.of('person')).toEqual([{ kind: 'person', id: (made.body as { id: number }).id }]);
    expect(forOthers.of('person')).toEqual([]);
  });

  it('tells how a job goes on: queued, running with growing percent, done', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'linewitness-events-'));
    const file = join(folder, 'long.csv');
    writeSampledCsv(file, 25e6);
    const uploaded = await workspace.ask(person, 'post', '/captures').attach('file', file);
    rmSync(folder, { recursive: true });
    const { number } = uploaded.body as CaptureView;
    const reader = await listen(person);
    const asked = await workspace.ask(person, 'post', `/captures/${number}/decodes`).send({ map: {} });
    const { id } = asked.body as JobView;
    const told = () => reader.of('job').filter(({ job }) => job.id === id);
    await expect.poll(() => told().at(-1)?.job.state).toBe('done');
    const states = told().map(({ job }) => job.state);
    expect(states[0]).toBe('queued');
    expect(states.filter((state, i) => state !== states[i - 1])).toEqual(['queued', 'running', 'done']);
    const percents = told().map(({ job }) => job.percent);
    expect(percents).toEqual([...percents].sort((a, b) => a - b));
    expect(percents.filter((percent) => percent > 0 && percent < 100).length).toBeGreaterThan(0);
    expect(told().at(-1)?.job).toMatchObject({ percent: 100, decodeId: expect.any(Number) });
  });

  it('goes on where it broke off, and says where it cannot', async () => {
    const first = await listen(person);
    const one = await workspace.upload(person, 'silent.vcd');
    await expect.poll(() => first.of('capture')).toHaveLength(1);
    const lastId = first.received.at(-1)!.id;
    await first.close();
    const missed = await workspace.upload(person, 'silent.vcd');
    const again = await listen(person, lastId);
    expect(again.received[0].event).toMatchObject({ kind: 'hello', isComplete: true });
    await expect.poll(() => again.of('capture')).toHaveLength(1);
    expect(again.of('capture')[0].number).toBe(missed);
    expect(missed).not.toBe(one);
    const stranger = await listen(person, 'of-another-run-7');
    expect(stranger.received[0].event).toMatchObject({ kind: 'hello', isComplete: false });
    const upToDate = await listen(person, again.received.at(-1)!.id);
    expect(upToDate.received.map(({ event }) => event)).toMatchObject([{ kind: 'hello', isComplete: true }]);
  });

  it('ends when its person is deactivated, signs out everywhere, changes or resets the password', async () => {
    const endings: ((who: Person) => PromiseLike<unknown>)[] = [
      ({ account }) => workspace.ask(admin, 'patch', `/people/${account.id}`).send({ isActive: false }),
      (who) => workspace.ask(who, 'delete', '/sessions'),
      (who) =>
        workspace.ask(who, 'post', '/me/password').send({ current: who.password, next: 'a later password' }),
      async ({ account }) => {
        const link = await workspace.services.passwords.makeLink(null, account.id);
        const input = { token: link.url.split('#')[1], password: 'a later password' };
        await workspace.ask(undefined, 'post', '/password-reset').send(input);
      },
    ];
    const bystander = await listen(person);
    for (const end of endings) {
      const who = await workspace.person('qa');
      const reader = await listen(who);
      await end(who);
      await reader.ended;
    }
    await workspace.upload(person, 'silent.vcd');
    await expect.poll(() => bystander.of('capture')).toHaveLength(1);
  });

  it('ends with the token it was opened with', async () => {
    const { account } = person;
    const token = jwt.sign({ epoch: account.tokenEpoch }, workspace.services.sessions.tokenKey, {
      subject: String(account.id),
      expiresIn: 2,
      ...TOKEN_PARTIES,
    });
    const reader = await listen({ token });
    await reader.ended;
    expectProblem(await workspace.ask({ token }, 'get', '/me'), 401);
  });
});
