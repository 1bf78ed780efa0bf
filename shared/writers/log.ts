import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '../characters/character-table';
import { framingName } from '../characters/framing';
import type { Decoded } from '../decode/decoded';
import { TOOL } from '../decode/version';
import { BUTTON_NAMES } from '../packets/packet-table';
import type { CheckResult, Finding } from '../rules/finding';
import { toSeconds } from '../time/time-base';
import { hexByte, printable, signed } from './plain-text';
import type { FileFacts } from './to-decode-result';

/** One line of the log with the instant that orders it. */
interface Entry {
  readonly ticks: number;
  readonly text: string;
}

const TIME_WIDTH = 14;
const KIND_WIDTH = 8;

/** The decoded log: aligned plain text for a ticket, in order of time. Yields pieces of many lines. */
export function* writeLog(decoded: Decoded, check: CheckResult, file: FileFacts): Generator<string> {
  yield `${header(decoded, check, file).join('\n')}\n\n`;
  yield `${line('time / s', 'what', 'characters', 'meaning')}\n`;
  const few = [...controlEntries(decoded), ...findingEntries(decoded, check.findings)].sort(
    (a, b) => a.ticks - b.ticks,
  );
  let next = 0;
  let piece = '';
  for (const entry of characterEntries(decoded)) {
    for (; next < few.length && few[next].ticks <= entry.ticks; next++) piece += `${few[next].text}\n`;
    piece += `${entry.text}\n`;
    if (piece.length > 1 << 16) {
      yield piece;
      piece = '';
    }
  }
  for (; next < few.length; next++) piece += `${few[next].text}\n`;
  yield piece;
  yield `${rulesTable(check).join('\n')}\n`;
}

function line(time: string, kind: string, characters: string, meaning: string): string {
  return `${time.padStart(TIME_WIDTH)}  ${kind.padEnd(KIND_WIDTH)} ${characters.padEnd(16)} ${meaning}`.trimEnd();
}

function at(decoded: Decoded, ticks: number): string {
  return toSeconds(decoded.capture.timeBase, ticks).toFixed(6);
}

function header(decoded: Decoded, check: CheckResult, file: FileFacts): string[] {
  const { capture, lines, framing, protocol, resets, packets, characters } = decoded;
  const mapped = Object.values(lines).map(
    (item) => `${item.role} = ${printable(item.channel)} (${item.polarity})`,
  );
  const counts = new Map<string, number>();
  for (const rule of check.rules) counts.set(rule.verdict, (counts.get(rule.verdict) ?? 0) + 1);
  const rows: [string, string][] = [
    ['file', printable(file.name)],
    ['sha-256', file.sha256],
    ['record', `${at(decoded, 0)} s to ${at(decoded, capture.endTicks)} s, ${capture.format}`],
    ['lines', mapped.join(', ') || 'none found'],
    [
      'framing',
      framing === null
        ? 'no characters'
        : `${framingName(framing)} at ${framing.bitRate.toFixed(1)} bit/s (nominal ${framing.nominalBitRate})`,
    ],
    ['protocol', protocol ?? 'none'],
    ['holds', `${resets.length} resets, ${characters.count} characters, ${packets.count} packets`],
    [
      'checked',
      `against ${check.rulebook.name} ${check.rulebook.version}: ${[...counts].map(([verdict, n]) => `${n} ${verdict}`).join(', ')}`,
    ],
    ['verdict', check.verdict],
    ['decoded', `${TOOL.name} ${TOOL.version}`],
  ];
  const body = rows.map(([name, value]) => `${name.padEnd(9)} ${value}`);
  const defects = capture.defects.map((defect) => {
    const place = [
      defect.line === null ? '' : `line ${defect.line}`,
      defect.column === null ? '' : `column ${defect.column}`,
      defect.byte === null ? '' : `byte ${defect.byte}`,
    ].filter((part) => part !== '');
    return `defect    ${place.join(', ')}: ${printable(defect.message)}`;
  });
  return ['Decoded log', ...body, ...defects];
}

