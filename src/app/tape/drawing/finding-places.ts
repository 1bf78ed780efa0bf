import type { FindingView } from '#shared/contract/http/checks';
import type { Tape, TapeLine } from '#shared/contract/tape-payload';
import { countUpTo } from '#shared/time/sorted-search';
import { edgesOfCharacter, worstEdge } from './edge-places';
import type { LaneId } from './lanes';

/** Where a finding stands on the tape. */
export interface FindingPlace {
  /** Of its head and stem. */
  readonly ticks: number;
  /** Lane its stem begins in. */
  readonly lane: LaneId;
  /** The character whose inside it points at, −1 where it points at none: the stem then begins below its figures. */
  readonly character: number;
  /** It speaks of its whole span, not of one instant. */
  readonly isSpan: boolean;
}

/** Rules whose finding ends at the instant it is about: reply, end of the pulse, end of the character. */
const AT_END = /^HSK-(1|2|7|8|12)$/;
const AT_EDGE = /^FRM-(2|8)$/;
const OVER_SPAN = /^(RPT|MOV|BTN)-|^HSK-10$|^FRM-(1|9|10)$|^PKT-(1|5|6)$/;

/** @param data the data line, undefined for byte logs */
export function placeFinding(
  finding: FindingView,
  tape: Tape,
  data: TapeLine | undefined,
  measuredTicks: number,
  nominalTicks: number,
): FindingPlace {
  const { rule, startTicks, endTicks } = finding;
  const lane = laneOf(rule);
  if (AT_EDGE.test(rule) && data !== undefined) {
    const character = countUpTo(tape.characters.startTicks, startTicks, tape.characters.count) - 1;
    const unit = rule === 'FRM-2' ? nominalTicks : measuredTicks;
    const worst =
      character < 0 ? undefined : worstEdge(edgesOfCharacter(tape, data, character, measuredTicks, unit));
    if (worst !== undefined) return { ticks: worst.ticks, lane, character, isSpan: false };
  }
  if (AT_END.test(rule) && finding.verdict !== 'not-shown') {
    return { ticks: endTicks, lane, character: -1, isSpan: false };
  }
  const isSpan = OVER_SPAN.test(rule);
  return { ticks: isSpan ? (startTicks + endTicks) / 2 : startTicks, lane, character: -1, isSpan };
}

function laneOf(rule: string): LaneId {
  if (/^HSK-(7|9|12|13|14)$/.test(rule)) return 'rts';
  if (/^HSK-(1|4|8|10|11)$/.test(rule)) return 'reply';
  if (/^BTN-/.test(rule)) return 'held';
  return /^(PKT|MOV|RPT)-/.test(rule) ? 'packets' : 'data';
}
