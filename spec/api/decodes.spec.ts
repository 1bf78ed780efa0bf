import { existsSync, mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CaptureView } from '#shared/contract/http/captures';
import type { CheckChanges, CheckView } from '#shared/contract/http/checks';
import type { BatchAnswer, DecodeView } from '#shared/contract/http/decodes';
import type { JobView } from '#shared/contract/http/jobs';
import type { LinesView, PreviewView } from '#shared/contract/http/mapping';
import { writeSampledCsv } from '../bench/bench-files';
import type { Person } from './workspace';
import { expectProblem, Workspace } from './workspace';

/** Long enough that its decode can be seen running. */
const LONG_BYTES = 12e6;

const folder = mkdtempSync(join(tmpdir(), 'linewitness-long-'));
const LONG = join(folder, 'long.csv');

let workspace: Workspace;
let person: Person;

beforeAll(async () => {
  writeSampledCsv(LONG, LONG_BYTES);
  workspace = await Workspace.open();
  person = await workspace.person('firmware');
});
afterAll(async () => {
  await workspace.close();
  rmSync(folder, { recursive: true });
});

async function get<T>(path: string): Promise<T> {
  const answer = await workspace.ask(person, 'get', path);
  expect(answer.status, answer.text).toBe(200);
  return answer.body as T;
}

async function uploadText(name: string, text: string): Promise<string> {
  const answer = await workspace.ask(person, 'post', '/captures').attach('file', Buffer.from(text), name);
  expect(answer.status, answer.text).toBe(201);
  return (answer.body as CaptureView).number;
}

async function uploadLong(): Promise<string> {
  const answer = await workspace.ask(person, 'post', '/captures').attach('file', LONG);
  expect(answer.status, answer.text).toBe(201);
  return (answer.body as CaptureView).number;
}

const cancel = (id: number) => workspace.ask(person, 'delete', `/jobs/${id}`);

async function ask(number: string, request: object = { map: {} }): Promise<JobView> {
  const answer = await workspace.ask(person, 'post', `/captures/${number}/decodes`).send(request);
  expect(answer.status, answer.text).toBe(202);
  return answer.body as JobView;
}

async function askCheck(decodeId: number, rulebook: string): Promise<JobView> {
  const answer = await workspace.ask(person, 'post', `/decodes/${decodeId}/checks`).send({ rulebook });
  expect(answer.status, answer.text).toBe(202);
  return workspace.finished(person, (answer.body as JobView).id);
}

const running = (id: number) =>
  expect.poll(async () => (await get<JobView>(`/jobs/${id}`)).state).toBe('running');

function products(): string[] {
  return readdirSync(join(workspace.dataDir, 'products'));
}

