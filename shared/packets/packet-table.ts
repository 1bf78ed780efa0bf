/** Bits of `PacketTable.buttons`. */
export const LEFT = 1;
export const MIDDLE = 2;
export const RIGHT = 4;
export const FOURTH = 8;

export const BUTTON_NAMES = ['left', 'middle', 'right', 'fourth'] as const;
export type ButtonName = (typeof BUTTON_NAMES)[number];

/** Protocols by what the device sends or by their frame. */
export const PROTOCOLS = ['M', 'M3', 'MZ', 'M-null', 'five-byte', 'three-byte', 'MM'] as const;
export type Protocol = (typeof PROTOCOLS)[number];

/** Flags of `PacketTable.flags`. */
/** Middle released by a three-byte packet while it was latched (M3). */
export const IMPLICIT_RELEASE = 1;
/** Middle released by an explicit fourth character (M3). */
export const EXPLICIT_RELEASE = 2;
/** A fourth character was sent (M3). */
export const HAS_FOURTH = 4;
/** Says nothing: no movement, no wheel, no change of a button. */
export const IS_IDLE = 8;
/** Reserved bits are set in one of its characters. */
export const HAS_RESERVED_BITS = 16;

/** The whole, undamaged packets in columns, in order of time. */
export interface PacketTable {
  readonly count: number;
  /** Index of the first character. Packets hold consecutive characters. */
  readonly firstCharacter: Int32Array;
  readonly characterCount: Uint8Array;
  /** Positive right. */
  readonly dx: Int16Array;
  /** Positive down, towards the user, whatever the wire's sign. */
  readonly dy: Int16Array;
  /** Signed wire value, positive towards the user; meaningful only if `hasWheel`. */
  readonly wheel: Int8Array;
  readonly buttons: Uint8Array;
  readonly flags: Uint8Array;
  /** The protocol has a wheel field. */
  readonly hasWheel: boolean;
  /** First half of five-byte packets (positive down); undefined for other protocols. The second half is the difference to dx, dy. */
  readonly firstStepDx?: Int16Array;
  readonly firstStepDy?: Int16Array;
}

/** A place where characters did not make a whole packet. */
export interface PacketIncident {
  readonly kind:
    /** Whole, well-framed characters that belong to no packet. */
    | 'orphan'
    /** A packet broken off: next header early, RTS OFF, damaged character, gap of the recording. */
    | 'cut'
    /** A fourth character with an undefined value. */
    | 'bad-fourth';
  readonly firstCharacter: number;
  readonly characterCount: number;
  /** In plain words, without numbers of characters: `the next header came after 2 of 3 characters`. */
  readonly reason: string;
  /** Outside the first and last packet time of the capture: only those count for PKT-1. */
  readonly isAtEdge: boolean;
}
