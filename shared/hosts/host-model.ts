/** How a host resets a device: which lines it takes down, and for how long. */
export interface HostReset {
  /** `rts`: DTR stays ON. `both`: DTR and RTS go OFF together, which takes the supply away. */
  readonly lines: 'rts' | 'both';
  /** How long RTS is OFF, seconds. */
  readonly leastLowS: number;
  readonly mostLowS: number;
}

/** What a host takes for an answer. */
export type Acceptance =
  /** A PnP string; `form` where only one is read, `needsEnd` where a broken off one is refused. */
  | { readonly kind: 'pnp'; readonly form?: 6 | 7; readonly needsEnd?: boolean; readonly as: string }
  /** The first characters of the reply. */
  | { readonly kind: 'begins'; readonly text: string; readonly as: string }
  /** Characters anywhere, but not among the first `from` ones. */
  | { readonly kind: 'holds'; readonly text: string; readonly from: number; readonly as: string };

/** How a host looks for a device: nothing but data, so that a team can add its own. */
export interface HostModel {
  /** `A`, `B`, …; shown as `host A`. */
  readonly id: string;
  readonly description: string;
  /** Its resets in order; empty where it does not look for an answer. */
  readonly resets: readonly HostReset[];
  /** For the first character to be complete, from RTS ON, seconds. */
  readonly firstWaitS: number;
  /** Between two characters of the reply, seconds. */
  readonly gapS: number;
  /** For the whole reply from its first character; null without a limit. */
  readonly totalS: number | null;
  readonly mostCharacters: number;
  /** In the order in which the host asks. */
  readonly accepts: readonly Acceptance[];
}
