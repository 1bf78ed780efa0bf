import { framingName } from '#shared/characters/framing';
import type { PreviewView } from '#shared/contract/http/mapping';
import type { Decoded } from '#shared/decode/decoded';
import { countUpTo } from '#shared/time/sorted-search';
import { BUTTON_NAMES } from '#shared/packets/packet-table';
import { secondsPerTick, ticksPerSecond, toSeconds } from '#shared/time/time-base';
import { detectionsOf, linesOf } from './decode-figures';
import { doubtsOf } from './mapping-doubts';

const LONGEST_S = 0.16;
const SHORTEST_S = 0.04;
const BEFORE_S = 0.006;
const MOST_EDGES = 600;

type Excerpt = PreviewView['excerpt'];
interface Window {
  readonly from: number;
  readonly to: number;
}

/** What a mapping makes of a capture. */
export function describePreview(decoded: Decoded): PreviewView {
  const { capture, framing, characters, resets, packets } = decoded;
  const answered = resets.filter((reset) => reset.replyTicks !== null);
  return {
    lines: linesOf(decoded),
    detections: detectionsOf(decoded),
    framing: framing === null ? null : framingName(framing),
    bitRate: framing?.bitRate ?? null,
    nominalBitRate: framing?.nominalBitRate ?? null,
    protocol: decoded.protocol,
    resolutionS: decoded.resolutionTicks * secondsPerTick(capture.timeBase),
    totals: {
      resets: resets.length,
      answeredResets: answered.length,
      characters: characters.count,
      damagedCharacters: characters.errors.reduce((count, flags) => count + Number(flags !== 0), 0),
      packets: packets.count,
      brokenPackets: decoded.incidents.filter(({ kind }) => kind === 'cut').length,
    },
    identity: answered[0]?.identity ?? null,
    excerpt: cut(decoded, chooseWindow(decoded)),
    doubts: doubtsOf(decoded),
  };
}

/** Around the first answered reset, else around the first characters, else the begin. In ticks. */
function chooseWindow({ capture, characters, resets }: Decoded): Window {
  const perSecond = ticksPerSecond(capture.timeBase);
  const reset = resets.find(({ replyTicks }) => replyTicks !== null) ?? resets[0];
  const begin = reset?.onTicks ?? (characters.count > 0 ? characters.startTicks[0] : 0);
  const wanted = reset?.identificationEndTicks ?? begin;
  const from = Math.max(0, begin - BEFORE_S * perSecond);
  const length = Math.min(LONGEST_S, Math.max(SHORTEST_S, (wanted - from) / perSecond + BEFORE_S));
  return { from, to: Math.min(capture.endTicks, from + length * perSecond) };
}

function cut(decoded: Decoded, window: Window): Excerpt {
  const at = (ticks: number): number => toSeconds(decoded.capture.timeBase, ticks);
  return {
    startS: at(window.from),
    endS: at(window.to),
    lines: Object.values(decoded.lines).map(({ role, trace }) => {
      const first = countUpTo(trace.ticks, window.from);
      const end = Math.min(countUpTo(trace.ticks, window.to), first + MOST_EDGES);
      return {
        role,
        initialLevel: first === 0 ? trace.initialLevel : trace.levels[first - 1],
        times: Array.from(trace.ticks.subarray(first, end), at),
        levels: Array.from(trace.levels.subarray(first, end)),
      };
    }),
    resets: decoded.resets
      .filter(({ onTicks }) => onTicks >= window.from && onTicks <= window.to)
      .map(({ onTicks, replyTicks }) => ({
        t: at(onTicks),
        replyT: replyTicks === null ? null : at(replyTicks),
      })),
    characters: cutCharacters(decoded, window, at),
    packets: cutPackets(decoded, window, at),
  };
}

function cutCharacters(
  { characters }: Decoded,
  window: Window,
  at: (ticks: number) => number,
): Excerpt['characters'] {
  const list: Excerpt['characters'] = [];
  const first = countUpTo(characters.startTicks, window.from);
  for (let i = first; i < characters.count && characters.startTicks[i] <= window.to; i++) {
    list.push({
      t: at(characters.startTicks[i]),
      tEnd: at(characters.endTicks[i]),
      value: characters.values[i],
      hasError: characters.errors[i] !== 0,
    });
  }
  return list;
}

function cutPackets(
  { packets, characters }: Decoded,
  window: Window,
  at: (ticks: number) => number,
): Excerpt['packets'] {
  const list: Excerpt['packets'] = [];
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    const start = characters.startTicks[first];
    if (start > window.to) break;
    if (start < window.from) continue;
    list.push({
      t: at(start),
      tEnd: at(characters.endTicks[first + packets.characterCount[p] - 1]),
      dx: packets.dx[p],
      dy: packets.dy[p],
      wheel: packets.hasWheel ? packets.wheel[p] : null,
      buttons: BUTTON_NAMES.filter((_, bit) => ((packets.buttons[p] >> bit) & 1) === 1),
    });
  }
  return list;
}
