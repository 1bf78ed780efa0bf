import { BUTTON_NAMES } from '#shared/packets/packet-table';
import type { ButtonName } from '#shared/packets/packet-table';
import { countBefore, countUpTo } from '#shared/time/sorted-search';
import type { TapeModel } from './tape-model';
import { ticksAtSeconds } from './time-scale';
import type { TapeSelection } from './view';

type Comparison = '>' | '<' | '>=' | '<=' | '=';

/** What a person asks the tape for. */
export type FindQuery =
  /** Characters in a row, such as `4D` or `4D 33`. */
  | { readonly kind: 'characters'; readonly values: readonly number[] }
  /** A packet by a figure, such as `dx>100`. */
  | {
      readonly kind: 'figure';
      readonly figure: 'dx' | 'dy' | 'wheel';
      readonly comparison: Comparison;
      readonly value: number;
    }
  /** The next press of a button. */
  | { readonly kind: 'button'; readonly button: ButtonName }
  /** A finding of a rule, such as `HSK-1`. */
  | { readonly kind: 'rule'; readonly rule: string }
  /** A position on the file's clock. */
  | { readonly kind: 'time'; readonly seconds: number };

/** Where something was found. `selection` is null for a mere position. */
export interface FoundPlace {
  readonly ticks: number;
  readonly selection: TapeSelection | null;
}

const UNITS: Readonly<Record<string, number>> = { s: 1, ms: 1e-3, µs: 1e-6, us: 1e-6 };

/** Reads what was typed; undefined where it asks for nothing the tape knows. */
export function parseFind(text: string): FindQuery | undefined {
  const asked = text.trim().replaceAll('\u2212', '-').replaceAll('μ', 'µ');
  return parseTime(asked) ?? parseFigure(asked) ?? parseName(asked) ?? parseCharacters(asked);
}

function parseTime(text: string): FindQuery | undefined {
  const match = /^(-?[\d ]+(?:[.,][\d ]+)?)\s*(s|ms|µs|us)$/i.exec(text);
  if (match === null) return undefined;
  const value = Number(match[1].replaceAll(' ', '').replace(',', '.'));
  return Number.isFinite(value)
    ? { kind: 'time', seconds: value * UNITS[match[2].toLowerCase()] }
    : undefined;
}

function parseFigure(text: string): FindQuery | undefined {
  const match = /^(?:Δ|d)?(x|y|w|wheel)\s*(>=|<=|≥|≤|>|<|=)\s*(-?\d+)$/i.exec(text);
  if (match === null) return undefined;
  const letter = match[1][0].toLowerCase();
  const figure = letter === 'x' ? 'dx' : letter === 'y' ? 'dy' : 'wheel';
  const comparison = match[2].replace('≥', '>=').replace('≤', '<=') as Comparison;
  return { kind: 'figure', figure, comparison, value: Number(match[3]) };
}

function parseName(text: string): FindQuery | undefined {
  const button = BUTTON_NAMES.find((name) => name === text.toLowerCase());
  if (button !== undefined) return { kind: 'button', button };
  return /^[a-z]{3}-\d{1,2}$/i.test(text) ? { kind: 'rule', rule: text.toUpperCase() } : undefined;
}

function parseCharacters(text: string): FindQuery | undefined {
  if (!/^[0-9a-f]{2}(\s*[0-9a-f]{2}){0,15}$/i.test(text)) return undefined;
  const digits = text.replaceAll(/\s/g, '');
  const values = Array.from({ length: digits.length / 2 }, (_, i) =>
    parseInt(digits.slice(2 * i, 2 * i + 2), 16),
  );
  return { kind: 'characters', values };
}

/** The next place after `fromTicks`, going on from the beginning behind the last; null where there is none. */
export function findNext(model: TapeModel, query: FindQuery, fromTicks: number): FoundPlace | null {
  switch (query.kind) {
    case 'time':
      return findTime(model, query.seconds);
    case 'rule':
      return findRule(model, query.rule, fromTicks);
    case 'button':
      return findPress(model, query.button, fromTicks);
    case 'figure': {
      const holds = comparing(model, query);
      return searchAround(
        model.packetStarts.length,
        countUpTo(model.packetStarts, fromTicks),
        holds,
        (index) => ({
          ticks: model.packetStarts[index],
          selection: { kind: 'packet', index },
        }),
      );
    }
    case 'characters':
      return findCharacters(model, query.values, fromTicks);
  }
}

function searchAround(
  count: number,
  first: number,
  holds: (index: number) => boolean,
  place: (index: number) => FoundPlace,
): FoundPlace | null {
  for (let step = 0; step < count; step++) {
    const index = (first + step) % count;
    if (holds(index)) return place(index);
  }
  return null;
}

function findTime(model: TapeModel, seconds: number): FoundPlace | null {
  const ticks = ticksAtSeconds(model.tape, seconds);
  return ticks < 0 || ticks > model.tape.endTicks ? null : { ticks, selection: null };
}

function findRule(model: TapeModel, rule: string, fromTicks: number): FoundPlace | null {
  const { findings, findingOrder, findingTicks } = model;
  return searchAround(
    findingOrder.length,
    countUpTo(findingTicks, fromTicks),
    (i) => findings[findingOrder[i]].rule === rule,
    (i) => ({ ticks: findingTicks[i], selection: { kind: 'finding', index: findingOrder[i] } }),
  );
}

function findPress(model: TapeModel, button: ButtonName, fromTicks: number): FoundPlace | null {
  const held = model.held.find((item) => item.name === button);
  if (held === undefined || held.packets.length === 0) return null;
  const starts = Array.from(held.packets, (packet) => model.packetStarts[packet]);
  const next = countUpTo(starts, fromTicks) % starts.length;
  return { ticks: starts[next], selection: { kind: 'packet', index: held.packets[next] } };
}

function comparing(
  model: TapeModel,
  query: Extract<FindQuery, { kind: 'figure' }>,
): (packet: number) => boolean {
  const { packets } = model.tape;
  if (query.figure === 'wheel' && !packets.hasWheel) return () => false;
  const column = packets[query.figure];
  const { value } = query;
  switch (query.comparison) {
    case '>':
      return (p) => column[p] > value;
    case '<':
      return (p) => column[p] < value;
    case '>=':
      return (p) => column[p] >= value;
    case '<=':
      return (p) => column[p] <= value;
    case '=':
      return (p) => column[p] === value;
  }
}

function findCharacters(model: TapeModel, values: readonly number[], fromTicks: number): FoundPlace | null {
  const { characters } = model.tape;
  const first = countUpTo(characters.startTicks, fromTicks, characters.count);
  return searchAround(
    characters.count,
    first,
    (c) => values.every((value, i) => c + i < characters.count && characters.values[c + i] === value),
    (index) => ({ ticks: characters.startTicks[index], selection: { kind: 'character', index } }),
  );
}

/** The next or previous finding in order of time, going round; null where there are none. */
export function stepFinding(
  model: TapeModel,
  fromTicks: number,
  direction: 1 | -1,
  isWanted: (index: number) => boolean = () => true,
): number | null {
  const { findingOrder, findingTicks } = model;
  const count = findingOrder.length;
  const first = direction > 0 ? countUpTo(findingTicks, fromTicks) : countBefore(findingTicks, fromTicks) - 1;
  for (let step = 0; step < count; step++) {
    const index = findingOrder[(((first + direction * step) % count) + count) % count];
    if (isWanted(index)) return index;
  }
  return null;
}