// Source of what the sample holds: samples/late-warm-reset.script.json.
describe('mapping the lines of a capture', () => {
  let number: string;
  beforeAll(async () => {
    number = await workspace.upload(person, 'late-warm-reset.vcd');
  });

  it('suggests channels with reasons, and shows what they would make', async () => {
    const lines = await get<LinesView>(`/captures/${number}/lines`);
    expect(lines).toMatchObject({ format: 'vcd', layout: 'transitions', channelCount: 3 });
    const chosen = lines.suggestions.filter(({ channel }) => channel !== null);
    expect(chosen.map(({ role, channel, polarity }) => [role, channel, polarity])).toEqual([
      ['data', 'bench.port.rxd', 'line'],
      ['rts', 'bench.port.rts', 'line'],
      ['dtr', 'bench.port.dtr', 'line'],
    ]);
    expect(chosen.every(({ reason }) => reason !== '')).toBe(true);
    expect(lines.preview).toMatchObject({
      protocol: 'M3',
      framing: '7N2',
      identity: 'M3',
      totals: { resets: 3, answeredResets: 3, damagedCharacters: 0 },
    });
  });

  it('previews another map and stores nothing', async () => {
    const map = { lines: { data: { channel: 'rxd', polarity: 'logic' }, rts: null, dtr: null } };
    const answer = await workspace.ask(person, 'post', `/captures/${number}/preview`).send({ map });
    const preview = answer.body as PreviewView;
    expect(preview.lines).toMatchObject([{ role: 'data', channel: 'bench.port.rxd', polarity: 'logic' }]);
    expect(preview.totals.damagedCharacters).toBeGreaterThan(0);
    const capture = await get<CaptureView>(`/captures/${number}`);
    expect(capture).toMatchObject({ state: 'received', decodes: 0, job: null });
    expect(await get<JobView[]>('/jobs')).toEqual([]);
  });

  it('refuses a channel that is not there, naming those that are', async () => {
    const map = { lines: { data: { channel: 'nosuch' } } };
    const answer = await workspace.ask(person, 'post', `/captures/${number}/preview`).send({ map });
    expect(expectProblem(answer, 422, 'map').detail).toContain('bench.port.rxd');
  });

  it('says where a damaged file breaks, and shows the place', async () => {
    const damaged = await uploadText('cut.vcd', '$timescale 1 us $end\n$var wire 1 ! data\n#0\n');
    const answer = await workspace.ask(person, 'get', `/captures/${damaged}/lines`);
    expect(expectProblem(answer, 422, 'cut-short')).toMatchObject({
      place: { line: 2, column: 1 },
      excerpt: { firstLine: 1, lines: ['$timescale 1 us $end', '$var wire 1 ! data', '#0'] },
    });
  });

  it('asks for the sample rate where a file has no times, and takes it', async () => {
    const rows = Array.from({ length: 400 }, (_, i) => `${i % 40 < 20 ? 1 : 0},${i > 100 ? 1 : 0}`);
    const bare = await uploadText('bare.csv', `data,rts\n${rows.join('\n')}\n`);
    expectProblem(await workspace.ask(person, 'get', `/captures/${bare}/lines`), 422, 'no-sample-rate');
    const lines = await get<LinesView>(`/captures/${bare}/lines?sampleRateHz=10000`);
    expect(lines).toMatchObject({ layout: 'sampled', sampleIntervalS: 1e-4, channelCount: 2 });
    expect((await workspace.decode(person, bare)).problem?.code).toBe('no-sample-rate');
    const job = await workspace.decode(person, bare, { map: {}, options: { sampleRateHz: 10_000 } });
    expect(job.state).toBe('done');
  });
});

describe('a decode', () => {
  let number: string;
  let job: JobView;
  beforeAll(async () => {
    number = await workspace.upload(person, 'late-warm-reset.vcd');
    job = await workspace.decode(person, number);
  });

  it('ends as a job that names what came of it', () => {
    expect(job).toMatchObject({
      capture: number,
      kind: 'decode',
      state: 'done',
      percent: 100,
      decodeId: expect.any(Number),
      checkId: expect.any(Number),
      problem: null,
    });
    expect(products()).toContain(String(job.id));
    expect(products().filter((name) => name.includes('draft'))).toEqual([]);
  });

  it('shows with what it was made from and its first check, in its place in lists too', async () => {
    const decode = await get<DecodeView>(`/decodes/${job.decodeId}`);
    expect(decode).toMatchObject({
      capture: number,
      ordinal: 1,
      protocol: 'M3',
      framing: '7N2',
      nominalBitRate: 1200,
      resets: 3,
      madeBy: { id: person.account.id },
      check: { id: job.checkId, rulebook: { key: 'baseline' }, verdict: 'fail' },
    });
    expect(decode.check?.worst[0]).toMatchObject({ rule: 'HSK-1', verdict: 'violation', limit: 14 });
    expect(decode.check?.worst[0].measured).toBeCloseTo(15.62, 2);
    const capture = await get<CaptureView>(`/captures/${number}`);
    expect(capture).toMatchObject({ state: 'decoded', job: null, decodes: 1, decode: { id: decode.id } });
  });

  it('is numbered within its capture, the latest first, with the map it was asked with', async () => {
    const map = { lines: { data: { channel: 'rxd', polarity: 'line' as const } }, countsPerInch: 400 };
    const second = await workspace.decode(person, number, { map, options: { protocol: 'M' } });
    const decodes = await get<DecodeView[]>(`/captures/${number}/decodes`);
    expect(decodes.map(({ id, ordinal }) => [id, ordinal])).toEqual([
      [second.decodeId, 2],
      [job.decodeId, 1],
    ]);
    expect(decodes[0]).toMatchObject({ protocol: 'M', map, options: { protocol: 'M' } });
    const captures = await get<CaptureView>(`/captures/${number}`);
    expect(captures).toMatchObject({ decodes: 2, decode: { id: second.decodeId } });
  });

  it('against another rulebook is a check more, and tells what changed', async () => {
    const before = await get<CheckChanges>(`/checks/${job.checkId}/changes`);
    expect(before).toMatchObject({ from: null, rules: [], appeared: [], disappeared: [], kept: 0 });
    const again = await askCheck(job.decodeId!, 'host-limits');
    expect(again).toMatchObject({ kind: 'check', state: 'done', decodeId: job.decodeId });
    const check = await get<CheckView>(`/checks/${again.checkId}`);
    expect(check).toMatchObject({ capture: number, rulebook: { key: 'host-limits', name: 'Host limits' } });
    expect(check.rules.find(({ id }) => id === 'HSK-1')?.verdict).toBe('pass');
    const changes = await get<CheckChanges>(`/checks/${again.checkId}/changes?from=${job.checkId}`);
    expect(changes).toMatchObject({ from: { id: job.checkId }, to: { id: again.checkId } });
    expect(changes.rules.find(({ id }) => id === 'HSK-1')).toMatchObject({
      direction: 'better',
      from: { verdict: 'violation', limit: 14 },
      to: { verdict: 'pass' },
    });
    expect(changes.disappeared.map(({ rule }) => rule)).toContain('HSK-1');
    expect(changes.appeared).toEqual([]);
    const back = await get<CheckChanges>(`/checks/${job.checkId}/changes?from=${again.checkId}`);
    expect(back.rules.find(({ id }) => id === 'HSK-1')?.direction).toBe('worse');
    expect(back.appeared).toEqual(changes.disappeared);
    const list = await get<{ id: number }[]>(`/decodes/${job.decodeId}/checks`);
    expect(list.map(({ id }) => id)).toEqual([again.checkId, job.checkId]);
  });

  it('is compared with checks of the same capture only', async () => {
    const other = await workspace.decode(person, await workspace.upload(person, 'silent.vcd'));
    const path = `/checks/${job.checkId}/changes`;
    const answer = await workspace.ask(person, 'get', `${path}?from=${other.checkId}`);
    expect(expectProblem(answer, 400, 'other-capture').fields).toMatchObject([{ path: 'from' }]);
    expectProblem(await workspace.ask(person, 'get', `${path}?from=987654`), 404, 'not-found');
  });
});

