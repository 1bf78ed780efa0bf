import { basename } from 'node:path';
import { decode } from '#shared/decode/decode';
import type { Decoded } from '#shared/decode/decoded';
import { MapError } from '#shared/line/find-channel';
import { check } from '#shared/rules/check';
import type { CheckResult } from '#shared/rules/finding';
import { definitionOf } from '#shared/rules/definitions';
import { wrapJunit, writeJunit } from '#shared/writers/junit';
import { writeLog } from '#shared/writers/log';
import { writePacketsCsv } from '#shared/writers/packets-csv';
import type { SummaryRow } from '#shared/writers/summary';
import { toSummaryRow, writeSummary } from '#shared/writers/summary';
import type { FileFacts } from '#shared/writers/to-decode-result';
import { toDecodeResult } from '#shared/writers/to-decode-result';
import type { DecodeArguments } from './decode-arguments';
import { parseDecodeArguments } from './decode-arguments';
import { readCaptureFile } from './read-file';
import { UsageError } from './usage-error';
import { jsonPieces, print } from './write-result';

interface Judged {
  readonly decoded: Decoded;
  readonly result: CheckResult;
  readonly file: FileFacts;
}

/** `decode FILE…`: exit code 0 not failed, 1 failed; throws UsageError for 2. */
export async function runDecode(args: readonly string[]): Promise<number> {
  const wanted = parseDecodeArguments(args);
  const rows: SummaryRow[] = [];
  const suites: string[] = [];
  // With several files nothing is printed before the last one proved usable.
  const held: string[] = [];
  let hasFailed = false;
  for (const path of wanted.files) {
    const judged = await judgeFile(path, wanted);
    hasFailed ||= isFailure(judged, wanted.isStrict);
    if (wanted.format === 'summary') rows.push(toSummaryRow(path, judged.decoded, judged.result));
    else if (wanted.format === 'junit') suites.push(writeJunit(path, judged.result, wanted.isStrict));
    else if (wanted.files.length > 1) held.push(...piecesOf(judged, wanted.format));
    else for (const piece of piecesOf(judged, wanted.format)) await print(piece);
  }
  for (const piece of held) await print(piece);
  if (wanted.format === 'summary') await print(writeSummary(rows));
  if (wanted.format === 'junit') await print(wrapJunit(suites));
  return hasFailed ? 1 : 0;
}

async function judgeFile(path: string, wanted: DecodeArguments): Promise<Judged> {
  const keep = Object.values(wanted.map.lines ?? {}).flatMap((line) => (line ? [line.channel] : []));
  const { capture, sha256, bytes } = await readCaptureFile(path, { sampleRateHz: wanted.sampleRateHz, keep });
  try {
    const decoded = decode(capture, wanted.map, wanted.options);
    return {
      decoded,
      result: check(decoded, wanted.rulebook),
      file: { name: basename(path), sha256, bytes },
    };
  } catch (error) {
    // The person named a channel that is not there: theirs to mend, not ours.
    if (error instanceof MapError) throw new UsageError(`${path}: ${error.message}`);
    throw error;
  }
}

function piecesOf({ decoded, result, file }: Judged, format: 'json' | 'log' | 'packets'): Iterable<string> {
  switch (format) {
    case 'json':
      return jsonPieces(toDecodeResult(decoded, result, file));
    case 'log':
      return writeLog(decoded, result, file);
    case 'packets':
      return writePacketsCsv(decoded);
  }
}

/** With `strict` also what is inconclusive, not shown or damaged. */
function isFailure({ decoded, result }: Judged, isStrict: boolean): boolean {
  if (result.verdict === 'fail') return true;
  if (!isStrict) return false;
  const isOpen = result.rules.some(
    (rule) =>
      definitionOf(rule.id)?.isMeasured === true &&
      (rule.verdict === 'inconclusive' || rule.verdict === 'not-shown'),
  );
  return isOpen || decoded.capture.defects.length > 0;
}
