/**
 * A measured value with its uncertainty U: the true value lies in [value − uncertainty, value + uncertainty].
 * `bound`: a worst-case limit; `k2`: an expanded uncertainty with coverage factor 2.
 */
export interface Measurement {
  readonly value: number;
  readonly uncertainty: number;
  readonly kind: UncertaintyKind;
  readonly unit: string;
}

export type UncertaintyKind = 'bound' | 'k2';
