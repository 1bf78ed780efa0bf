import type { DecodeSummary, DecodeView } from '#shared/contract/http/decodes';
import type { Check } from '../entities/check';
import type { Decode } from '../entities/decode';
import { toPersonRef } from './account-view';
import { numberOf } from './capture-number';
import { toCheckSummary } from './check-view';

/** `latest`: the latest check of the decode. */
export function toDecodeSummary(decode: Decode, latest: Check | undefined): DecodeSummary {
  return {
    ...decode.figures,
    id: decode.id,
    ordinal: decode.ordinal,
    marks: latest?.figures.marks ?? [],
    toolVersion: decode.toolVersion,
    createdAt: new Date(decode.createdAt).toISOString(),
    check: latest === undefined ? null : toCheckSummary(latest),
  };
}

/** `decode` with its detail and its account; `checks`: the latest first. */
export function toDecodeView(decode: Decode, checks: readonly Check[]): DecodeView {
  return {
    ...toDecodeSummary(decode, checks[0]),
    ...decode.detail,
    capture: numberOf(decode.captureId),
    map: decode.request.map,
    options: decode.request.options,
    madeBy: toPersonRef(decode.account),
    checks: checks.map(toCheckSummary),
  };
}
