import type { FindingView } from '#shared/contract/http/checks';
import { charactersIn } from './characters-in-view';
import { countBefore } from '#shared/time/sorted-search';
import { formatMs, hexByte, shortPosition } from './figures';
import type { LaneId, LaneLayout } from './lanes';
import type { Rect } from './pen';
import { hasCells } from './selection-places';
import type { TapeModel } from './tape-model';
import type { TextStyle } from './text-measure';
import { textWidth } from './text-measure';
import type { TapeView } from './view';

/** What a lane says at its left edge when it has nothing in the window. */
export interface LaneNote {
  readonly lane: LaneId;
  /** Which way the thing lies; null for a plain statement. */
  readonly side: 'before' | 'behind' | null;
  readonly verdict: FindingView['verdict'] | null;
  /** A figure, set in mono before the words; may be empty. */
  readonly figure: string;
  readonly words: string;
  /** Where a click takes one; null for a plain statement. */
  readonly ticks: number | null;
  readonly box: Rect;
}

export const NOTE_FIGURE: TextStyle = { face: 'mono', sizePx: 11, weight: 600 };
export const NOTE_WORDS: TextStyle = { face: 'sans', sizePx: 11, weight: 400 };
/** Places of the parts from the left edge of the paper, px. */
export const NOTE_PX = { arrow: 8, glyph: 26, afterGlyph: 38, afterArrow: 20, plain: 10, gap: 9 };

type Draft = Omit<LaneNote, 'lane' | 'box'>;

const plain = (words: string): Draft => ({ side: null, verdict: null, figure: '', words, ticks: null });

/** The notes of the lanes that have nothing to draw. */
export function layOutNotes(model: TapeModel, view: TapeView, lanes: readonly LaneLayout[]): LaneNote[] {
  const notes: LaneNote[] = [];
  for (const lane of lanes) {
    const draft = draftFor(lane.id, model, view);
    if (draft !== undefined) notes.push({ ...draft, lane: lane.id, box: boxOf(draft, lane, view) });
  }
  return notes;
}

function draftFor(id: LaneId, model: TapeModel, view: TapeView): Draft | undefined {
  switch (id) {
    case 'rts':
      return model.lines.rts === undefined
        ? plain('RTS is not in this capture: record it beside the data line')
        : undefined;
    case 'reply':
      return replyNote(model, view);
    case 'data':
      return dataNote(model, view);
    case 'packets':
      return packetNote(model, view);
    case 'findings':
      return findingNote(model, view);
    default:
      return undefined;
  }
}

function replyNote(model: TapeModel, view: TapeView): Draft | undefined {
  const { startTicks, endTicks } = view.window;
  if (model.lines.rts === undefined) return plain('No RTS, so no reply times');
  if (model.replies.length === 0) return plain('No reset: RTS never goes from OFF to ON');
  const endOf = (i: number): number => model.replies[i].replyTicks ?? model.replies[i].onTicks;
  if (model.replies.some((reply, i) => endOf(i) >= startTicks && reply.onTicks <= endTicks)) return undefined;
  const behind = model.replies.findIndex((reply) => reply.onTicks > endTicks);
  const nearest = behind < 0 ? model.replies.length - 1 : behind > 0 ? behind - 1 : 0;
  const reply = model.replies[nearest];
  return {
    side: reply.onTicks > endTicks ? 'behind' : 'before',
    verdict: reply.verdict,
    figure: reply.latencyTicks === null ? '' : formatMs(reply.latencyTicks * model.tape.tickS),
    words: `${reply.latencyTicks === null ? 'no reply ' : ''}at ${shortPosition(model.tape, reply.onTicks)}`,
    ticks: reply.onTicks,
  };
}

function dataNote(model: TapeModel, view: TapeView): Draft | undefined {
  const { characters } = model.tape;
  const { startTicks, endTicks } = view.window;
  if (characters.count === 0) {
    if (model.lines.data === undefined) return plain('No data line in this capture');
    const isStill = model.lines.data.ticks.length === 0;
    return plain(isStill ? 'No characters: the line never changes' : 'No characters on the line');
  }
  const { first, end } = charactersIn(model, startTicks, endTicks);
  if (end > first || !hasCells(model, view)) return undefined;
  const nearest = first > 0 ? first - 1 : 0;
  const at = characters.startTicks[nearest];
  return {
    side: at > endTicks ? 'behind' : 'before',
    verdict: null,
    figure: hexByte(characters.values[nearest]),
    words: `at ${shortPosition(model.tape, at)}`,
    ticks: at,
  };
}

function packetNote(model: TapeModel, view: TapeView): Draft | undefined {
  const { packets, resets, incidents } = model.tape;
  const { startTicks, endTicks } = view.window;
  if (packets.count === 0) {
    if (incidents.length > 0) return plain('No whole packets');
    const isAnswered = resets.some((reset) => reset.replyTicks !== null);
    // The nameplate of a reply in view stands where the words would.
    if (
      resets.some(
        (reset) => reset.identity !== null && reset.onTicks >= startTicks && reset.onTicks <= endTicks,
      )
    )
      return undefined;
    if (isAnswered) return plain('No packets. The device answered the reset but did not move.');
    return plain(resets.length > 0 ? 'No packets. The device did not answer the reset.' : 'No packets');
  }
  const next = countBefore(model.packetEnds, startTicks);
  if (next < packets.count && model.packetStarts[next] <= endTicks) return undefined;
  const { first, end } = charactersIn(model, startTicks, endTicks);
  if (end > first) return undefined;
  const packet = next > 0 ? next - 1 : 0;
  const at = model.packetStarts[packet];
  return {
    side: at > endTicks ? 'behind' : 'before',
    verdict: null,
    figure: `#${packet}`,
    words: `at ${shortPosition(model.tape, at)}`,
    ticks: at,
  };
}

function findingNote(model: TapeModel, view: TapeView): Draft | undefined {
  if (model.findings.length === 0) return plain('No findings');
  const first = countBefore(model.findingTicks, view.window.startTicks);
  if (first < model.findingTicks.length && model.findingTicks[first] <= view.window.endTicks)
    return undefined;
  const order = first > 0 ? first - 1 : 0;
  const finding = model.findings[model.findingOrder[order]];
  const at = model.findingTicks[order];
  return {
    side: first > 0 ? 'before' : 'behind',
    verdict: finding.verdict,
    figure: finding.rule,
    words: `at ${shortPosition(model.tape, at)}`,
    ticks: at,
  };
}

function boxOf(draft: Draft, lane: LaneLayout, view: TapeView): Rect {
  const from =
    draft.side === null ? NOTE_PX.plain : draft.verdict === null ? NOTE_PX.afterArrow : NOTE_PX.afterGlyph;
  const figure = draft.figure === '' ? 0 : textWidth(draft.figure, NOTE_FIGURE) + NOTE_PX.gap;
  const width = from + figure + textWidth(draft.words, NOTE_WORDS) + 6;
  return { x: view.gutterPx, y: lane.topPx + lane.heightPx / 2 - 12, width, height: 24 };
}
