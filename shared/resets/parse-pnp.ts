import type { PnpDeviation, PnpField, PnpString } from './pnp-string';

export const BEGIN_7 = 0x28;
export const END_7 = 0x29;
export const BEGIN_6 = 0x08;
export const END_6 = 0x09;
const EXTEND = '\\';
/** Lengths of the optional fields. Source: Plug and Play External COM Device Specification 1.00, section 3. */
const OPTIONAL_FIELDS = [
  { key: 'serialNumber', name: 'serial number', least: 8, most: 8 },
  { key: 'className', name: 'class name', least: 0, most: 32 },
  { key: 'driverId', name: 'driver id', least: 0, most: 40 },
  { key: 'userName', name: 'user name', least: 0, most: 40 },
] as const;
/** Begin, revision, EISA id, product id. */
const FIXED_LENGTH = 1 + 2 + 3 + 4;

/** Whether the byte opens an identification string. */
export function isBegin(byte: number): boolean {
  return byte === BEGIN_6 || byte === BEGIN_7;
}

/** The End PnP that belongs to a Begin PnP. */
export function endFor(begin: number): number {
  return begin === BEGIN_6 ? END_6 : END_7;
}

/**
 * Splits an identification string into its fields and lists every deviation from the grammar. Takes any bytes that begin with
 * Begin PnP; never throws.
 * Source: Plug and Play External COM Device Specification 1.00 (28 Feb 1995), 3.1–3.3; the published corrections for the
 * checksum (modulo 256).
 */
export function parsePnp(raw: readonly number[]): PnpString {
  const form: 6 | 7 = raw[0] === BEGIN_6 ? 6 : 7;
  const offset = form === 6 ? 0x20 : 0;
  const isComplete = raw.length > 3 && raw.at(-1) === endFor(raw[0]);
  const bodyEnd = isComplete ? raw.length - 1 : raw.length;
  const deviations: PnpDeviation[] = [];
  const deviate = (rule: PnpDeviation['rule'], message: string, at: number | null): void => {
    deviations.push({ rule, message, offset: at });
  };
  const field = (from: number, to: number): PnpField | null => {
    const end = Math.min(to, bodyEnd);
    if (end <= from) return null;
    const text = String.fromCharCode(...raw.slice(from, end).map((byte) => byte + offset));
    return { text, offset: from, length: end - from };
  };

  if (!isComplete)
    deviate('IDN-1', 'the string does not end with the End PnP that matches its Begin', raw.length);
  reportIllegalBytes(raw, form, bodyEnd, deviate);
  const revision = raw.length >= 3 ? ((raw[1] & 0x3f) << 6) | (raw[2] & 0x3f) : null;
  reportRevision(raw, revision, deviate);
  const eisaId = field(3, 6);
  const productId = field(6, FIXED_LENGTH);
  if (!/^[A-Z]{3}$/.test(eisaId?.text ?? '')) deviate('IDN-3', 'the maker is not three letters A to Z', 3);
  if (!/^[0-9A-F]{4}$/.test(productId?.text ?? '')) {
    deviate('IDN-3', 'the product is not four hexadecimal digits', 6);
  }

  const optional = splitOptional(raw, offset, bodyEnd, deviate, field);
  const sum = optional.checksumAt === null || !isComplete ? null : checksumOf(raw, optional.checksumAt);
  if (sum !== null && optional.checksumSent !== sum) {
    deviate(
      'IDN-2',
      `the checksum sent is ${printable(optional.checksumSent ?? '')}, the bytes add up to ${sum}`,
      optional.checksumAt,
    );
  }
  return {
    raw: [...raw],
    form,
    isComplete,
    revision,
    eisaId,
    productId,
    serialNumber: optional.serialNumber,
    className: optional.className,
    driverId: optional.driverId,
    userName: optional.userName,
    checksumSent: optional.checksumSent,
    checksumComputed: sum,
    deviations,
  };
}

type Deviate = (rule: PnpDeviation['rule'], message: string, at: number | null) => void;

