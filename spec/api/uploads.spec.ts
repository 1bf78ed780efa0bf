import { createHash } from 'node:crypto';
import { readdir, readFile, stat } from 'node:fs/promises';
import { request } from 'node:http';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { CapturePage, CaptureView } from '#shared/contract/http/captures';
import type { Person } from './workspace';
import { expectProblem, sample, Workspace } from './workspace';

const LIMIT = 300_000;
const PICTURE = fileURLToPath(new URL('../captures/damaged/picture.csv', import.meta.url));

let workspace: Workspace;
let person: Person;
let vcd: Buffer;

beforeAll(async () => {
  workspace = await Workspace.open({ config: { uploadLimitBytes: LIMIT } });
  person = await workspace.person('support');
  vcd = await sample('silent.vcd');
});
afterAll(() => workspace.close());

function post(file: Buffer | string, name = 'bench.vcd', about: unknown = {}) {
  return workspace
    .ask(person, 'post', '/captures')
    .field('about', JSON.stringify(about))
    .attach('file', file, name);
}

/** A capture of this size, unlike any other. */
let serial = 0;
function captureOf(bytes: number): Buffer {
  const head = `$comment ${++serial} ${'-'.repeat(Math.max(0, bytes - vcd.length - 40))} $end\n`;
  return Buffer.concat([Buffer.from(head), vcd]);
}

const sha256 = (bytes: Buffer): string => createHash('sha256').update(bytes).digest('hex');

async function filesIn(folder: 'blobs' | 'incoming'): Promise<string[]> {
  const entries = await readdir(join(workspace.dataDir, folder), { recursive: true, withFileTypes: true });
  return entries.filter((entry) => entry.isFile()).map(({ name }) => name);
}

async function total(): Promise<number> {
  return ((await workspace.ask(person, 'get', '/captures')).body as CapturePage).total;
}

/** That the work leaves neither a file nor a capture behind. */
async function leavesNothing(work: () => Promise<unknown>): Promise<void> {
  const before = { blobs: (await filesIn('blobs')).sort(), total: await total() };
  await work();
  await expect.poll(() => filesIn('incoming')).toEqual([]);
  expect({ blobs: (await filesIn('blobs')).sort(), total: await total() }).toEqual(before);
}

