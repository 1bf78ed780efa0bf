import type { ChildProcess } from 'node:child_process';
import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { rmSync } from 'node:fs';
import { join } from 'node:path';
import supertest from 'supertest';
import type { Test } from 'supertest';
import { bundleServer } from '../../server/setup/bundle-server.mjs';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
/** A bundle of what the sources are now: what lies in `dist` may be older. */
const BUNDLE = `test-results/server-${process.pid}`;
const bundled = bundleServer(BUNDLE);

/** What a process ended with: its exit code, or the signal that ended it. */
export interface Ending {
  readonly code: number | null;
  readonly signal: NodeJS.Signals | null;
}

/** The server as `npm start` runs it, in a process of its own. */
export class ServerProcess {
  private static readonly all = new Set<ServerProcess>();

  out = '';
  err = '';
  readonly ended: Promise<Ending>;
  private readonly child: ChildProcess;

  private constructor(settings: Readonly<Record<string, string>>) {
    this.child = spawn(process.execPath, [join(BUNDLE, 'main.js')], {
      cwd: ROOT,
      stdio: ['ignore', 'pipe', 'pipe'],
      env: {
        PATH: process.env['PATH'],
        NODE_ENV: 'production',
        PORT: '0',
        LOG_LEVEL: 'silent',
        ...settings,
      },
    });
    this.child.stdout!.on('data', (chunk: Buffer) => (this.out += chunk.toString()));
    this.child.stderr!.on('data', (chunk: Buffer) => (this.err += chunk.toString()));
    this.ended = new Promise((resolve) => {
      this.child.once('close', (code, signal) => {
        ServerProcess.all.delete(this);
        resolve({ code, signal });
      });
    });
    ServerProcess.all.add(this);
  }

  /** With the settings of the test only, so that nothing around it leaks in. */
  static async spawn(settings: Readonly<Record<string, string>>): Promise<ServerProcess> {
    await bundled;
    return new ServerProcess(settings);
  }

  /** Resolves once the server listens. */
  static async start(settings: Readonly<Record<string, string>>): Promise<ServerProcess> {
    const server = await ServerProcess.spawn(settings);
    await server.says(/listens on (\S+)\n/);
    return server;
  }

  /** Ends what a failed test left behind, and removes the bundle. */
  static async endAll(): Promise<void> {
    await Promise.all([...this.all].map((server) => server.kill()));
    rmSync(join(ROOT, BUNDLE), { recursive: true, force: true });
  }

  get url(): string {
    return /listens on (\S+)\n/.exec(this.out)![1];
  }

  /** The text once it stands in the output. Rejects where the process ends without it. */
  async says(pattern: RegExp): Promise<RegExpExecArray> {
    const found = new Promise<RegExpExecArray>((resolve) => {
      const look = (): void => {
        const match = pattern.exec(this.out);
        if (match === null) return;
        this.child.stdout!.off('data', look);
        resolve(match);
      };
      this.child.stdout!.on('data', look);
      look();
    });
    const ended = this.ended.then(({ code }) => {
      throw new Error(`the server ended with ${code} and never said ${String(pattern)}: ${this.err}`);
    });
    return Promise.race([found, ended]);
  }

  /** As a power cut ends it: without a word to the process. */
  async kill(): Promise<Ending> {
    this.child.kill('SIGKILL');
    return this.ended;
  }

  async terminate(): Promise<Ending> {
    this.child.kill('SIGTERM');
    return this.ended;
  }

  ask(token: string | undefined, method: 'get' | 'post' | 'patch' | 'delete', path: string): Test {
    const test = supertest(this.url)[method](`/api${path}`);
    return token === undefined ? test : test.auth(token, { type: 'bearer' });
  }

  /** Makes the first admin with the link the first start prints, and signs in; answers with an access token. */
  async firstAdmin(): Promise<string> {
    const [, token] = await this.says(/set-password#(\S+)\n/);
    const password = 'a password for tests';
    const email = 'rosa@norrhavn.example';
    const reset = { token, password, name: 'Rosa Teixeira', email };
    await this.ask(undefined, 'post', '/password-reset').send(reset).expect(204);
    const session = await this.ask(undefined, 'post', '/session').send({ email, password }).expect(200);
    return (session.body as { accessToken: string }).accessToken;
  }
}
