import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { pino } from 'pino';
import supertest from 'supertest';
import type { Response, Test } from 'supertest';
import { expect } from 'vitest';
import type { Role } from '#shared/contract/http/accounts';
import type { JobView } from '#shared/contract/http/jobs';
import type { Problem } from '#shared/contract/http/problem';
import { problemSchema } from '#shared/contract/http/problem';
import { createApp } from '../../server/app';
import type { Config } from '../../server/config';
import { readConfig } from '../../server/config';
import type { Account } from '../../server/entities/account';
import type { RateLimits } from '../../server/middleware/rate-limits';
import type { Services } from '../../server/services/services';
import { openServices } from '../../server/services/services';

const SAMPLES = fileURLToPath(new URL('../../samples/', import.meta.url));

/** The lowest cost bcrypt takes: what is tested is who gets in, not how long that takes. */
const PASSWORD_COST = 4;
const NO_LIMITS: RateLimits = { guesses: 1e6, previews: 1e6, others: 1e6 };

export interface Person {
  readonly account: Account;
  readonly password: string;
  /** Access token. */
  readonly token: string;
  /** `lw_refresh=…`, as the browser would send it. */
  readonly cookie: string;
}

/** What the tests look at of an answer. */
export type Answer = Pick<Response, 'status' | 'type' | 'text' | 'headers'> & { readonly body: unknown };

export interface WorkspaceOptions {
  readonly config?: Partial<Config>;
  readonly rateLimits?: RateLimits;
}

type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

/** A server of its own on an empty data folder, in this process. */
export class Workspace {
  private people = 0;

  private constructor(
    readonly url: string,
    readonly dataDir: string,
    readonly services: Services,
    private readonly end: () => Promise<void>,
  ) {}

  static async open({ config: settings, rateLimits = NO_LIMITS }: WorkspaceOptions = {}): Promise<Workspace> {
    const dataDir = await mkdtemp(join(tmpdir(), 'linewitness-api-'));
    const config: Config = {
      ...readConfig({ DATA_DIR: dataDir, LOG_LEVEL: 'silent' }),
      passwordCost: PASSWORD_COST,
      ...settings,
    };
    const logger = pino({ level: 'silent' });
    const services = await openServices({ config, tokenKey: 'a key for these tests', logger, threads: 1 });
    const app = createApp({
      config,
      services,
      logger,
      clientDir: join(dataDir, 'no-client'),
      rateLimits,
      isChecking: true,
    });
    const server = createServer(app);
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
    const { port } = server.address() as AddressInfo;
    return new Workspace(`http://127.0.0.1:${port}`, dataDir, services, async () => {
      services.events.endAllStreams();
      server.closeAllConnections();
      await new Promise((resolve) => server.close(resolve));
      await services.stop();
      await rm(dataDir, { recursive: true });
    });
  }

  async close(): Promise<void> {
    await this.end();
  }

  /** Somebody new, signed in. */
  async person(role: Role): Promise<Person> {
    const n = ++this.people;
    const password = `a long password ${n}`;
    const name = `${role} ${n}`;
    const email = `${role}${n}@norrhavn.example`;
    const account = await this.services.accounts.createWithPassword({ email, name, role, password });
    const { session, refreshToken } = await this.services.sessions.open(account);
    return { account, password, token: session.accessToken, cookie: `lw_refresh=${refreshToken}` };
  }

  /** Asks below `/api`, as somebody or as nobody. */
  ask(who: Pick<Person, 'token'> | undefined, method: Method, path: string): Test {
    const test = supertest(this.url)[method](`/api${path}`);
    return who === undefined ? test : test.auth(who.token, { type: 'bearer' });
  }

  /** Uploads a sample; answers with its number. */
  async upload(who: Pick<Person, 'token'>, sample: string, about: unknown = {}): Promise<string> {
    const answer = await this.ask(who, 'post', '/captures')
      .field('about', JSON.stringify(about))
      .attach('file', SAMPLES + sample);
    expect(answer.status, answer.text).toBe(201);
    return (answer.body as { number: string }).number;
  }

  /** Asks for a decode with everything left to be found, and waits for it. */
  async decode(who: Pick<Person, 'token'>, number: string, request: object = { map: {} }): Promise<JobView> {
    const answer = await this.ask(who, 'post', `/captures/${number}/decodes`).send(request);
    expect(answer.status, answer.text).toBe(202);
    return this.finished(who, (answer.body as JobView).id);
  }

  /** The job once nothing is queued or running any more. */
  async finished(who: Pick<Person, 'token'>, jobId: number): Promise<JobView> {
    await this.services.runner.whenIdle();
    return (await this.ask(who, 'get', `/jobs/${jobId}`)).body as JobView;
  }
}

export function sample(name: string): Promise<Buffer> {
  return readFile(SAMPLES + name);
}

/** That an answer is a refusal in the form of RFC 9457, section 3; gives back the problem. */
export function expectProblem(answer: Answer, status: number, code?: string): Problem {
  expect({ status: answer.status, type: answer.type }, answer.text).toEqual({
    status,
    type: 'application/problem+json',
  });
  const problem = problemSchema.parse(JSON.parse(answer.text));
  expect(problem.status).toBe(status);
  expect(problem.type).toBe(`urn:linewitness:problem:${problem.code}`);
  expect(problem.requestId).toBe((answer.headers as Record<string, unknown>)['x-request-id']);
  expect(problem.detail).toMatch(/^[A-Z]/);
  if (code !== undefined) expect(problem.code).toBe(code);
  return problem;
}

/** The refresh cookie an answer sets, as the browser would send it back; `''` where it clears it, undefined where it sets none. */
export function cookieOf(answer: Answer): string | undefined {
  const lines = ((answer.headers as Record<string, unknown>)['set-cookie'] ?? []) as string[];
  const pair = lines.find((line) => line.startsWith('lw_refresh='))?.split(';')[0];
  return pair === 'lw_refresh=' ? '' : pair;
}
