import { secondsAt, ticksAtSeconds } from './drawing/time-scale';
import type { TapeModel } from './drawing/tape-model';
import type { TapeWindow } from './drawing/time-scale';
import type { TapeSelection } from './drawing/view';
import type { Dividers } from './tape-stage';

/** The part of the address that says where somebody is on a tape. Positions in seconds of the file's clock. */
export interface TapeAddress {
  readonly w?: string;
  readonly a?: string;
  readonly b?: string;
  readonly sel?: string;
  readonly stack?: string;
}

export interface TapePlace {
  readonly window: TapeWindow | null;
  readonly dividers: Dividers;
  readonly selection: TapeSelection | null;
}

/** Writes nanoseconds: finer than any capture's clock that can be seen. */
function written(model: TapeModel, ticks: number): string {
  return Number(secondsAt(model.tape, ticks).toFixed(9)).toString();
}

export function toAddress(
  model: TapeModel,
  place: { window: TapeWindow; dividers: Dividers; selection: TapeSelection | null; isStacked: boolean },
): Record<keyof TapeAddress, string | null> {
  const { startTicks, endTicks } = place.window;
  const isWhole = startTicks <= 0 && endTicks >= model.tape.endTicks;
  const { a, b } = place.dividers;
  return {
    w: isWhole ? null : `${written(model, startTicks)},${written(model, endTicks)}`,
    a: a === null ? null : written(model, a),
    b: b === null ? null : written(model, b),
    sel: place.selection === null ? null : writeSelection(model, place.selection),
    stack: place.isStacked ? 'resets' : null,
  };
}

/** `HSK-1@0.417220`, `packet@0.446200`: by place, since a number would be another one in another decode. */
function writeSelection(model: TapeModel, selection: TapeSelection): string {
  switch (selection.kind) {
    case 'finding': {
      const { rule, startTicks } = model.findings[selection.index];
      return `${rule}@${written(model, startTicks)}`;
    }
    case 'packet':
      return `packet@${written(model, model.packetStarts[selection.index])}`;
    case 'character':
      return `character@${written(model, model.tape.characters.startTicks[selection.index])}`;
    case 'reset':
      return `reset@${written(model, model.tape.resets[selection.index].onTicks)}`;
  }
}

/** What an address says; whatever it says wrongly is left out. */
export function fromAddress(model: TapeModel, address: TapeAddress): TapePlace {
  const at = (text: string | undefined): number | null => {
    if (text === undefined || text.trim() === '') return null;
    const seconds = Number(text);
    return Number.isFinite(seconds) ? ticksAtSeconds(model.tape, seconds) : null;
  };
  const [from, to] = (address.w ?? '').split(',').map((part) => at(part));
  const isWindow = typeof from === 'number' && typeof to === 'number' && to > from;
  return {
    window: isWindow ? { startTicks: from, endTicks: to } : null,
    dividers: { a: at(address.a), b: at(address.b) },
    selection: readSelection(model, address.sel, at),
  };
}

function readSelection(
  model: TapeModel,
  text: string | undefined,
  at: (text: string | undefined) => number | null,
): TapeSelection | null {
  const [name, position] = (text ?? '').split('@');
  const ticks = at(position);
  if (ticks === null) return null;
  switch (name) {
    case 'packet':
      return nearest('packet', model.packetStarts, ticks);
    case 'character':
      return nearest('character', model.tape.characters.startTicks, ticks);
    case 'reset':
      return nearest(
        'reset',
        model.tape.resets.map(({ onTicks }) => onTicks),
        ticks,
      );
    default: {
      const own = [...model.findings.keys()].filter((index) => model.findings[index].rule === name);
      const found = nearest(
        'finding',
        own.map((index) => model.findings[index].startTicks),
        ticks,
      );
      return found === null ? null : { kind: 'finding', index: own[found.index] };
    }
  }
}

function nearest(
  kind: TapeSelection['kind'],
  places: ArrayLike<number>,
  ticks: number,
): TapeSelection | null {
  let best = -1;
  for (let i = 0; i < places.length; i++) {
    if (best < 0 || Math.abs(places[i] - ticks) < Math.abs(places[best] - ticks)) best = i;
  }
  return best < 0 ? null : { kind, index: best };
}
