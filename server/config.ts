import { resolve } from 'node:path';

/** How the server runs, from the environment. */
export interface Config {
  /** Everything the server keeps: database, files, secrets. */
  readonly dataDir: string;
  readonly host: string;
  readonly port: number;
  /** Address people use, without a slash at the end. */
  readonly publicUrl: string;
  /** Proxies before the server whose `X-Forwarded-For` is believed. */
  readonly trustProxy: number;
  readonly isProduction: boolean;
  /** One password for all demo accounts, instead of random ones. */
  readonly demoPassword: string | undefined;
  readonly workspaceName: string;
  /** Largest upload, bytes. */
  readonly uploadLimitBytes: number;
  readonly logLevel: LogLevel;
  /** Cost of bcrypt: 2^cost rounds. */
  readonly passwordCost: number;
}

const LOG_LEVELS = ['debug', 'info', 'warn', 'error', 'silent'] as const;
type LogLevel = (typeof LOG_LEVELS)[number];
type Environment = Readonly<Record<string, string | undefined>>;

/** A setting that cannot be used; the message names it. */
export class ConfigError extends Error {
  override readonly name = 'ConfigError';
}

const DEFAULT_PORT = 4780;
const DEFAULT_UPLOAD_LIMIT = 2 * 1024 ** 3;
const PASSWORD_COST = 12;

/**
 * Reads `DATA_DIR`, `HOST`, `PORT`, `PUBLIC_URL`, `TRUST_PROXY`, `NODE_ENV`, `DEMO_PASSWORD`, `WORKSPACE_NAME`,
 * `UPLOAD_LIMIT_BYTES` and `LOG_LEVEL`. An empty setting counts as not set.
 * @throws ConfigError in one line that names the setting
 */
export function readConfig(env: Environment): Config {
  const host = setting(env, 'HOST') ?? '127.0.0.1';
  const port = wholeNumber(env, 'PORT', DEFAULT_PORT, 0, 65_535);
  const isProduction = isProductionOf(env);
  return {
    dataDir: resolve(setting(env, 'DATA_DIR') ?? 'data'),
    host: checkedHost(host),
    port,
    publicUrl: publicUrlOf(setting(env, 'PUBLIC_URL'), host, port),
    trustProxy: wholeNumber(env, 'TRUST_PROXY', 0, 0, 10),
    isProduction,
    demoPassword: demoPasswordOf(env),
    workspaceName: setting(env, 'WORKSPACE_NAME') ?? 'Serial bench',
    uploadLimitBytes: wholeNumber(
      env,
      'UPLOAD_LIMIT_BYTES',
      DEFAULT_UPLOAD_LIMIT,
      1,
      Number.MAX_SAFE_INTEGER,
    ),
    logLevel: logLevelOf(env, isProduction),
    passwordCost: PASSWORD_COST,
  };
}

function setting(env: Environment, name: string): string | undefined {
  const text = env[name]?.trim();
  return text === '' ? undefined : text;
}

function isProductionOf(env: Environment): boolean {
  const text = setting(env, 'NODE_ENV') ?? 'development';
  if (!['development', 'production', 'test'].includes(text)) {
    throw new ConfigError(`NODE_ENV takes development, production or test, not "${text}"`);
  }
  return text === 'production';
}

function wholeNumber(env: Environment, name: string, fallback: number, least: number, most: number): number {
  const text = setting(env, name);
  if (text === undefined) return fallback;
  const value = /^\d{1,16}$/.test(text) ? Number(text) : NaN;
  if (!Number.isInteger(value) || value < least || value > most) {
    throw new ConfigError(`${name} takes a whole number from ${least} to ${most}, not "${text}"`);
  }
  return value;
}

function checkedHost(host: string): string {
  if (!/^[\w.:%-]+$/.test(host)) throw new ConfigError(`HOST takes a host name or an address, not "${host}"`);
  return host;
}

function demoPasswordOf(env: Environment): string | undefined {
  const text = setting(env, 'DEMO_PASSWORD');
  if (text === undefined) return undefined;
  const bytes = Buffer.byteLength(text);
  if (text.length < 12 || bytes > 72)
    throw new ConfigError('DEMO_PASSWORD takes 12 characters or more and 72 bytes at most');
  return text;
}

function logLevelOf(env: Environment, isProduction: boolean): LogLevel {
  const text = setting(env, 'LOG_LEVEL') ?? (isProduction ? 'info' : 'warn');
  const level = LOG_LEVELS.find((one) => one === text);
  if (level === undefined) throw new ConfigError(`LOG_LEVEL takes ${LOG_LEVELS.join(', ')}, not "${text}"`);
  return level;
}

function publicUrlOf(text: string | undefined, host: string, port: number): string {
  if (text === undefined) return addressOf(host, port);
  const url = URL.parse(text);
  if (url === null) throw new ConfigError(`PUBLIC_URL is no address: "${text}"`);
  if (!/^https?:$/.test(url.protocol))
    throw new ConfigError(`PUBLIC_URL takes http or https, not "${url.protocol}"`);
  if (url.pathname !== '/' || url.search !== '' || url.hash !== '' || url.username !== '') {
    // Not the text itself: it may hold a password.
    throw new ConfigError(`PUBLIC_URL takes no path, query or user name, only the origin: "${url.origin}"`);
  }
  return url.origin;
}

/** `http://127.0.0.1:4780`. */
export function addressOf(host: string, port: number): string {
  return `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
}

/** Whether browsers treat the address as safe although it is plain http. */
export function isLoopback(host: string): boolean {
  return host === 'localhost' || host === '::1' || /^127\./.test(host);
}
