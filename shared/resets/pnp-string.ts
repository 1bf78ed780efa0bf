/** A field of the identification string: decoded text and where its characters stand. */
export interface PnpField {
  readonly text: string;
  /** Offset of the first byte within `PnpString.raw`, and their number. */
  readonly offset: number;
  readonly length: number;
}

/** A deviation from the grammar, in words. `rule` names the check it belongs to. */
export interface PnpDeviation {
  readonly rule: 'IDN-1' | 'IDN-2' | 'IDN-3' | 'IDN-4' | 'IDN-5' | 'IDN-8';
  readonly message: string;
  /** Offset within `raw`, or null. */
  readonly offset: number | null;
}

/**
 * A Plug and Play External COM identification string as sent.
 * Source: Plug and Play External COM Device Specification 1.00 (28 Feb 1995), section 3.
 */
export interface PnpString {
  /** Bytes from Begin PnP to End PnP (or to where it broke off), as sent. */
  readonly raw: readonly number[];
  /** 6: text is sent less 20h, Begin 08h, End 09h; 7: Begin 28h, End 29h. */
  readonly form: 6 | 7;
  readonly isComplete: boolean;
  /** Revision × 100: 100 for 1.00; null where missing. */
  readonly revision: number | null;
  readonly eisaId: PnpField | null;
  readonly productId: PnpField | null;
  readonly serialNumber: PnpField | null;
  readonly className: PnpField | null;
  /** Compatible ids, separated by commas. */
  readonly driverId: PnpField | null;
  readonly userName: PnpField | null;
  readonly checksumSent: string | null;
  /** What the bytes add up to, two upper-case hexadecimal digits; null without a checksum field or End. */
  readonly checksumComputed: string | null;
  readonly deviations: readonly PnpDeviation[];
}
