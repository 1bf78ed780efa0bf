import { createServer } from 'node:http';
import type { Server } from 'node:http';
import { fileURLToPath } from 'node:url';
import { pino } from 'pino';
import type { Logger } from 'pino';
import { createApp } from './app';
import type { Config } from './config';
import { addressOf, ConfigError, isLoopback, readConfig } from './config';
import { listLogins, makeDemoAccounts } from './demo/demo-accounts';
import { decodeDemo, registerDemo } from './demo/demo-workspace';
import type { Services } from './services/services';
import { openServices } from './services/services';
import { holdDataFolder, prepareDataFolder, readTokenKey } from './storage/data-folder';

/** Two folders below the root both as source and in the bundle. */
const CLIENT = fileURLToPath(new URL('../../dist/client/', import.meta.url));
/** What is under way may end by itself for so long. */
const GRACE_MS = 10_000;

function say(text: string): void {
  process.stdout.write(`${text}\n`);
}

async function start(): Promise<void> {
  const config = readConfig(process.env);
  const logger = pino({ level: config.logLevel });
  prepareDataFolder(config.dataDir);
  await holdDataFolder(config.dataDir);
  const services = await openServices({ config, tokenKey: readTokenKey(config.dataDir), logger });
  const app = createApp({ config, services, logger, clientDir: CLIENT });
  const server = createServer(app);
  // Uploads may take hours; what stands still is ended by the routes themselves.
  server.requestTimeout = 0;
  server.headersTimeout = 60_000;
  server.keepAliveTimeout = 65_000;
  stopOnSignal(server, services, logger);
  await listen(server, config);
  say(`Linewitness listens on ${addressOf(config.host, portOf(server))}`);
  if (config.publicUrl.startsWith('http:') && !isLoopback(new URL(config.publicUrl).hostname)) {
    say(
      'Warning: PUBLIC_URL is plain http and not this machine. Browsers hold back features there; use https.',
    );
  }
  if ((await services.accounts.count()) === 0) await begin(config, services, logger);
}

/** The first start: the demo, or the link that makes the first admin. */
async function begin(config: Config, services: Services, logger: Logger): Promise<void> {
  if (config.isProduction) {
    const link = await services.passwords.makeFirstAdminLink();
    if (link !== null) say(`Make the first admin here, once, until ${link.expiresAt}:\n  ${link.url}`);
    return;
  }
  const { logins, people, file } = await makeDemoAccounts(services, config.dataDir, config.demoPassword);
  say(`Demo accounts (also in ${file}):`);
  for (const line of listLogins(logins)) say(`  ${line}`);
  try {
    await decodeDemo(services, await registerDemo(services, people));
  } catch (error) {
    // Without samples there is still a workspace to sign in to.
    logger.error({ err: error }, 'the demo captures could not be made');
  }
}

/** @throws ConfigError that names the setting to change */
async function listen(server: Server, { host, port }: Config): Promise<void> {
  await new Promise<void>((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      if (error.code === 'EADDRINUSE') reject(new ConfigError(`PORT ${port} is in use`));
      else if (error.code === 'EACCES') reject(new ConfigError(`PORT ${port} may not be used by this user`));
      else if (error.code === 'EADDRNOTAVAIL' || error.code === 'ENOTFOUND') {
        reject(new ConfigError(`HOST ${host} is no address of this machine`));
      } else reject(error);
    });
    server.listen(port, host, resolve);
  });
}

function portOf(server: Server): number {
  const address = server.address();
  return typeof address === 'object' && address !== null ? address.port : 0;
}

/** Lets answers under way end, gives running jobs back to the queue, closes the store. A second signal ends at once. */
function stopOnSignal(server: Server, services: Services, logger: Logger): void {
  let isStopping = false;
  const stop = async (): Promise<void> => {
    if (isStopping) process.exit(1);
    isStopping = true;
    const closed = new Promise((resolve) => server.close(resolve));
    services.events.endAllStreams();
    server.closeIdleConnections();
    const forced = setTimeout(() => server.closeAllConnections(), GRACE_MS);
    await closed;
    clearTimeout(forced);
    await services.stop();
    process.exit(0);
  };
  for (const signal of ['SIGINT', 'SIGTERM'] as const) {
    process.on(signal, () => {
      stop().catch((error: unknown) => {
        logger.error({ err: error }, 'the server did not stop cleanly');
        process.exit(1);
      });
    });
  }
}

start().catch((error: unknown) => {
  const isExpected = error instanceof ConfigError;
  process.stderr.write(`${isExpected ? error.message : String((error as Error).stack ?? error)}\n`);
  process.exit(1);
});
