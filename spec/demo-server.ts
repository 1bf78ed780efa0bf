import { spawn } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const PASSWORD = 'a password for the demo';

export interface DemoServer {
  readonly url: string;
  readonly password: string;
  stop(): void;
}

/** Starts the built server with a demo workspace of its own, on loopback. */
export async function startDemoServer(port: number): Promise<DemoServer> {
  const folder = mkdtempSync(join(tmpdir(), 'linewitness-'));
  const server = spawn(process.execPath, ['--enable-source-maps', 'dist/server/main.js'], {
    env: { ...process.env, DATA_DIR: folder, DEMO_PASSWORD: PASSWORD, PORT: String(port), LOG_LEVEL: 'warn' },
    stdio: ['ignore', 'ignore', 'inherit'],
  });
  const url = `http://127.0.0.1:${port}`;
  const stop = (): void => {
    server.kill('SIGTERM');
    rmSync(folder, { recursive: true, force: true });
  };
  for (let tries = 0; tries < 240; tries++) {
    if (server.exitCode !== null) break;
    try {
      if ((await fetch(`${url}/healthz`)).ok) return { url, password: PASSWORD, stop };
    } catch {
      // It does not listen yet.
    }
    await new Promise((resolve) => setTimeout(resolve, 500));
  }
  stop();
  throw new Error('the server did not start');
}
