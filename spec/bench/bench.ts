import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { MemoryReport, SpeedReport } from './bench-child';
import { writeBusyVcd, writeLongVcd, writeSampledCsv } from './bench-files';

/**
 * Speed and memory of reading and judging captures, as ratios to a bare count of line feeds over the same file in the same process:
 * ratio 2 means twice as fast as the count. Each file is measured in a process of its own, the count and the readings in turn.
 */
const ROUNDS = 7;

interface Case {
  readonly name: string;
  readonly file: string;
  readonly leastRatio: number;
  readonly write: (path: string) => void;
}

const CASES: readonly Case[] = [
  {
    name: 'sampled CSV, 120 MB, three channels',
    file: 'sampled.csv',
    leastRatio: 0.6,
    write: (path) => writeSampledCsv(path, 120_000_000),
  },
  {
    name: 'VCD, 150 MB, busy unrelated clock',
    file: 'busy-clock.vcd',
    leastRatio: 0.6,
    write: (path) => writeBusyVcd(path, 150_000_000, 1e6),
  },
];

const MOST_MEGABYTES = 200;
/** One hour of continuous motion. */
const LONG_PACKETS = 120_000;

function runChild<Report>(mode: string, path: string, rounds: number): Report {
  const child = fileURLToPath(new URL('./bench-child.ts', import.meta.url));
  const args = ['--expose-gc', '--import', 'tsx', child, mode, path, String(rounds)];
  const { status, stdout, stderr } = spawnSync(process.execPath, args, { encoding: 'utf8' });
  if (status !== 0) throw new Error(`the measurement failed: ${stderr}`);
  return JSON.parse(stdout) as Report;
}

function say(line: string): void {
  process.stdout.write(`${line}\n`);
}

function judge(isMet: boolean): string {
  return isMet ? 'met' : 'MISSED';
}

function benchCase({ name, file, leastRatio, write }: Case, folder: string): void {
  const path = join(folder, file);
  write(path);
  const { newlinesMs, readMs, findingsMs } = runChild<SpeedReport>('speed', path, ROUNDS);
  const { peakMegabytes } = runChild<MemoryReport>('memory', path, 1);
  const ratio = newlinesMs / findingsMs;
  say(`${name} (${(statSync(path).size / 1e6).toFixed(0)} MB)`);
  say(`  line feeds counted   ${newlinesMs.toFixed(0)} ms`);
  say(`  read                 ${readMs.toFixed(0)} ms   ratio ${(newlinesMs / readMs).toFixed(2)}`);
  say(
    `  file to findings     ${findingsMs.toFixed(0)} ms   ratio ${ratio.toFixed(2)}   at least ${leastRatio}: ${judge(ratio >= leastRatio)}`,
  );
  say(
    `  peak memory          ${peakMegabytes.toFixed(0)} MB   under ${MOST_MEGABYTES}: ${judge(peakMegabytes < MOST_MEGABYTES)}`,
  );
  rmSync(path);
}

/** How long decoding and judging take beside reading, for a capture that is all movement. */
function benchMotion(folder: string): void {
  const path = join(folder, 'motion.vcd');
  writeLongVcd(path, LONG_PACKETS);
  const { readMs, findingsMs } = runChild<SpeedReport>('speed', path, 5);
  const share = (findingsMs - readMs) / readMs;
  say(`VCD, one hour of motion, ${LONG_PACKETS} packets (${(statSync(path).size / 1e6).toFixed(0)} MB)`);
  say(`  read                 ${readMs.toFixed(0)} ms`);
  say(
    `  decoded and judged   ${(findingsMs - readMs).toFixed(0)} ms   ${share.toFixed(2)} of the time of reading`,
  );
}

const folder = mkdtempSync(join(tmpdir(), 'linewitness-bench-'));
try {
  for (const one of CASES) benchCase(one, folder);
  benchMotion(folder);
} finally {
  rmSync(folder, { recursive: true, force: true });
}