describe('a batch', () => {
  it('decodes many captures with one map, and tells which are not there', async () => {
    const numbers = [
      await workspace.upload(person, 'lost-character.vcd'),
      await workspace.upload(person, 'healthy-m.vcd'),
    ];
    const body = { numbers: [numbers[0], 'LW-987654', numbers[1], numbers[0]], map: {} };
    const answer = await workspace.ask(person, 'post', '/captures/decodes').send(body);
    expect(answer.status).toBe(202);
    const { jobs, refused } = answer.body as BatchAnswer;
    expect(jobs.map(({ capture }) => capture)).toEqual(numbers);
    expect(refused).toMatchObject([{ number: 'LW-987654', problem: { status: 404, code: 'not-found' } }]);
    for (const { id } of jobs) expect((await workspace.finished(person, id)).state).toBe('done');
  });

  it('lets a map that does not fit fail in its own job only', async () => {
    const numbers = [
      await workspace.upload(person, 'healthy-m.vcd'),
      await workspace.upload(person, 'five-byte.csv'),
    ];
    const map = { lines: { data: { channel: 'RXD', polarity: 'logic' } } };
    const answer = await workspace.ask(person, 'post', '/captures/decodes').send({ numbers, map });
    const ended = await Promise.all(
      (answer.body as BatchAnswer).jobs.map(({ id }) => workspace.finished(person, id)),
    );
    expect(ended.map(({ state, problem }) => [state, problem?.code])).toEqual([
      ['failed', 'map'],
      ['done', undefined],
    ]);
  });
});