function reportIllegalBytes(raw: readonly number[], form: 6 | 7, bodyEnd: number, deviate: Deviate): void {
  for (let i = 1; i < raw.length; i++) {
    if (form === 6 && (raw[i] & 0x40) !== 0) {
      deviate('IDN-8', `character ${hex(raw[i])} has bit 6 set inside the 6-bit form`, i);
      return;
    }
    const isText = i >= 3 && i < bodyEnd;
    if (isText && form === 7 && (raw[i] < 0x20 || raw[i] > 0x7e)) {
      deviate('IDN-1', `character ${hex(raw[i])} is no text`, i);
      return;
    }
  }
}

function reportRevision(raw: readonly number[], revision: number | null, deviate: Deviate): void {
  if (revision === null) {
    deviate('IDN-4', 'the revision is missing', 1);
  } else if (raw[1] > 0x3f || raw[2] > 0x3f) {
    deviate('IDN-4', 'a revision character is above 3F', raw[1] > 0x3f ? 1 : 2);
  } else if (revision !== 100) {
    deviate('IDN-4', `the revision is ${(revision / 100).toFixed(2)}, not 1.00`, 1);
  }
}

interface OptionalFields {
  serialNumber: PnpField | null;
  className: PnpField | null;
  driverId: PnpField | null;
  userName: PnpField | null;
  checksumSent: string | null;
  checksumAt: number | null;
}

function splitOptional(
  raw: readonly number[],
  offset: number,
  bodyEnd: number,
  deviate: Deviate,
  field: (from: number, to: number) => PnpField | null,
): OptionalFields {
  const result: OptionalFields = {
    serialNumber: null,
    className: null,
    driverId: null,
    userName: null,
    checksumSent: null,
    checksumAt: null,
  };
  if (bodyEnd <= FIXED_LENGTH) return result;
  const at = (i: number): string => String.fromCharCode(raw[i] + offset);
  if (at(FIXED_LENGTH) !== EXTEND) {
    deviate('IDN-5', 'what follows the product does not begin with the separator', FIXED_LENGTH);
    return result;
  }
  // With an optional field present the two characters before End are the checksum.
  const isEnded = bodyEnd < raw.length;
  const checksumAt = isEnded && bodyEnd - 2 > FIXED_LENGTH ? bodyEnd - 2 : null;
  const textEnd = checksumAt ?? bodyEnd;
  const starts: number[] = [];
  for (let i = FIXED_LENGTH; i < textEnd; i++) if (at(i) === EXTEND) starts.push(i + 1);
  if (starts.length > OPTIONAL_FIELDS.length)
    deviate('IDN-5', 'there are more than four optional fields', starts[4]);
  OPTIONAL_FIELDS.forEach((rule, index) => {
    if (index >= starts.length) return;
    const end = index + 1 < starts.length ? starts[index + 1] - 1 : textEnd;
    const value = field(starts[index], end);
    result[rule.key] = value;
    const length = value?.length ?? 0;
    if (length > 0 && (length < rule.least || length > rule.most)) {
      deviate('IDN-5', `the ${rule.name} has ${length} characters`, starts[index]);
    }
  });
  if (checksumAt === null) {
    if (isEnded) deviate('IDN-5', 'the checksum is missing', bodyEnd);
    return result;
  }
  result.checksumAt = checksumAt;
  result.checksumSent = field(checksumAt, bodyEnd)?.text ?? null;
  return result;
}

/** Sum modulo 256 of all bytes as sent, without the two checksum characters, as two upper-case hexadecimal digits. */
function checksumOf(raw: readonly number[], checksumAt: number): string {
  let sum = 0;
  raw.forEach((byte, i) => {
    if (i !== checksumAt && i !== checksumAt + 1) sum += byte;
  });
  return hex(sum & 0xff);
}

function hex(byte: number): string {
  return byte.toString(16).toUpperCase().padStart(2, '0');
}

function printable(text: string): string {
  return text.replace(/[^\x20-\x7e]/g, '?');
}
