import { createHash, randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, realpathSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import type { Server } from 'node:net';
import { join } from 'node:path';
import { ConfigError } from '../config';

/** Makes the data folder, for its owner's eyes only. @throws ConfigError where that cannot be done */
export function prepareDataFolder(dataDir: string): void {
  try {
    mkdirSync(join(dataDir, 'secrets'), { recursive: true, mode: 0o700 });
    chmodSync(dataDir, 0o700);
  } catch (error) {
    throw new ConfigError(`DATA_DIR cannot be used: ${(error as Error).message}`);
  }
}

/** The key that signs access tokens; made on the first start. */
export function readTokenKey(dataDir: string): string {
  const file = join(dataDir, 'secrets', 'token-key');
  if (!existsSync(file))
    writeFileSync(file, randomBytes(48).toString('base64url'), { mode: 0o600, flag: 'wx' });
  return readFileSync(file, 'utf8');
}

/**
 * Holds the data folder for one server: two writers would spoil it. The lock is an abstract socket of the kernel's, which ends with
 * the process however that ends. Source: unix(7), Linux man-pages. Elsewhere than on Linux nothing is held.
 * @throws ConfigError where another server holds it
 */
export async function holdDataFolder(dataDir: string): Promise<Server | null> {
  if (process.platform !== 'linux') return null;
  const name = createHash('sha256').update(realpathSync(dataDir)).digest('hex').slice(0, 32);
  const lock = createServer((socket) => socket.destroy());
  await new Promise<void>((resolve, reject) => {
    lock.once('error', () => reject(new ConfigError(`DATA_DIR is in use by another server: ${dataDir}`)));
    lock.listen(`\0linewitness-${name}`, resolve);
  });
  lock.unref();
  return lock;
}
