import { mkdtempSync, readdirSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import type { CaptureView } from '#shared/contract/http/captures';
import { WorkerPool } from '../../server/jobs/worker-pool';
import type { Person } from '../api/workspace';
import { Workspace } from '../api/workspace';
import { writeSampledCsv } from '../bench/bench-files';

let workspace: Workspace;
let person: Person;

beforeAll(async () => {
  workspace = await Workspace.open();
  person = await workspace.person('qa');
});
afterAll(() => workspace.close());
afterEach(() => vi.restoreAllMocks());

describe('a job whose thread breaks off', () => {
  it('is begun once more, and done then', async () => {
    const run = vi.spyOn(WorkerPool.prototype, 'run').mockRejectedValueOnce(new Error('the thread is gone'));
    const job = await workspace.decode(person, await workspace.upload(person, 'silent.vcd'));
    expect(job).toMatchObject({ state: 'done', problem: null });
    expect(run).toHaveBeenCalledTimes(2);
  });

  it('fails after the second time, says so, and is not begun for ever', async () => {
    const run = vi.spyOn(WorkerPool.prototype, 'run').mockRejectedValue(new Error('the thread is gone'));
    const number = await workspace.upload(person, 'silent.vcd');
    const job = await workspace.decode(person, number);
    expect(job).toMatchObject({ state: 'failed', decodeId: null, problem: { code: 'crashed' } });
    expect(run).toHaveBeenCalledTimes(2);
    vi.restoreAllMocks();
    expect((await workspace.ask(person, 'get', `/captures/${number}`)).body).toMatchObject({
      state: 'failed',
    });
    expect((await workspace.decode(person, number)).state).toBe('done');
  });

  it('really is another thread, and the server goes on after it', async () => {
    const number = await workspace.upload(person, 'silent.vcd');
    const { sha256 } = (await workspace.ask(person, 'get', `/captures/${number}`)).body as CaptureView;
    // A file that vanished from under the database is nobody's mistake: the thread throws.
    rmSync(join(workspace.dataDir, 'blobs', sha256.slice(0, 2), sha256));
    expect(await workspace.decode(person, number)).toMatchObject({
      state: 'failed',
      problem: { code: 'crashed' },
    });
    const good = await workspace.decode(person, await workspace.upload(person, 'lost-character.vcd'));
    expect(good.state).toBe('done');
    expect(
      readdirSync(join(workspace.dataDir, 'products')).filter((name) => name.endsWith('.draft')),
    ).toEqual([]);
  });
});

describe('the memory of a decode', () => {
  it('has a budget that counts the edges too: over it the file is refused, and the thread lives', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'linewitness-memory-'));
    const path = join(folder, 'long.csv');
    writeSampledCsv(path, 5e6);
    const file = { path, name: 'long.csv', sha256: '0'.repeat(64), size: statSync(path).size };
    const request = { map: {}, options: {}, rulebook: 'baseline' } as const;
    const task = {
      kind: 'decode',
      file,
      request,
      rulebook: 'baseline',
      draft: join(folder, 'draft'),
    } as const;
    const pools = [new WorkerPool(1, 1e6), new WorkerPool(1)];
    try {
      const [tight, wide] = await Promise.all(pools.map((pool) => pool.run(task)));
      expect(tight).toMatchObject({ kind: 'problem', problem: { code: 'too-large' } });
      expect(wide.kind).toBe('judged');
    } finally {
      await Promise.all(pools.map((pool) => pool.stop()));
      rmSync(folder, { recursive: true });
    }
  });
});