function controlEntries(decoded: Decoded): Entry[] {
  const resetAt = new Map(decoded.resets.map((reset) => [reset.onTicks, reset]));
  return decoded.controlEvents.map((event) => {
    const reset = event.line === 'rts' && event.isOn ? resetAt.get(event.ticks) : undefined;
    const pulse = reset === undefined ? '' : `OFF since ${at(decoded, reset.offTicks)} s`;
    return {
      ticks: event.ticks,
      text: line(at(decoded, event.ticks), event.line.toUpperCase(), event.isOn ? 'ON' : 'OFF', pulse),
    };
  });
}

function findingEntries(decoded: Decoded, findings: readonly Finding[]): Entry[] {
  return findings
    .filter((finding) => finding.verdict === 'violation' || finding.verdict === 'inconclusive')
    .map((finding) => ({
      ticks: finding.startTicks,
      text: line(
        at(decoded, finding.startTicks),
        `> ${finding.rule}`,
        finding.verdict,
        `${finding.message} [${finding.severity}]`,
      ),
    }));
}

function* characterEntries(decoded: Decoded): Generator<Entry> {
  const { characters, packets, packetOfCharacter, resetOfCharacter, resets } = decoded;
  let i = 0;
  while (i < characters.count) {
    const packet = packetOfCharacter[i];
    if (packet >= 0) {
      const count = packets.characterCount[packet];
      yield { ticks: characters.startTicks[i], text: packetLine(decoded, packet, i, count) };
      i += count;
      continue;
    }
    const reset = resetOfCharacter[i];
    if (reset >= 0) {
      yield* identificationLines(decoded, reset);
      i = resets[reset].identification.at(-1)! + 1;
      continue;
    }
    yield {
      ticks: characters.startTicks[i],
      text: line(
        at(decoded, characters.startTicks[i]),
        'char',
        hexByte(characters.values[i]),
        errorWords(characters.errors[i]),
      ),
    };
    i += 1;
  }
}

function packetLine(decoded: Decoded, packet: number, first: number, count: number): string {
  const { characters, packets } = decoded;
  const hex = Array.from(characters.values.subarray(first, first + count), hexByte).join(' ');
  const held = BUTTON_NAMES.filter((_, bit) => ((packets.buttons[packet] >> bit) & 1) === 1);
  const wheel = packets.hasWheel ? `  wheel ${signed(packets.wheel[packet])}` : '';
  const move = `dx ${signed(packets.dx[packet]).padStart(4)}  dy ${signed(packets.dy[packet]).padStart(4)}${wheel}`;
  return line(
    at(decoded, characters.startTicks[first]),
    'packet',
    hex,
    `${move}${held.length === 0 ? '' : `  ${held.join(' ')} down`}`,
  );
}

function* identificationLines(decoded: Decoded, index: number): Generator<Entry> {
  const { characters, resets } = decoded;
  const reset = resets[index];
  const list = reset.identification;
  for (let from = 0; from < list.length; from += 5) {
    const hex = list
      .slice(from, from + 5)
      .map((i) => hexByte(characters.values[i]))
      .join(' ');
    const words =
      from > 0 ? '' : `identification ${reset.identity ?? ''}${reset.pnp === null ? '' : ' with PnP string'}`;
    yield {
      ticks: characters.startTicks[list[from]],
      text: line(at(decoded, characters.startTicks[list[from]]), 'ident', hex, words),
    };
  }
}

function errorWords(errors: number): string {
  const words = [
    (errors & FRAMING_ERROR) !== 0 ? 'framing error' : '',
    (errors & PARITY_ERROR) !== 0 ? 'parity error' : '',
    (errors & BREAK_ERROR) !== 0 ? 'break' : '',
  ].filter((word) => word !== '');
  return words.length === 0 ? 'belongs to no packet' : words.join(', ');
}

function rulesTable(check: CheckResult): string[] {
  const rows = check.rules
    .filter((rule) => rule.verdict !== 'not-applicable')
    .map(
      (rule) => `${rule.id.padEnd(7)} ${rule.verdict.padEnd(13)} ${rule.severity.padEnd(9)} ${rule.reason}`,
    );
  return ['', `Checked against ${check.rulebook.name} ${check.rulebook.version}`, ...rows];
}
