import { copyFileSync, existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { MigrationInterface, QueryRunner } from 'typeorm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { makeSource, Store } from '../../server/data-source';
import { Account } from '../../server/entities/account';
import { ALL_MIGRATIONS } from '../../server/migrations/all-migrations';
import { newAccount } from '../../server/services/account-service';

let folder: string;
let file: string;

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'linewitness-schema-'));
  file = join(folder, 'linewitness.sqlite');
});
afterEach(() => rmSync(folder, { recursive: true }));

class AddColumn2000000000000 implements MigrationInterface {
  async up(runner: QueryRunner): Promise<void> {
    await runner.query('ALTER TABLE "account" ADD COLUMN "shoeSize" integer');
  }
  async down(): Promise<void> {
    throw new Error('going back is restoring the copy');
  }
}

class Fail2000000000001 implements MigrationInterface {
  async up(runner: QueryRunner): Promise<void> {
    await runner.query('DELETE FROM "account"');
    throw new Error('on purpose');
  }
  async down(): Promise<void> {
    throw new Error('going back is restoring the copy');
  }
}

class BreakReferences2000000000002 implements MigrationInterface {
  async up(runner: QueryRunner): Promise<void> {
    await runner.query(
      `INSERT INTO "refresh_token" ("hash", "chain", "accountId", "expiresAt") VALUES ('h', 'c', 999, 0)`,
    );
  }
  async down(): Promise<void> {
    throw new Error('going back is restoring the copy');
  }
}

async function withOneAccount(): Promise<void> {
  const store = await Store.open(file);
  const person = newAccount({ email: 'ines@norrhavn.example', name: 'Ines Carvalho', role: 'qa' });
  await store.write((manager) => manager.save(Account, person));
  await store.close();
}

async function columns(): Promise<string[]> {
  const source = await makeSource(file).initialize();
  const rows = await source.query<{ name: string }[]>('PRAGMA table_info("account")');
  await source.destroy();
  return rows.map(({ name }) => name);
}

describe('the schema', () => {
  it('is after all migrations what the entities say', async () => {
    await (await Store.open(file)).close();
    const source = await makeSource(file).initialize();
    const { upQueries } = await source.driver.createSchemaBuilder().log();
    const pending = await source.showMigrations();
    await source.destroy();
    expect(upQueries.map(({ query }) => query)).toEqual([]);
    expect(pending).toBe(false);
  });

  it('is written ahead, flushed and with references checked', async () => {
    await (await Store.open(file)).close();
    const source = await makeSource(file).initialize();
    const ask = async (name: string) =>
      Object.values((await source.query<Record<string, unknown>[]>(`PRAGMA ${name}`))[0])[0];
    const settings = [await ask('journal_mode'), await ask('synchronous'), await ask('foreign_keys')];
    await source.destroy();
    // Source: SQLite, pragma documentation, from memory: 2 is FULL.
    expect(settings).toEqual(['wal', 2, 1]);
  });
});

describe('migrating', () => {
  it('keeps a copy of what was before', async () => {
    await withOneAccount();
    const store = await Store.open(file, [...ALL_MIGRATIONS, AddColumn2000000000000]);
    expect(await store.reader.count(Account)).toBe(1);
    await store.close();
    expect(await columns()).toContain('shoeSize');
    copyFileSync(`${file}.before-migration`, file);
    for (const suffix of ['-wal', '-shm']) rmSync(file + suffix, { force: true });
    const before = await Store.open(file);
    expect(await before.reader.count(Account)).toBe(1);
    await before.close();
    expect(await columns()).not.toContain('shoeSize');
  });

  it.each([
    ['fails', Fail2000000000001, 'on purpose'],
    ['leaves references to nothing', BreakReferences2000000000002, 'broken references'],
  ])('that %s leaves everything as it was, the steps before it too', async (_, failing, message) => {
    await withOneAccount();
    const migrations = [...ALL_MIGRATIONS, AddColumn2000000000000, failing];
    await expect(Store.open(file, migrations)).rejects.toThrow(message);
    expect(await columns()).not.toContain('shoeSize');
    const store = await Store.open(file);
    expect(await store.reader.count(Account)).toBe(1);
    await store.close();
  });

  it('that fails on a new file leaves none', async () => {
    await expect(Store.open(file, [...ALL_MIGRATIONS, Fail2000000000001])).rejects.toThrow('on purpose');
    expect(existsSync(file)).toBe(false);
    await (await Store.open(file)).close();
  });

  it('does nothing to a file that is up to date', async () => {
    await withOneAccount();
    await (await Store.open(file)).close();
    expect(existsSync(`${file}.before-migration`)).toBe(false);
  });
});