describe('a decode of a damaged file', () => {
  it('fails with place and excerpt, and the server goes on', async () => {
    const damaged = await uploadText('cut.vcd', '$timescale 1 us $end\n$var wire 1 ! data\n#0\n');
    const job = await workspace.decode(person, damaged);
    expect(job).toMatchObject({
      state: 'failed',
      decodeId: null,
      checkId: null,
      problem: { code: 'cut-short', place: { line: 2 }, excerpt: { firstLine: 1 } },
    });
    expect(await get<CaptureView>(`/captures/${damaged}`)).toMatchObject({
      state: 'failed',
      job: { id: job.id, problem: { code: 'cut-short' } },
      decode: null,
    });
    expect(await get<DecodeView[]>(`/captures/${damaged}/decodes`)).toEqual([]);
    expect(products()).not.toContain(String(job.id));
    const good = await workspace.decode(person, await workspace.upload(person, 'silent.vcd'));
    expect(good.state).toBe('done');
  });

  it('leaves the good decode of its capture in place', async () => {
    const number = await workspace.upload(person, 'silent.vcd');
    const good = await workspace.decode(person, number);
    const map = { lines: { data: { channel: 'nosuch' } } };
    expect((await workspace.decode(person, number, { map })).problem?.code).toBe('map');
    expect(await get<CaptureView>(`/captures/${number}`)).toMatchObject({
      state: 'decoded',
      decode: { id: good.decodeId },
      job: { state: 'failed', problem: { code: 'map' } },
    });
  });
});

describe('cancelling', () => {
  it('ends a running job and lets the next one run; a queued one never begins', async () => {
    const number = await uploadLong();
    const [first, second] = [await ask(number), await ask(number)];
    const third = await ask(await workspace.upload(person, 'silent.vcd'));
    await running(first.id);
    expect((await get<JobView[]>('/jobs')).map(({ id }) => id)).toEqual([first.id, second.id, third.id]);
    expect((await cancel(second.id)).body).toMatchObject({ state: 'cancelled' });
    expect((await cancel(first.id)).body).toMatchObject({ state: 'cancelled', decodeId: null });
    expect((await workspace.finished(person, third.id)).state).toBe('done');
    expect((await workspace.finished(person, first.id)).state).toBe('cancelled');
    expect(await get<CaptureView>(`/captures/${number}`)).toMatchObject({
      state: 'received',
      job: null,
      decodes: 0,
    });
    expect(await get<JobView[]>('/jobs')).toEqual([]);
    expect(products().filter((name) => name.startsWith(String(first.id)))).toEqual([]);
  });

  it('leaves a job that is over as it is', async () => {
    const job = await workspace.decode(person, await workspace.upload(person, 'silent.vcd'));
    expect((await cancel(job.id)).body).toEqual(job);
  });

  it('happens to the jobs of a capture that is deleted, and nothing of it stays', async () => {
    const number = await uploadLong();
    const done = await workspace.decode(person, number, { map: {}, rulebook: 'host-limits' });
    const { sha256 } = await get<CaptureView>(`/captures/${number}`);
    const path = join(workspace.dataDir, 'blobs', sha256.slice(0, 2), sha256);
    const job = await ask(number);
    await running(job.id);
    for (const { number: same } of (await get<{ captures: CaptureView[] }>('/captures')).captures) {
      const capture = await get<CaptureView>(`/captures/${same}`);
      if (capture.sha256 === sha256 && same !== number)
        await workspace.ask(person, 'delete', `/captures/${same}`);
    }
    expect(existsSync(path)).toBe(true);
    expect((await workspace.ask(person, 'delete', `/captures/${number}`)).status).toBe(204);
    await workspace.services.runner.whenIdle();
    for (const gone of [`/jobs/${job.id}`, `/decodes/${done.decodeId}`, `/checks/${done.checkId}`]) {
      expectProblem(await workspace.ask(person, 'get', gone), 404, 'not-found');
    }
    expect(existsSync(path)).toBe(false);
    expect(products().filter((name) => /^\d+/.exec(name)?.[0] === String(job.id))).toEqual([]);
    expect(products()).not.toContain(String(done.id));
  });
});

describe('the rulebooks', () => {
  it('are listed, each with every rule of the product', async () => {
    const list = await get<{ key: string; name: string }[]>('/rulebooks');
    expect(list).toMatchObject([
      { key: 'baseline', name: 'Baseline' },
      { key: 'host-limits', name: 'Host limits' },
    ]);
    const [baseline, hosts] = await Promise.all(
      list.map(({ key }) => get<{ rules: { id: string; limit: number | null }[] }>(`/rulebooks/${key}`)),
    );
    expect(hosts.rules.map(({ id }) => id)).toEqual(baseline.rules.map(({ id }) => id));
    const limitOf = ({ rules }: typeof hosts) => rules.find(({ id }) => id === 'HSK-1')?.limit;
    expect(limitOf(hosts)).toBeGreaterThan(limitOf(baseline)!);
  });
});
