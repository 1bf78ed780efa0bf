import 'reflect-metadata';
import { copyFileSync, existsSync, rmSync, statSync } from 'node:fs';
import { Mutex } from 'async-mutex';
import type { EntityManager, MigrationInterface } from 'typeorm';
import { DataSource } from 'typeorm';
import { ALL_ENTITIES } from './entities/all-entities';
import { ALL_MIGRATIONS } from './migrations/all-migrations';

type Migrations = readonly (new () => MigrationInterface)[];

/**
 * The store: one writer, one reader. The driver has a single query runner, so overlapping transactions would mix: every write
 * goes through `write`, one after another; reads use a connection that sees committed rows only.
 */
export class Store {
  private readonly mutex = new Mutex();

  private constructor(
    private readonly writer: DataSource,
    private readonly readerSource: DataSource,
  ) {}

  /** Opens the database file and migrates it: wholly, or not at all. */
  static async open(file: string, migrations: Migrations = ALL_MIGRATIONS): Promise<Store> {
    await migrate(file, migrations);
    const writer = await makeSource(file, migrations).initialize();
    const readerSource = await new DataSource({
      type: 'better-sqlite3',
      database: file,
      entities: ALL_ENTITIES,
      readonly: true,
      enableWAL: false,
      migrations: [],
    }).initialize();
    return new Store(writer, readerSource);
  }

  /** For reading only: writing through it fails. */
  get reader(): EntityManager {
    return this.readerSource.manager;
  }

  /** Runs `fn` in a transaction of its own, after all writes asked for before. Do not wait for files or the network inside. */
  async write<T>(fn: (manager: EntityManager) => Promise<T>): Promise<T> {
    return this.mutex.runExclusive(() => this.writer.transaction(fn));
  }

  /** Waits for the writes asked for, then closes. */
  async close(): Promise<void> {
    await this.mutex.runExclusive(async () => {
      await this.readerSource.destroy();
      await this.writer.destroy();
    });
  }
}

/** The writing connection. */
export function makeSource(file: string, migrations: Migrations = ALL_MIGRATIONS): DataSource {
  return new DataSource({
    type: 'better-sqlite3',
    database: file,
    entities: ALL_ENTITIES,
    migrations: [...migrations],
    migrationsTransactionMode: 'all',
    enableWAL: true,
    timeout: 5000,
    prepareDatabase: (db: { pragma(text: string): unknown }) => {
      db.pragma('synchronous = FULL');
    },
  });
}

/** Migrates on a connection of its own. A copy is made before and put back should anything fail. */
async function migrate(file: string, migrations: Migrations): Promise<void> {
  const copy = existsSync(file) && statSync(file).size > 0 ? `${file}.before-migration` : null;
  const source = await makeSource(file, migrations).initialize();
  try {
    if (!(await source.showMigrations())) return;
    await source.query('PRAGMA wal_checkpoint(TRUNCATE)');
    if (copy !== null) copyFileSync(file, copy);
    await source.runMigrations();
    await refuseBrokenReferences(source);
  } catch (error) {
    await source.destroy();
    for (const suffix of ['-wal', '-shm']) rmSync(file + suffix, { force: true });
    if (copy === null) rmSync(file, { force: true });
    else if (existsSync(copy)) copyFileSync(copy, file);
    throw error;
  } finally {
    if (source.isInitialized) await source.destroy();
  }
}

async function refuseBrokenReferences(source: DataSource): Promise<void> {
  const broken = (await source.query('PRAGMA foreign_key_check')) as unknown[];
  if (broken.length > 0) throw new Error(`the migration left ${broken.length} broken references`);
  const [{ foreign_keys: isOn }] = (await source.query('PRAGMA foreign_keys')) as { foreign_keys: number }[];
  if (isOn !== 1) throw new Error('the migration left the checking of references switched off');
}
