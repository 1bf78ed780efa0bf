import type { CharacterTable } from '../characters/character-table';
import { BREAK_ERROR } from '../characters/character-table';
import { holdsLevel, reachesLevel } from '../line/level-at';
import { countUpTo } from '../time/sorted-search';
import type { LevelTrace } from '../line/level-trace';
import { OFF, ON, UNKNOWN } from '../line/level-trace';
import { ReplyReader } from './identification';
import type { Reset } from './reset';

/** Length of the reply window, seconds. Source: rules.md 2. */
export const REPLY_WINDOW_S = 0.2;
/** Both supply lines OFF this long before make a reset a power-up, seconds. Source: product.md, conventions. */
export const POWER_OFF_S = 0.1;
/** Characters tried as the begin of an identification when strays come first. */
const MOST_STRAYS = 16;
/** DTR this little before RTS still counts as raised together with it, seconds (house). */
const SAME_MOMENT_S = 0.005;

export interface ResetContext {
  readonly rts: LevelTrace;
  readonly dtr: LevelTrace | null;
  readonly data: LevelTrace | null;
  readonly characters: CharacterTable;
  readonly ticksPerSecond: number;
  readonly endTicks: number;
  /** Eight data bits: any byte may occur in a packet, so only the first character can begin an identification. */
  readonly hasEightBits: boolean;
}

/** Every OFF→ON of RTS with the reply to it. */
export function findResets(context: ResetContext): Reset[] {
  const { rts } = context;
  const resets: Reset[] = [];
  for (let i = 0; i < rts.ticks.length; i++) {
    const before = i === 0 ? rts.initialLevel : rts.levels[i - 1];
    if (rts.levels[i] === ON && before === OFF) resets.push(readReset(context, i));
  }
  return resets;
}

function readReset(context: ResetContext, edge: number): Reset {
  const { rts, characters, ticksPerSecond, endTicks } = context;
  const onTicks = rts.ticks[edge];
  const nextOff = edge + 1 < rts.ticks.length ? rts.ticks[edge + 1] : endTicks;
  const windowEndTicks = Math.min(onTicks + REPLY_WINDOW_S * ticksPerSecond, nextOff);
  const first = firstFrom(characters, onTicks);
  const hasReply = first < characters.count && characters.startTicks[first] <= windowEndTicks;
  const untilOff = firstFrom(characters, nextOff);
  const found = hasReply ? findIdentification(context, first, windowEndTicks, untilOff) : null;
  const last = found === null ? null : found.characters[found.characters.length - 1];
  return {
    onTicks,
    offTicks: edge === 0 ? 0 : rts.ticks[edge - 1],
    isPulseStartSeen: edge > 0 && (edge === 1 ? rts.initialLevel : rts.levels[edge - 2]) === ON,
    windowEndTicks,
    isWindowCut: !hasReply && isCut(context, onTicks, nextOff),
    replyTicks: hasReply ? characters.startTicks[first] : null,
    firstCharacter: hasReply ? first : -1,
    identity: found?.identity ?? null,
    identification: found?.characters ?? [],
    identificationEndTicks: last === null ? null : characters.endTicks[last],
    strays: found === null ? [] : range(first, found.characters[0]),
    pnp: found?.pnp ?? null,
    isPowerUp: judgePowerUp(context, onTicks),
  };
}

function findIdentification(context: ResetContext, first: number, windowEndTicks: number, to: number) {
  const reader = new ReplyReader(context.characters, to, context.ticksPerSecond, context.hasEightBits);
  const { startTicks, errors } = context.characters;
  const most = context.hasEightBits ? 1 : MOST_STRAYS;
  for (let i = first; i < to && i < first + most && startTicks[i] <= windowEndTicks; i++) {
    if (errors[i] !== 0) continue;
    const found = reader.read(i);
    if (found !== null) return found;
  }
  return null;
}

/** First character whose start element begins at or after an instant; breaks are no characters of a reply. */
function firstFrom(characters: CharacterTable, at: number): number {
  let index = countUpTo(characters.startTicks, at);
  if (index > 0 && characters.startTicks[index - 1] === at) index -= 1;
  while (index < characters.count && (characters.errors[index] & BREAK_ERROR) !== 0) index += 1;
  return index;
}

/** Without a reply: the record, or the knowledge of the data line, ended before the window did. */
function isCut(context: ResetContext, onTicks: number, nextOff: number): boolean {
  const fullEnd = onTicks + REPLY_WINDOW_S * context.ticksPerSecond;
  const end = Math.min(fullEnd, nextOff);
  if (context.endTicks < fullEnd && nextOff >= context.endTicks) return true;
  return context.data === null || reachesLevel(context.data, UNKNOWN, onTicks, end);
}

function judgePowerUp(context: ResetContext, onTicks: number): boolean | null {
  const from = onTicks - POWER_OFF_S * context.ticksPerSecond;
  const begin = Math.max(0, from);
  if (reachesLevel(context.rts, ON, begin, onTicks)) return false;
  if (context.dtr === null) return null;
  const until = Math.max(begin, onTicks - SAME_MOMENT_S * context.ticksPerSecond);
  if (reachesLevel(context.dtr, ON, begin, until)) return false;
  if (from < 0) return null;
  const isOff = holdsLevel(context.rts, OFF, begin, onTicks) && holdsLevel(context.dtr, OFF, begin, until);
  return isOff ? true : null;
}

function range(from: number, to: number): number[] {
  return Array.from({ length: Math.max(0, to - from) }, (_, i) => from + i);
}
