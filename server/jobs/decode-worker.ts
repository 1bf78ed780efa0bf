import { mkdir, open } from 'node:fs/promises';
import { join } from 'node:path';
import type { Capture } from '#shared/capture/capture';
import { CaptureError } from '#shared/capture/capture-error';
import type { JobProblem } from '#shared/contract/http/jobs';
import { encodeTape } from '#shared/contract/tape-payload';
import { decode } from '#shared/decode/decode';
import type { Decoded } from '#shared/decode/decoded';
import { TOOL } from '#shared/decode/version';
import { MapError } from '#shared/line/find-channel';
import type { LineMap } from '#shared/line/line-map';
import { check } from '#shared/rules/check';
import type { CheckResult } from '#shared/rules/finding';
import { writeLog } from '#shared/writers/log';
import { writePacketsCsv } from '#shared/writers/packets-csv';
import { toDecodeResult } from '#shared/writers/to-decode-result';
import { jsonPieces } from '../cli/write-result';
import { readExcerpt } from '../storage/file-excerpt';
import type { ProductName } from '../storage/product-store';
import { toOutcome } from './check-figures';
import { detailOf, figuresOf } from './decode-figures';
import { describeLines, namesOf } from './describe-lines';
import { describePreview } from './describe-preview';
import { BudgetError, channelsOf, readSource, refuseOverBudget } from './read-source';
import { RULEBOOKS } from './rulebooks';
import type { WorkerAnswer, WorkerTask } from './worker-task';

/** Percent done after reading, decoding, judging. */
const READ = 80;
const DECODED = 90;
const JUDGED = 93;

type JudgingTask = Extract<WorkerTask, { kind: 'decode' | 'check' }>;

/** The capture read last: whoever maps lines asks for the same one again and again. */
let kept: { readonly key: string; readonly capture: Capture } | null = null;

/** Runs one task in a thread of the pool. What is wrong with the file is an answer; a throw is a fault of ours. */
export default async function runTask(task: WorkerTask): Promise<WorkerAnswer> {
  try {
    if (task.kind === 'preview') {
      const { map, options } = task;
      const decoded = decode(await readKept(task, map, options.sampleRateHz), map, options);
      return { kind: 'preview', preview: describePreview(decoded) };
    }
    if (task.kind === 'lines') {
      const decoded = decode(await readKept(task, {}, task.sampleRateHz));
      return { kind: 'lines', lines: describeLines(decoded), names: namesOf(decoded.capture) };
    }
    return await judge(task);
  } catch (error) {
    const problem = await toProblem(error, task);
    if (problem === null) throw error;
    return { kind: 'problem', problem };
  } finally {
    task.port?.close();
  }
}

async function judge(task: JudgingTask): Promise<WorkerAnswer> {
  const { map, options } = task.request;
  const tell = (percent: number): void => task.port?.postMessage(percent);
  const capture = await readSource(task.file, {
    sampleRateHz: options.sampleRateHz,
    map,
    memoryBudget: task.memoryBudget,
    onShare: whenItGrows((share) => tell(Math.floor(READ * share))),
  });
  const decoded = decode(capture, map, options);
  refuseOverBudget(task.memoryBudget);
  tell(DECODED);
  const result = check(decoded, RULEBOOKS[task.rulebook]);
  tell(JUDGED);
  await writeProducts(task, decoded, result);
  return {
    kind: 'judged',
    decode: { figures: figuresOf(decoded), detail: detailOf(decoded), toolVersion: TOOL.version },
    check: toOutcome(decoded, result, task.rulebook),
  };
}

/** Calls on with whole percents only. */
function whenItGrows(tell: (share: number) => void): (share: number) => void {
  let last = -1;
  return (share) => {
    const percent = Math.floor(share * 100);
    if (percent > last) tell(share);
    last = Math.max(last, percent);
  };
}

async function readKept(task: WorkerTask, map: LineMap, sampleRateHz: number | undefined): Promise<Capture> {
  const key = `${task.file.sha256} ${sampleRateHz ?? ''}`;
  if (kept?.key === key && hasAllOf(kept.capture, channelsOf(map))) return kept.capture;
  kept = null;
  const { file, memoryBudget } = task;
  const capture = await readSource(file, { sampleRateHz, map, memoryBudget });
  kept = { key, capture };
  return capture;
}

/** False where a wanted channel was given up while reading because it is too busy. */
function hasAllOf({ channels }: Capture, wanted: readonly string[]): boolean {
  return channels.every(
    (channel) =>
      channel.kind === 'analog' ||
      !channel.isTooBusy ||
      !wanted.some((name) => [channel.name, ...channel.aliases].some((full) => full.endsWith(name))),
  );
}

async function writeProducts(task: JudgingTask, decoded: Decoded, result: CheckResult): Promise<void> {
  const { name, sha256, size: bytes } = task.file;
  const facts = { name, sha256, bytes };
  await mkdir(task.draft, { recursive: true, mode: 0o700 });
  await writePieces(task.draft, 'result.json', jsonPieces(toDecodeResult(decoded, result, facts)));
  await writePieces(task.draft, 'log.txt', writeLog(decoded, result, facts));
  if (task.kind === 'check') return;
  await writePieces(task.draft, 'tape.bin', [encodeTape(decoded)]);
  await writePieces(task.draft, 'packets.csv', writePacketsCsv(decoded));
}

async function writePieces(
  folder: string,
  product: ProductName,
  pieces: Iterable<string | Uint8Array>,
): Promise<void> {
  const handle = await open(join(folder, product), 'w', 0o600);
  try {
    for (const piece of pieces) await handle.writeFile(piece);
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** null: none of the errors a file or a map can be to blame for. */
async function toProblem(error: unknown, { file }: WorkerTask): Promise<JobProblem | null> {
  if (error instanceof CaptureError) {
    const { code, place } = error;
    return { code, detail: sentence(error.message), place, excerpt: await readExcerpt(file.path, place) };
  }
  if (error instanceof MapError) return plain('map', error.message);
  if (error instanceof BudgetError) return plain('too-large', error.message);
  return null;
}

function plain(code: string, message: string): JobProblem {
  return { code, detail: sentence(message), place: null, excerpt: null };
}

function sentence(message: string): string {
  return `${message.charAt(0).toUpperCase()}${message.slice(1)}${/[.!?]$/.test(message) ? '' : '.'}`;
}
