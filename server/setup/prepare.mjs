/**
 * Makes the checkout ready before `npm start` and `npm test`: checks the Node version, installs the packages if the lock file or
 * the Node version changed, and builds if the sources changed. Imports nothing but Node itself, since nothing may be installed.
 * `--install-only`: do not build. `--quiet`: say nothing unless something is wrong.
 */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const INSTALL_STAMP = join(ROOT, 'node_modules', '.linewitness-installed');
const BUILD_STAMP = join(ROOT, 'dist', '.linewitness-built');
const SOURCES = ['src', 'server', 'shared'];
const BUILD_FILES = ['package-lock.json', 'angular.json', 'tsconfig.json'];

const isQuiet = process.argv.includes('--quiet');
const isInstallOnly = process.argv.includes('--install-only');

/** Standard output may belong to a command that follows: everything said goes to standard error. */
function say(text) {
  if (!isQuiet) process.stderr.write(`${text}\n`);
}

function fail(text) {
  process.stderr.write(`${text}\n`);
  process.exit(1);
}

function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major !== 20 || minor < 19)
    fail(`Linewitness needs Node 20.19 or a later 20, not ${process.versions.node}.`);
}

function hashOf(files) {
  const hash = createHash('sha256');
  for (const file of files)
    hash
      .update(file)
      .update('\0')
      .update(readFileSync(join(ROOT, file)))
      .update('\0');
  return hash.update(process.versions.modules).digest('hex');
}

function filesBelow(folder) {
  return readdirSync(join(ROOT, folder), { withFileTypes: true, recursive: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath ?? entry.path, entry.name).slice(ROOT.length))
    .sort();
}

function isCurrent(stamp, hash) {
  return existsSync(stamp) && readFileSync(stamp, 'utf8') === hash;
}

/** The SQLite driver is compiled on the machine and needs Node's headers, which must not be downloaded. */
function installEnvironment() {
  const env = { ...process.env };
  const prefix = dirname(dirname(process.execPath));
  if (env.npm_config_nodedir === undefined && existsSync(join(prefix, 'include', 'node', 'node.h'))) {
    env.npm_config_nodedir = prefix;
  }
  // What the outer npm was told about one script must not steer the inner one.
  for (const name of Object.keys(env)) if (/^npm_(lifecycle|package)_/.test(name)) delete env[name];
  return env;
}

function install() {
  const hash = hashOf(['package.json', 'package-lock.json']);
  if (isCurrent(INSTALL_STAMP, hash)) return;
  say('Installing packages (about two minutes, once) …');
  const result = spawnSync('npm', ['ci', '--include=dev', '--no-audit', '--no-fund'], {
    cwd: ROOT,
    env: installEnvironment(),
    stdio: ['ignore', 'pipe', 'pipe'],
    encoding: 'utf8',
    maxBuffer: 1 << 28,
  });
  if (result.status !== 0) {
    process.stderr.write(`${result.stdout}\n${result.stderr}\n`);
    fail('The packages could not be installed. Node with its headers, python3, make and g++ are needed.');
  }
  writeFileSync(INSTALL_STAMP, hash);
}

function build() {
  const hash = hashOf([
    ...BUILD_FILES.filter((file) => existsSync(join(ROOT, file))),
    ...SOURCES.filter((folder) => existsSync(join(ROOT, folder))).flatMap(filesBelow),
  ]);
  if (isCurrent(BUILD_STAMP, hash)) return;
  say('Building …');
  const result = spawnSync(process.execPath, [join(ROOT, 'server/setup/build.mjs')], {
    cwd: ROOT,
    stdio: 'inherit',
  });
  if (result.status !== 0) fail('The build failed.');
  mkdirSync(dirname(BUILD_STAMP), { recursive: true });
  writeFileSync(BUILD_STAMP, hash);
}

checkNode();
install();
if (!isInstallOnly) build();
