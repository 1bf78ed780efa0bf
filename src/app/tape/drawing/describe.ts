import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '#shared/characters/character-table';
import { BUTTON_NAMES } from '#shared/packets/packet-table';
import { countBefore, countUpTo } from '#shared/time/sorted-search';
import { formatFigure, formatMs, formatPlain, hexByte } from './figures';
import { VERDICT_WORDS } from './finding-words';
import type { TapeModel } from './tape-model';
import { secondsAt } from './time-scale';
import type { TapeWindow } from './time-scale';
import type { TapeSelection } from './view';

/** The label of the canvas: `Tape of LW-0412, 0.394 to 0.475 s`. */
export function describeTape(model: TapeModel, name: string, window: TapeWindow): string {
  const from = secondsAt(model.tape, window.startTicks);
  const to = secondsAt(model.tape, window.endTicks);
  return `Tape of ${name}, ${formatFigure(from, 3)} to ${formatFigure(to, 3)} s`;
}

/** A thing on the tape in words, for the live region. */
export function describe(model: TapeModel, thing: TapeSelection): string {
  switch (thing.kind) {
    case 'finding':
      return describeFinding(model, thing.index);
    case 'packet':
      return describePacket(model, thing.index);
    case 'character':
      return describeCharacter(model, thing.index);
    case 'reset':
      return describeReset(model, thing.index);
  }
}

/** A position with thin groups read as one figure: `0.446 200 s`. */
function position(model: TapeModel, ticks: number): string {
  const [whole, behind] = formatFigure(secondsAt(model.tape, ticks), 6).split('.');
  return `${whole}.${behind.slice(0, 3)} ${behind.slice(3)} s`;
}

function describeFinding(model: TapeModel, index: number): string {
  const finding = model.findings[index];
  if (finding === undefined) return '';
  const at = position(model, model.places[index].ticks);
  return `${finding.rule}, ${VERDICT_WORDS[finding.verdict]}, ${finding.severity}, ${at}: ${finding.message}`;
}

function describePacket(model: TapeModel, index: number): string {
  const { packets, characters } = model.tape;
  if (index < 0 || index >= packets.count) return '';
  const first = packets.firstCharacter[index];
  const bytes = Array.from(characters.values.subarray(first, first + packets.characterCount[index]), hexByte);
  const parts = [`Packet ${index}`, position(model, model.packetStarts[index]), bytes.join(' ')];
  parts.push(...movement(packets.dx[index], packets.dy[index]));
  if (packets.hasWheel && packets.wheel[index] !== 0) {
    const steps = Math.abs(packets.wheel[index]);
    const direction = packets.wheel[index] > 0 ? 'towards' : 'away from';
    parts.push(`wheel ${steps} ${steps === 1 ? 'step' : 'steps'} ${direction} the user`);
  }
  BUTTON_NAMES.forEach((name, bit) => {
    if ((packets.buttons[index] >> bit) & 1) parts.push(`${name} button down`);
  });
  parts.push(...verdictsIn(model, model.packetStarts[index], model.packetEnds[index]));
  return parts.join(', ');
}

function movement(dx: number, dy: number): string[] {
  if (dx === 0 && dy === 0) return ['no movement'];
  const parts: string[] = [];
  if (dx !== 0) parts.push(`${dx > 0 ? 'right' : 'left'} ${Math.abs(dx)}`);
  if (dy !== 0) parts.push(`${dy > 0 ? 'down' : 'up'} ${Math.abs(dy)}`);
  return parts;
}

/** `1 violation`, `2 inconclusive`: findings whose place lies in the span; passes are not read out. */
function verdictsIn(model: TapeModel, startTicks: number, endTicks: number): string[] {
  const counts = { violation: 0, inconclusive: 0 };
  const first = countBefore(model.findingTicks, startTicks);
  const end = countUpTo(model.findingTicks, endTicks);
  for (let i = first; i < end; i++) {
    const { verdict } = model.findings[model.findingOrder[i]];
    if (verdict === 'violation' || verdict === 'inconclusive') counts[verdict] += 1;
  }
  const parts: string[] = [];
  if (counts.violation > 0)
    parts.push(`${counts.violation} ${counts.violation === 1 ? 'violation' : 'violations'}`);
  if (counts.inconclusive > 0) parts.push(`${counts.inconclusive} inconclusive`);
  return parts;
}

function describeCharacter(model: TapeModel, index: number): string {
  const { characters, packetOfCharacter, resetOfCharacter } = model.tape;
  if (index < 0 || index >= characters.count) return '';
  const value = characters.values[index];
  const errors = characters.errors[index];
  const parts = [`Character ${index}`, position(model, characters.startTicks[index]), hexByte(value)];
  if (errors & BREAK_ERROR) parts.push('break');
  else if (errors & FRAMING_ERROR) parts.push('stop element at space');
  if (errors & PARITY_ERROR) parts.push('wrong parity');
  if (packetOfCharacter[index] >= 0) parts.push(`of packet ${packetOfCharacter[index]}`);
  else if (resetOfCharacter[index] >= 0) parts.push('of the identification');
  else parts.push('of no packet');
  parts.push(...verdictsIn(model, characters.startTicks[index], characters.endTicks[index]));
  return parts.join(', ');
}

function describeReset(model: TapeModel, index: number): string {
  const reset = model.tape.resets[index];
  if (reset === undefined) return '';
  const { tickS } = model.tape;
  const reply = model.replies[index];
  const pulse = formatPlain((reset.onTicks - reset.offTicks) * tickS * 1e3, 1);
  const parts = [`Reset at ${position(model, reset.onTicks)}`];
  parts.push(`pulse ${reset.isPulseStartSeen ? '' : 'at least '}${pulse} ms`);
  if (reply.latencyTicks === null) parts.push('no reply');
  else parts.push(`reply after ${formatMs(reply.latencyTicks * tickS)}`);
  if (reset.identity !== null) parts.push(`identification ${reset.identity}`);
  if (reply.verdict !== null) parts.push(VERDICT_WORDS[reply.verdict]);
  return parts.join(', ');
}
