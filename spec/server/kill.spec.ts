import { createHash } from 'node:crypto';
import { mkdirSync, mkdtempSync, readdirSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { CapturePage, CaptureView } from '#shared/contract/http/captures';
import type { DecodeView } from '#shared/contract/http/decodes';
import type { JobView } from '#shared/contract/http/jobs';
import { writeSampledCsv } from '../bench/bench-files';
import { ServerProcess } from './server-process';

const folder = mkdtempSync(join(tmpdir(), 'linewitness-kill-'));
const LONG = join(folder, 'long.csv');
/** Long enough that its decode can be caught while it runs. */
const LONG_BYTES = 12e6;
/** The processes share the machine with whatever else runs on it: an upper bound, nothing that is measured. */
const PATIENCE = { timeout: 120_000 };

beforeAll(() => writeSampledCsv(LONG, LONG_BYTES));
afterAll(async () => {
  await ServerProcess.endAll();
  rmSync(folder, { recursive: true });
});

const newDataDir = (): string => mkdtempSync(join(folder, 'data-'));
const sha256 = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex');
const captureText = (n: number): Buffer =>
  Buffer.from(
    `$comment ${n} ${'-'.repeat(50_000)} $end\n$timescale 1 us $end\n$var wire 1 ! data $end\n$enddefinitions $end\n#0\n0!\n`,
  );

function filesBelow(path: string): string[] {
  return readdirSync(path, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map(({ name }) => name);
}

async function listAll(server: ServerProcess, token: string): Promise<CaptureView[]> {
  const captures: CaptureView[] = [];
  for (let page = 1; ; page++) {
    const answer = await server.ask(token, 'get', `/captures?page=${page}`).expect(200);
    const { total, captures: some } = answer.body as CapturePage;
    captures.push(...some);
    if (captures.length >= total) return captures;
  }
}

/** An upload that has begun and will not end by itself. */
function beginUpload({ url }: ServerProcess, token: string): void {
  const { hostname, port } = new URL(url);
  const upload = request({
    hostname,
    port,
    method: 'POST',
    path: '/api/captures',
    headers: {
      authorization: `Bearer ${token}`,
      'content-type': 'multipart/form-data; boundary=b',
      'content-length': 50_000_000,
    },
  });
  upload.on('error', () => undefined);
  upload.write('--b\r\nContent-Disposition: form-data; name="file"; filename="unfinished.vcd"\r\n\r\n');
  upload.write(Buffer.concat([captureText(-1), Buffer.alloc(1_000_000, '\n')]));
}

describe('a server that is killed while files come in', () => {
  it('has every file it acknowledged, whole, and shows no other', PATIENCE, async () => {
    const DATA_DIR = newDataDir();
    let server = await ServerProcess.start({ DATA_DIR });
    const token = await server.firstAdmin();
    const acknowledged = new Map<string, string>();
    let count = 0;
    for (const acknowledgements of [4, 12, 24]) {
      const running = server;
      beginUpload(running, token);
      const incoming = join(DATA_DIR, 'incoming');
      await expect
        .poll(() => readdirSync(incoming).some((name) => statSync(join(incoming, name)).size > 500_000))
        .toBe(true);
      const uploadUntilKilled = async (): Promise<void> => {
        for (;;) {
          const file = captureText(++count);
          const answer = await running.ask(token, 'post', '/captures').attach('file', file, 'small.vcd');
          expect(answer.status, answer.text).toBe(201);
          acknowledged.set((answer.body as CaptureView).number, sha256(file));
          if (acknowledged.size === acknowledgements) void running.kill();
        }
      };
      const uploads = await Promise.allSettled([1, 2, 3, 4].map(uploadUntilKilled));
      for (const upload of uploads)
        expect(String((upload as PromiseRejectedResult).reason)).toMatch(/ECONN|socket|aborted/i);
      expect((await running.ended).signal).toBe('SIGKILL');

      server = await ServerProcess.start({ DATA_DIR });
      expect(readdirSync(join(DATA_DIR, 'incoming'))).toEqual([]);
      const captures = await listAll(server, token);
      for (const [number, hash] of acknowledged) {
        expect(captures.find((capture) => capture.number === number)?.sha256, number).toBe(hash);
      }
      expect(captures.map(({ fileName }) => fileName)).not.toContain('unfinished.vcd');
      for (const { number, sha256: hash, size, state } of captures) {
        const { body } = await server.ask(token, 'get', `/captures/${number}/file`).expect(200);
        expect([number, sha256(body as Buffer), (body as Buffer).length, state]).toEqual([
          number,
          hash,
          size,
          'received',
        ]);
      }
      expect(filesBelow(join(DATA_DIR, 'blobs')).sort()).toEqual(captures.map((one) => one.sha256).sort());
    }
    expect(await server.terminate()).toEqual({ code: 0, signal: null });
  });
});

/** A server whose decode of a long capture is under way, and the job of another that waits. */
async function decoding(DATA_DIR: string) {
  const server = await ServerProcess.start({ DATA_DIR });
  const token = await server.firstAdmin();
  const ask = async (): Promise<JobView> => {
    const uploaded = await server.ask(token, 'post', '/captures').attach('file', LONG).expect(201);
    const path = `/captures/${(uploaded.body as CaptureView).number}/decodes`;
    return (await server.ask(token, 'post', path).send({ map: {} }).expect(202)).body as JobView;
  };
  const jobs = [await ask(), await ask(), await ask()];
  const isUnderWay = async (): Promise<boolean> => {
    const { state, percent } = (await server.ask(token, 'get', `/jobs/${jobs[0].id}`)).body as JobView;
    return state === 'running' && percent > 0;
  };
  await expect.poll(isUnderWay, { ...PATIENCE, interval: 10 }).toBe(true);
  return { server, token, jobs };
}

/** That each job comes to one decode with all its products, without anybody asking again. */
async function expectAllDone(
  server: ServerProcess,
  token: string,
  jobs: readonly JobView[],
  DATA_DIR: string,
): Promise<void> {
  const stateOf = async ({ id }: JobView) =>
    ((await server.ask(token, 'get', `/jobs/${id}`)).body as JobView).state;
  await expect.poll(() => Promise.all(jobs.map(stateOf)), PATIENCE).toEqual(jobs.map(() => 'done'));
  const packets = new Set<number>();
  for (const { capture } of jobs) {
    const answer = await server.ask(token, 'get', `/captures/${capture}/decodes`).expect(200);
    const decodes = answer.body as DecodeView[];
    expect(decodes.map(({ ordinal, checks }) => [ordinal, checks.length])).toEqual([[1, 1]]);
    packets.add(decodes[0].packets);
    for (const product of ['result', 'log', 'tape', 'packets.csv']) {
      await server.ask(token, 'get', `/decodes/${decodes[0].id}/${product}`).expect(200);
    }
  }
  // The same file comes to the same, whether its decode was interrupted or not.
  expect(packets.size).toBe(1);
  expect([...packets][0]).toBeGreaterThan(100);
  expect(readdirSync(join(DATA_DIR, 'products')).sort()).toEqual(jobs.map(({ id }) => String(id)).sort());
}

describe('a server that is killed while it decodes', () => {
  it(
    'takes interrupted jobs up again, shows nothing half, and sweeps what nobody knows',
    PATIENCE,
    async () => {
      const DATA_DIR = newDataDir();
      const { server, token, jobs } = await decoding(DATA_DIR);
      expect(await server.kill()).toEqual({ code: null, signal: 'SIGKILL' });
      // What a kill leaves between a file and its row, at each place where it can strike.
      mkdirSync(join(DATA_DIR, 'blobs', 'ff'), { recursive: true });
      writeFileSync(join(DATA_DIR, 'blobs', 'ff', 'f'.repeat(64)), 'a file whose row was never written');
      writeFileSync(join(DATA_DIR, 'incoming', 'half'), 'half a file');
      for (const name of ['999', `${jobs[0].id}.draft`]) {
        mkdirSync(join(DATA_DIR, 'products', name), { recursive: true });
        writeFileSync(join(DATA_DIR, 'products', name, 'tape.bin'), 'half a tape');
      }
      const again = await ServerProcess.start({ DATA_DIR });
      expect(readdirSync(join(DATA_DIR, 'incoming'))).toEqual([]);
      expect(filesBelow(join(DATA_DIR, 'blobs'))).toHaveLength(1);
      for (const { capture } of jobs) {
        const { body } = await again.ask(token, 'get', `/captures/${capture}`).expect(200);
        const { state, decode, decodes } = body as CaptureView;
        if (state !== 'decoded') expect({ decode, decodes }).toEqual({ decode: null, decodes: 0 });
      }
      await expectAllDone(again, token, jobs, DATA_DIR);
      await again.terminate();
    },
  );
});

describe('a server that is asked to stop while it decodes', () => {
  it(
    'gives its jobs back as if they had not been begun, and goes on at the next start',
    PATIENCE,
    async () => {
      const DATA_DIR = newDataDir();
      const { server, token, jobs } = await decoding(DATA_DIR);
      expect(await server.terminate()).toEqual({ code: 0, signal: null });
      const database = new Database(join(DATA_DIR, 'linewitness.sqlite'), { readonly: true });
      const rows = database.prepare('SELECT state, attempts FROM job ORDER BY id').all();
      database.close();
      expect(rows).toEqual(jobs.map(() => ({ state: 'queued', attempts: 0 })));
      const again = await ServerProcess.start({ DATA_DIR });
      await expectAllDone(again, token, jobs, DATA_DIR);
      await again.terminate();
    },
  );
});
