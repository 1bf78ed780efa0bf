import type { LineRole, Polarity } from '../line/line-map';
import type { ButtonName, Protocol } from '../packets/packet-table';

/** What is wrong with a script: `step` is the index of the step, undefined for the head. */
export class ScriptError extends Error {
  override readonly name = 'ScriptError';
  constructor(
    message: string,
    readonly step?: number,
  ) {
    super(step === undefined ? message : `step ${step + 1}: ${message}`);
  }
}

export type FramingName = '7N1' | '7N2' | '8N1' | '8O1';

/** Fields of a PnP identification string. */
export interface PnpScript {
  readonly form?: 6 | 7;
  /** × 100; 100 is 1.00. */
  readonly revision?: number;
  readonly eisaId: string;
  readonly productId: string;
  readonly serialNumber?: string;
  readonly className?: string;
  readonly driverId?: string;
  readonly userName?: string;
  /** Sent instead of the right checksum. */
  readonly checksum?: string;
  /** Sent instead of the two characters of the revision. */
  readonly revisionBytes?: readonly [number, number];
  /** Sent instead of the End PnP of the form. */
  readonly end?: number;
}

/** What goes wrong with the next packet. `character` counts from 0 within it. */
export type PacketFault =
  | { readonly kind: 'lost'; readonly character: number }
  | { readonly kind: 'stop'; readonly character: number }
  | { readonly kind: 'parity'; readonly character: number }
  /** Bits set in a character that should not be. */
  | { readonly kind: 'bits'; readonly character: number; readonly mask: number };

export type Step =
  | { readonly do: 'wait'; readonly ms: number }
  | {
      readonly do: 'set';
      readonly line: 'rts' | 'dtr' | 'txd' | 'dsr' | 'contact' | 'supply' | 'ready';
      /** Of TXD: at mark. */
      readonly on: boolean;
    }
  /** RTS OFF (if it is ON), after `widthMs` ON, the reply after `latencyMs`; null: silent. Ends 5 ms after the reply. */
  | {
      readonly do: 'reset';
      readonly widthMs: number;
      readonly latencyMs: number | null;
      /** Default: what the protocol sends. */
      readonly identity?: string;
      /** Pause between the characters of the identity, ms. */
      readonly gapMs?: number;
      readonly pnp?: PnpScript;
      /** Pause before each character of the PnP string, ms. */
      readonly pnpGapMs?: number;
      /** Sent before the identification. */
      readonly strays?: readonly number[];
      /** DTR falls and rises with RTS. */
      readonly withDtr?: boolean;
    }
  | {
      readonly do: 'move';
      readonly dx: number;
      readonly dy: number;
      readonly wheel?: number;
      /** Pause before each character but the first, ms. */
      readonly gapMs?: number;
      readonly fault?: PacketFault;
    }
  /** With `contactMs` the contact closes or opens now, and the packet comes that much later. */
  | {
      readonly do: 'press' | 'release';
      readonly button: ButtonName;
      readonly contactMs?: number;
      readonly fault?: PacketFault;
    }
  /** A figure drawn in packets back to back; `pauseMs` between packets. */
  | {
      readonly do: 'draw';
      readonly figure: 'line' | 'circle' | 'square' | 'spiral' | 'eight';
      /** Counts: length of a line, side of a square, diameter of the others. */
      readonly size: number;
      readonly packets: number;
      /** Of a line, degrees, 0 right, 90 down. */
      readonly angle?: number;
      readonly pauseMs?: number;
    }
  /** From here on packets have the format of another protocol of the same frame, without a word. */
  | { readonly do: 'protocol'; readonly protocol: Protocol }
  | { readonly do: 'idle-packet' }
  | { readonly do: 'characters'; readonly values: readonly number[] }
  /** Bytes from the host on TXD. */
  | { readonly do: 'host'; readonly values: readonly number[] }
  /** A pulse of the other level, by default on the data line, `afterMs` from here; time does not move on. */
  | {
      readonly do: 'glitch';
      readonly widthUs: number;
      readonly afterMs?: number;
      readonly line?: 'data' | 'rts' | 'dtr' | 'txd' | 'dsr' | 'contact';
    }
  /** Captures of volts: the line is lower by so much for a while, `afterMs` from here; time does not move on. */
  | {
      readonly do: 'sag';
      readonly line: LineRole;
      readonly volts: number;
      readonly ms: number;
      readonly afterMs?: number;
    }
  | { readonly do: 'break'; readonly ms: number }
  /** A line whose level is not known for a while from here; time does not move on. */
  | { readonly do: 'unknown'; readonly line: 'data' | 'rts' | 'dtr'; readonly ms: number };

/** A capture as a story. Everything has a default that makes a healthy device. */
export interface Script {
  readonly name: string;
  readonly seed?: number;
  readonly protocol: Protocol;
  /** How an M3 device tells that its middle button went up. */
  readonly release?: 'explicit' | 'implicit';
  readonly framing?: FramingName;
  readonly bitRate?: number;
  /** + fast. */
  readonly rateErrorPercent?: number;
  /** Largest displacement of a transition, % of a bit, evenly spread. */
  readonly jitterPercent?: number;
  /** Spaces longer (+) by this much of a bit. */
  readonly biasPercent?: number;
  readonly polarity?: Polarity;
  /** Lines recorded; default data, RTS, DTR. */
  readonly lines?: readonly LineRole[];
  /** Levels at the begin; default RTS OFF, DTR ON. */
  readonly start?: { readonly rts?: boolean; readonly dtr?: boolean };
  /** DSR follows DTR, as the device couples them; default true. */
  readonly dsrFollows?: boolean;
  readonly steps: readonly Step[];
}
