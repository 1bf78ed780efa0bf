import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';

const USUAL = '/usr/bin/chromium';

/** The browser to test with; as root it is installed from Debian's packages where it is missing. */
export function findChromium() {
  const named = process.env.CHROMIUM;
  if (named !== undefined && existsSync(named)) return { path: named };
  if (existsSync(USUAL)) return { path: USUAL };
  if (process.getuid?.() === 0 && existsSync('/usr/bin/apt-get')) {
    const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
    spawnSync('apt-get', ['update', '-qq'], { stdio: 'ignore', env });
    spawnSync('apt-get', ['install', '-y', '-qq', '--no-install-recommends', 'chromium'], {
      stdio: 'ignore',
      env,
    });
    if (existsSync(USUAL)) return { path: USUAL };
  }
  return {
    problem:
      'The browser tests need Chromium: as root, apt-get install chromium; or set CHROMIUM to its path.',
  };
}
