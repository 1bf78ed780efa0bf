import type { Ticks } from '../time/ticks';
import type { PnpString } from './pnp-string';

/** A change of RTS or DTR between known levels. */
export interface ControlEvent {
  readonly ticks: Ticks;
  readonly line: 'rts' | 'dtr';
  readonly isOn: boolean;
}

/** RTS going from OFF to ON, and what the device answered. */
export interface Reset {
  readonly onTicks: Ticks;
  /** When RTS went (or was first seen) OFF before; tick 0 where the file begins so. */
  readonly offTicks: Ticks;
  /** The OFF level was already there when the file began or became known: the pulse may have been longer. */
  readonly isPulseStartSeen: boolean;
  /** End of the reply window: 200 ms after RTS ON or the next RTS OFF or the end of the record, whichever is first. */
  readonly windowEndTicks: Ticks;
  /** The record ended, or the data line was unknown, before the window closed without a reply: nothing can be said. */
  readonly isWindowCut: boolean;
  /** Leading edge of the first start element in the window. */
  readonly replyTicks: Ticks | null;
  /** Index of the first character in the window, −1 if none. */
  readonly firstCharacter: number;
  /** Other ID, `M`, `M3`, … without the PnP string; null without a recognisable one. */
  readonly identity: string | null;
  /** Indexes of the characters that make up the identification (PnP string included), ascending. */
  readonly identification: readonly number[];
  /** End of the last identification character; null without identification. */
  readonly identificationEndTicks: Ticks | null;
  /** Indexes of characters between RTS ON and the end of the identification that are no part of it. */
  readonly strays: readonly number[];
  readonly pnp: PnpString | null;
  /** DTR and RTS were both OFF for ≥ 100 ms before; null where DTR (or the time before) is unknown. */
  readonly isPowerUp: boolean | null;
}