describe('an upload', () => {
  it('is sealed by its hash, stored byte by byte for its owner’s eyes, and acknowledged whole', async () => {
    const about = { subject: 'Late reply', unitSerial: 'PC-07', calibrationDue: '2027-03-31' };
    const answer = await post(vcd, 'bench 3.vcd', { about });
    expect(answer.status).toBe(201);
    const capture = answer.body as CaptureView;
    expect(capture).toMatchObject({
      number: expect.stringMatching(/^LW-\d{4}$/),
      fileName: 'bench 3.vcd',
      sha256: sha256(vcd),
      size: vcd.length,
      owner: { id: person.account.id },
      about,
      state: 'received',
      job: null,
      decode: null,
      decodes: 0,
      mayDelete: true,
    });
    const path = join(workspace.dataDir, 'blobs', capture.sha256.slice(0, 2), capture.sha256);
    expect(await readFile(path)).toEqual(vcd);
    expect((await stat(path)).mode & 0o777).toBe(0o600);
    expect((await workspace.ask(person, 'get', `/captures/${capture.number}`)).body).toEqual(capture);
    expect(await filesIn('incoming')).toEqual([]);
  });

  it('is taken up to the limit, to the byte', async () => {
    expect((await post(captureOf(LIMIT - 10_000))).status).toBe(201);
    const most = Buffer.concat([captureOf(LIMIT - 10_000), Buffer.alloc(LIMIT, '\n')]).subarray(0, LIMIT);
    expect((await post(most)).body).toMatchObject({ size: LIMIT });
  });

  it.each([
    ['C:\\captures\\bench.vcd', 'bench.vcd'],
    ['../../etc/passwd.csv', 'passwd.csv'],
    ['Prüfstand "3" 100%.vcd', 'Prüfstand "3" 100%.vcd'],
    ['測定.vcd', '測定.vcd'],
    [`${'x'.repeat(300)}.vcd`, `${'x'.repeat(196)}.vcd`],
  ])('keeps a name people can read: %s', async (name, kept) => {
    const boundary = 'the-boundary';
    const quoted = name.replace(/"/g, '\\"').replace(/\\(?!")/g, '\\\\');
    const body = Buffer.concat([
      Buffer.from(
        `--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${quoted}"\r\n\r\n`,
      ),
      vcd,
      Buffer.from(`\r\n--${boundary}--\r\n`),
    ]);
    const answer = await workspace
      .ask(person, 'post', '/captures')
      .set('Content-Type', `multipart/form-data; boundary=${boundary}`)
      .send(body);
    expect(answer.status, answer.text).toBe(201);
    expect((answer.body as CaptureView).fileName).toBe(kept);
  });
});

describe('the same file again', () => {
  it('is stored once and goes with its last capture', async () => {
    const file = captureOf(2000);
    const hash = sha256(file);
    const numbers: string[] = [];
    for (const name of ['first.vcd', 'second.vcd']) {
      numbers.push(((await post(file, name)).body as CaptureView).number);
    }
    expect(new Set(numbers).size).toBe(2);
    expect((await filesIn('blobs')).filter((name) => name === hash)).toHaveLength(1);
    expect((await workspace.ask(person, 'delete', `/captures/${numbers[0]}`)).status).toBe(204);
    expect((await workspace.ask(person, 'get', `/captures/${numbers[1]}/file`)).body).toEqual(file);
    expect((await workspace.ask(person, 'delete', `/captures/${numbers[1]}`)).status).toBe(204);
    expect(await filesIn('blobs')).not.toContain(hash);
    for (const number of numbers) {
      expectProblem(await workspace.ask(person, 'get', `/captures/${number}`), 404, 'not-found');
    }
  });

  it('is there whole whatever goes at the same time', async () => {
    const file = captureOf(2000);
    for (let round = 0; round < 5; round++) {
      const { number } = (await post(file)).body as CaptureView;
      const [gone, ...kept] = await Promise.all([
        workspace.ask(person, 'delete', `/captures/${number}`),
        post(file, 'again.vcd'),
        post(file, 'and again.vcd'),
      ]);
      expect(gone.status).toBe(204);
      for (const answer of kept) {
        const { number: other } = answer.body as CaptureView;
        expect((await workspace.ask(person, 'get', `/captures/${other}/file`)).body).toEqual(file);
        await workspace.ask(person, 'delete', `/captures/${other}`);
      }
    }
    expect(await filesIn('blobs')).not.toContain(sha256(file));
  });

  it('never takes the number of a deleted capture', async () => {
    const first = (await post(vcd)).body as CaptureView;
    await workspace.ask(person, 'delete', `/captures/${first.number}`);
    expect(((await post(vcd)).body as CaptureView).number > first.number).toBe(true);
  });
});

describe('an upload that is refused', () => {
  it('for its size, told by its length or only by its bytes, leaves nothing', async () => {
    await leavesNothing(async () => {
      expectProblem(await post(captureOf(LIMIT * 4)), 413, 'too-large');
      expectProblem(await post(captureOf(LIMIT + 10_000)), 413, 'too-large');
    });
  });

  it('for being empty or no capture leaves nothing, whatever its name says', async () => {
    await leavesNothing(async () => {
      expectProblem(await post(Buffer.alloc(0)), 415);
      expectProblem(await post(await readFile(PICTURE), 'picture.csv'), 415);
      expectProblem(await post(Buffer.alloc(5000, 0), 'zeros.vcd'), 415);
    });
  });

  it('for its fields leaves nothing', async () => {
    await leavesNothing(async () => {
      const cold = await post(vcd, 'bench.vcd', { about: { temperatureC: 'cold' } });
      expect(expectProblem(cold, 400, 'invalid').fields).toMatchObject([{ path: 'about.temperatureC' }]);
      const unknown = await post(vcd, 'bench.vcd', { buildId: 987_654 });
      expect(expectProblem(unknown, 400, 'unknown-build').fields).toMatchObject([{ path: 'buildId' }]);
      // A file nobody has yet takes another way out.
      expectProblem(await post(captureOf(3000), 'bench.vcd', { buildId: 987_654 }), 400, 'unknown-build');
      const noJson = workspace
        .ask(person, 'post', '/captures')
        .field('about', '{')
        .attach('file', vcd, 'a.vcd');
      expectProblem(await noJson, 400, 'bad-json');
    });
  });

  it('for its form leaves nothing', async () => {
    const form = () => workspace.ask(person, 'post', '/captures');
    await leavesNothing(async () => {
      expectProblem(await form().field('about', '{}'), 400, 'no-file');
      expectProblem(await form().send({ about: {} }), 400, 'no-file');
      expectProblem(await form().attach('capture', vcd, 'a.vcd'), 400, 'broken-body');
      expectProblem(
        await form().attach('file', vcd, 'a.vcd').attach('file', vcd, 'b.vcd'),
        400,
        'broken-body',
      );
      expectProblem(
        await form().field('about', 'x'.repeat(100_000)).attach('file', vcd, 'a.vcd'),
        400,
        'broken-body',
      );
      const boundary = 'multipart/form-data; boundary=the-boundary';
      const cut =
        '--the-boundary\r\nContent-Disposition: form-data; name="file"; filename="a.vcd"\r\n\r\n$timescale';
      expectProblem(await form().set('Content-Type', boundary).send(cut), 400, 'broken-body');
      expectProblem(await form().set('Content-Type', 'multipart/form-data').send(cut), 400, 'broken-body');
    });
  });

  it('because nobody is signed in leaves nothing', async () => {
    await leavesNothing(async () => {
      const answer = await workspace.ask(undefined, 'post', '/captures').attach('file', vcd, 'a.vcd');
      expectProblem(answer, 401, 'not-signed-in');
    });
  });

  it('because the disk is nearly full is refused before it comes in', async () => {
    const room = vi.spyOn(workspace.services.blobs, 'room').mockResolvedValue(1000);
    await leavesNothing(async () => {
      expectProblem(await post(captureOf(200_000)), 507, 'disk-full');
      const asked = workspace.ask(person, 'post', '/uploads/check').send({ name: 'a.vcd', size: 2000 });
      expectProblem(await asked, 507, 'disk-full');
    });
    room.mockRestore();
  });
});

describe('an upload that breaks off', () => {
  it('leaves nothing, and the server goes on', async () => {
    await leavesNothing(async () => {
      const boundary = 'the-boundary';
      const { hostname, port } = new URL(workspace.url);
      const upload = request({
        hostname,
        port,
        method: 'POST',
        path: '/api/captures',
        headers: {
          authorization: `Bearer ${person.token}`,
          'content-type': `multipart/form-data; boundary=${boundary}`,
          'content-length': 200_000,
        },
      });
      upload.on('error', () => undefined);
      upload.write(`--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="a.vcd"\r\n\r\n`);
      upload.write(captureOf(100_000));
      await expect.poll(() => filesIn('incoming')).toHaveLength(1);
      upload.destroy();
      await expect.poll(() => filesIn('incoming')).toEqual([]);
    });
    expect((await post(vcd)).status).toBe(201);
  });
});

describe('asking before an upload', () => {
  const ask = (name: string, size: number) =>
    workspace.ask(person, 'post', '/uploads/check').send({ name, size });

  it('says yes to what may come', async () => {
    expect((await ask('bench.vcd', LIMIT)).status).toBe(204);
    expect((await ask('no ending', 1)).status).toBe(204);
  });

  it('says no with the reason', async () => {
    expect(expectProblem(await ask('bench.vcd', LIMIT + 1), 413, 'too-large').detail).toContain('0.3 MB');
    expectProblem(await ask('bench.vcd', 0), 415, 'empty-file');
    expect(expectProblem(await ask('bench.vcd.ZIP', 10), 415, 'not-a-capture').detail).toContain('ZIP');
  });

  it('tells the limit with the workspace', async () => {
    const { body } = await workspace.ask(undefined, 'get', '/workspace');
    expect(body).toMatchObject({ uploadLimitBytes: LIMIT });
  });
});
