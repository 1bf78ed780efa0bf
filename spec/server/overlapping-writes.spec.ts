import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Store } from '../../server/data-source';
import { Account } from '../../server/entities/account';
import { newAccount } from '../../server/services/account-service';

let folder: string;
let store: Store;

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'linewitness-store-'));
  store = await Store.open(join(folder, 'linewitness.sqlite'));
});
afterEach(async () => {
  await store.close();
  rmSync(folder, { recursive: true });
});

const person = (name: string) => newAccount({ email: `${name}@quintal.example`, name, role: 'qa' });

async function names(): Promise<string[]> {
  return (await store.reader.find(Account, { order: { id: 'ASC' } })).map(({ name }) => name);
}

/** Lets everything that is ready go on: were writes not kept apart, the other one would go on now. */
async function letOthersWork(): Promise<void> {
  for (let i = 0; i < 20; i++) await new Promise((resolve) => setImmediate(resolve));
}

// Why: one query runner serves a whole SQLite DataSource, so that overlapping transactions share one. Seen before the queue was made.
describe('writes that overlap', () => {
  it('fail and succeed each for itself', async () => {
    const failing = store.write(async (manager) => {
      await manager.save(Account, person('failing'));
      await letOthersWork();
      await manager.save(Account, person('failing-too'));
      await letOthersWork();
      throw new Error('on purpose');
    });
    const succeeding = store.write(async (manager) => {
      await manager.save(Account, person('succeeding'));
      await letOthersWork();
    });
    const single = store.write((manager) => manager.save(Account, person('single')));
    await expect(failing).rejects.toThrow('on purpose');
    await Promise.all([succeeding, single]);
    expect(await names()).toEqual(['succeeding', 'single']);
  });

  it('keep what succeeded and nothing of what failed, out of two hundred at once', async () => {
    const outcomes = await Promise.allSettled(
      Array.from({ length: 200 }, (_, i) =>
        store.write(async (manager) => {
          await manager.save(Account, person(`n${i}`));
          if (i % 7 === 0) await letOthersWork();
          if (i % 3 === 0) throw new Error('on purpose');
        }),
      ),
    );
    const good = outcomes.flatMap(({ status }, i) => (status === 'fulfilled' ? [`n${i}`] : []));
    expect(good).toHaveLength(133);
    expect(await names()).toEqual(good);
  });

  it('show nothing to readers before they are done', async () => {
    let seen: string[] | undefined;
    await store.write(async (manager) => {
      await manager.save(Account, person('hidden'));
      await letOthersWork();
      seen = await names();
    });
    expect(seen).toEqual([]);
    expect(await names()).toEqual(['hidden']);
  });

  it('wait for each other also where the first breaks a rule of the database', async () => {
    await store.write((manager) => manager.insert<object>(Account, person('twice')));
    const again = store.write((manager) => manager.insert<object>(Account, person('twice')));
    const other = store.write((manager) => manager.insert<object>(Account, person('other')));
    await expect(again).rejects.toThrow(/UNIQUE/);
    await other;
    expect(await names()).toEqual(['twice', 'other']);
  });
});

describe('the connection for reading', () => {
  it('writes nothing', async () => {
    await expect(store.reader.insert<object>(Account, person('smuggled'))).rejects.toThrow(/readonly/);
    expect(await names()).toEqual([]);
  });
});
