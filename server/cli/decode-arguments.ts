import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import type { ParseArgsConfig } from 'node:util';
import type { $ZodIssue } from 'zod/v4/core';
import { lineMapSchema } from '#shared/contract/line-map-document';
import { rulebookSchema, toRulebook } from '#shared/contract/rulebook-document';
import type { DecodeOptions } from '#shared/decode/decode';
import type { LineAssignment, LineMap, LineRole, Polarity } from '#shared/line/line-map';
import { PROTOCOLS } from '#shared/packets/packet-table';
import type { Protocol } from '#shared/packets/packet-table';
import { BASELINE } from '#shared/rules/baseline';
import { HOST_LIMITS } from '#shared/rules/host-limits';
import type { Rulebook } from '#shared/rules/rulebook';
import { systemReason } from './read-file';
import { UsageError } from './usage-error';

export const FORMATS = ['json', 'log', 'junit', 'summary', 'packets'] as const;
export type OutputFormat = (typeof FORMATS)[number];

export interface DecodeArguments {
  readonly files: readonly string[];
  readonly map: LineMap;
  readonly options: DecodeOptions;
  readonly sampleRateHz: number | undefined;
  readonly rulebook: Rulebook;
  readonly format: OutputFormat;
  readonly isStrict: boolean;
}

const ROLE_OPTIONS = ['data', 'rts', 'dtr', 'txd', 'dsr', 'supply', 'contact', 'ready'] as const;

const OPTIONS = {
  ...(Object.fromEntries(ROLE_OPTIONS.map((role) => [role, { type: 'string' }])) as Record<
    (typeof ROLE_OPTIONS)[number],
    { type: 'string' }
  >),
  map: { type: 'string' },
  polarity: { type: 'string' },
  resolution: { type: 'string' },
  'sample-rate': { type: 'string' },
  protocol: { type: 'string' },
  'bit-rate': { type: 'string' },
  framing: { type: 'string' },
  rulebook: { type: 'string' },
  format: { type: 'string' },
  strict: { type: 'boolean' },
} satisfies ParseArgsConfig['options'];

/** @throws UsageError that names the argument and what it takes */
export function parseDecodeArguments(args: readonly string[]): DecodeArguments {
  const { values, positionals } = parse(args);
  if (positionals.length === 0) throw new UsageError('decode: name at least one capture file');
  const stated = values.map === undefined ? {} : readDocument(values.map, lineMapSchema);
  const lines: Partial<Record<LineRole, LineAssignment | null>> = { ...stated.lines };
  for (const role of ROLE_OPTIONS) {
    const channel = values[role];
    if (channel !== undefined) lines[role] = { channel, polarity: lines[role]?.polarity ?? 'auto' };
  }
  const resolution = values.resolution === undefined ? undefined : positive('resolution', values.resolution);
  return {
    files: positionals,
    map: { ...stated, lines, ...(resolution === undefined ? {} : { resolutionS: resolution }) },
    options: {
      polarity: choice('polarity', values.polarity, ['line', 'logic'] as const) as Polarity | undefined,
      protocol: choice('protocol', values.protocol, PROTOCOLS) as Protocol | undefined,
      bitRate: automatic(values['bit-rate']) ? undefined : positive('bit-rate', values['bit-rate']!),
      framing: automatic(values.framing) ? undefined : parseFraming(values.framing!),
    },
    sampleRateHz:
      values['sample-rate'] === undefined ? undefined : positive('sample-rate', values['sample-rate']),
    rulebook: readRulebook(values.rulebook),
    format: choice('format', values.format, FORMATS) ?? 'json',
    isStrict: values.strict === true,
  };
}

function parse(args: readonly string[]) {
  try {
    return parseArgs({ args: [...args], options: OPTIONS, allowPositionals: true, strict: true });
  } catch (error) {
    // parseArgs throws TypeError with a message made for people; only its first sentence fits one line.
    if (error instanceof TypeError)
      throw new UsageError(`decode: ${error.message.split('. ')[0].split('\n')[0]}`);
    throw error;
  }
}

function automatic(value: string | undefined): boolean {
  return value === undefined || value === 'auto';
}

function positive(name: string, text: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value) || value <= 0) {
    throw new UsageError(`decode: --${name} takes a number above 0, not "${text}"`);
  }
  return value;
}

function choice<T extends string>(
  name: string,
  value: string | undefined,
  allowed: readonly T[],
): T | undefined {
  if (automatic(value)) return undefined;
  const found = allowed.find((item) => item.toLowerCase() === value!.toLowerCase());
  if (found === undefined)
    throw new UsageError(`decode: --${name} takes ${allowed.join(', ')}, not "${value}"`);
  return found;
}

function parseFraming(text: string): DecodeOptions['framing'] {
  const match = /^([78])([NOEM])([12])$/i.exec(text);
  if (match === null)
    throw new UsageError(`decode: --framing takes auto, 7N1, 7N2, 8N1, 8O1 and the like, not "${text}"`);
  const parity = { N: 'none', O: 'odd', E: 'even', M: 'mark' }[match[2].toUpperCase()] as
    'none' | 'odd' | 'even' | 'mark';
  return { dataBits: Number(match[1]) as 7 | 8, parity, stopBits: Number(match[3]) as 1 | 2 };
}

function readRulebook(value: string | undefined): Rulebook {
  if (value === undefined || value === 'baseline') return BASELINE;
  if (value === 'host-limits') return HOST_LIMITS;
  return toRulebook(readDocument(value, rulebookSchema));
}

interface DocumentSchema<T> {
  safeParse(
    value: unknown,
  ): { success: true; data: T } | { success: false; error: { issues: readonly $ZodIssue[] } };
}

function readDocument<T>(path: string, schema: DocumentSchema<T>): T {
  let text: string;
  try {
    text = readFileSync(path, 'utf8');
  } catch (error) {
    const reason = systemReason(error);
    if (reason === undefined) throw error;
    throw new UsageError(`${path}: ${reason}`);
  }
  const parsed = schema.safeParse(parseJson(path, text));
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0];
  throw new UsageError(
    `${path}: ${issue.path.length === 0 ? '' : `at ${issue.path.join('.')}: `}${issue.message}`,
  );
}

function parseJson(path: string, text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    // JSON.parse has no other way to say where; its message holds the position.
    const position = Number(/position (\d+)/.exec(String(error))?.[1] ?? 0);
    const before = text.slice(0, position).split('\n');
    throw new UsageError(
      `${path}: line ${before.length}, column ${before[before.length - 1].length + 1}: this is no JSON`,
    );
  }
}
