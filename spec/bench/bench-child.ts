import { countNewlines, findingsOf, median, readFile, timed } from './measure';

/** What a child process of the bench reports, as one line of JSON on its standard output. */
export interface SpeedReport {
  readonly newlinesMs: number;
  readonly readMs: number;
  readonly findingsMs: number;
}

export interface MemoryReport {
  readonly peakMegabytes: number;
}

/** Warm-up rounds are left out: the first ones are compiled while they run. */
const WARM_UP_ROUNDS = 1;

async function measureSpeed(path: string, rounds: number): Promise<SpeedReport> {
  const newlines: number[] = [];
  const read: number[] = [];
  const findings: number[] = [];
  for (let round = -WARM_UP_ROUNDS; round < rounds; round++) {
    const times = [
      await timed(() => countNewlines(path)),
      await timed(() => readFile(path)),
      await timed(() => findingsOf(path)),
    ];
    if (round < 0) continue;
    newlines.push(times[0]);
    read.push(times[1]);
    findings.push(times[2]);
  }
  return { newlinesMs: median(newlines), readMs: median(read), findingsMs: median(findings) };
}

async function measureMemory(path: string): Promise<MemoryReport> {
  await findingsOf(path);
  return { peakMegabytes: process.resourceUsage().maxRSS / 1024 };
}

const [mode, path, rounds] = process.argv.slice(2);
const report = mode === 'memory' ? await measureMemory(path) : await measureSpeed(path, Number(rounds));
process.stdout.write(`${JSON.stringify(report)}\n`);
