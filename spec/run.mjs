/**
 * `npm test`: types, lint, format, build and every suite, then one line `N passed, N failed`. Each of types, lint, format and
 * build counts as one. A suite that ends badly without naming a failed test counts as one failure: nothing is skipped silently.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { findChromium } from './find-chromium.mjs';

const ROOT = fileURLToPath(new URL('../', import.meta.url));
const RESULTS = join(ROOT, 'test-results');
const bin = (name) => join(ROOT, 'node_modules', '.bin', name);

const total = { passed: 0, failed: 0, skipped: 0 };

function run(command, args, env = {}) {
  return spawnSync(command, args, {
    cwd: ROOT,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, NG_CLI_ANALYTICS: 'false', ...env },
  }).status;
}

function step(name, command, args) {
  process.stdout.write(`\n── ${name}\n`);
  const isGood = run(command, args) === 0;
  total[isGood ? 'passed' : 'failed'] += 1;
  if (!isGood) process.stdout.write(`${name} failed\n`);
}

function suite(name, command, args, report, count, env) {
  process.stdout.write(`\n── ${name}\n`);
  rmSync(report, { force: true });
  const status = run(command, args, env);
  const counted = existsSync(report)
    ? count(JSON.parse(readFileSync(report, 'utf8')))
    : { passed: 0, failed: 0, skipped: 0 };
  if (status !== 0 && counted.failed === 0) counted.failed = 1;
  if (status === 0 && counted.passed === 0) counted.failed += 1;
  for (const key of Object.keys(total)) total[key] += counted[key];
}

const countVitest = (json) => ({
  passed: json.numPassedTests,
  failed: json.numFailedTests,
  skipped: json.numPendingTests + json.numTodoTests,
});
const countPlaywright = ({ stats }) => ({
  passed: stats.expected + stats.flaky,
  failed: stats.unexpected,
  skipped: stats.skipped,
});

mkdirSync(RESULTS, { recursive: true });
step('types of shared', bin('tsc'), ['-p', 'shared']);
step('types of server', bin('tsc'), ['-p', 'server']);
step('types of spec', bin('tsc'), ['-p', 'spec']);
step('lint', bin('eslint'), ['.']);
step('format', bin('prettier'), ['--check', '--log-level', 'warn', '.']);
step('build', process.execPath, ['server/setup/prepare.mjs']);
const hasClient = existsSync(join(ROOT, 'angular.json'));
const nodeReport = join(RESULTS, 'node.json');
suite(
  'library, server, specs',
  bin('vitest'),
  ['run', '--reporter=default', '--reporter=json', `--outputFile.json=${nodeReport}`],
  nodeReport,
  countVitest,
);
if (hasClient) {
  const clientReport = join(RESULTS, 'client.json');
  suite('client', bin('ng'), ['test', '--watch=false'], clientReport, countVitest);
  const chromium = findChromium();
  if (chromium.path === undefined) {
    process.stdout.write(`\n── browser\n${chromium.problem}\n`);
    total.failed += 1;
  } else {
    const browserReport = join(RESULTS, 'browser.json');
    suite('browser', bin('playwright'), ['test'], browserReport, countPlaywright, {
      CHROMIUM: chromium.path,
    });
  }
}

const skipped = total.skipped > 0 ? `, ${total.skipped} skipped` : '';
process.stdout.write(`\n${total.passed} passed, ${total.failed} failed${skipped}\n`);
process.exitCode = total.failed === 0 ? 0 : 1;
