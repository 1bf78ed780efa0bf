import type { Capture } from '#shared/capture/capture';
import { CaptureReader } from '#shared/capture/read-capture';
import { compose } from '#shared/composer/compose';
import type { VoltsLayout } from '#shared/composer/line-voltage';
import type { Script, Step } from '#shared/composer/script';
import { writeCsv } from '#shared/composer/write-csv';
import { writeVcd } from '#shared/composer/write-vcd';
import type { DecodeOptions } from '#shared/decode/decode';
import { decode } from '#shared/decode/decode';
import type { LineMap } from '#shared/line/line-map';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import type { CheckResult, RuleResult } from '#shared/rules/finding';
import type { Rulebook } from '#shared/rules/rulebook';

/** The file a script becomes. */
export type FileKind =
  | { readonly unitNs: 1 | 10 | 100 | 1000 | 10_000 }
  | { readonly samplesHz: number }
  | { readonly samplesHz: number; readonly volts: VoltsLayout };

/** A capture file with what is said about it. */
export interface Recorded {
  readonly script: Script;
  /** Default: a dump with a unit of 1 µs. */
  readonly kind?: FileKind;
  readonly map?: LineMap;
  readonly options?: DecodeOptions;
  /** Limits of a device that Baseline leaves open. */
  readonly limits?: Readonly<Record<string, number>>;
}

function piecesOf(script: Script, kind: FileKind): Generator<string> {
  const composed = compose(script);
  if ('unitNs' in kind) return writeVcd(composed, kind);
  const layout = { sampleRateHz: kind.samplesHz, time: 'us' } as const;
  return 'volts' in kind
    ? writeCsv(composed, { ...layout, rows: 'volts', volts: kind.volts })
    : writeCsv(composed, { ...layout, rows: 'samples' });
}

function withLimits(limits: Readonly<Record<string, number>>): Rulebook {
  return {
    ...BASELINE,
    rules: BASELINE.rules.map((rule) => ({ ...rule, limit: limits[rule.id] ?? rule.limit })),
  };
}

/** The script as the file it becomes, read back. */
export function captureOf({ script, kind }: Recorded): Capture {
  const reader = new CaptureReader();
  const encoder = new TextEncoder();
  for (const piece of piecesOf(script, kind ?? { unitNs: 1000 })) reader.push(encoder.encode(piece));
  return reader.finish();
}

/** Script → file → decode → check, as a user's file would go. */
export function checkRecorded(recorded: Recorded): CheckResult {
  const { map, options, limits } = recorded;
  return check(decode(captureOf(recorded), map, options), withLimits(limits ?? {}));
}

export function rulesOf(recorded: Recorded): ReadonlyMap<string, RuleResult> {
  return new Map(checkRecorded(recorded).rules.map((rule) => [rule.id, rule]));
}

/** One verdict of one rule, and a capture that leads to it. */
export interface VerdictCase extends Recorded {
  readonly rule: string;
  readonly verdict: RuleResult['verdict'];
}

export const wait = (ms: number): Step => ({ do: 'wait', ms });
export const reset = (
  latencyMs: number | null,
  more: Partial<Extract<Step, { do: 'reset' }>> = {},
): Step => ({ do: 'reset', widthMs: 110, latencyMs, ...more });
export const move = (dx: number, dy: number, more: Partial<Extract<Step, { do: 'move' }>> = {}): Step => ({
  do: 'move',
  dx,
  dy,
  ...more,
});
export const circle: Step = { do: 'draw', figure: 'circle', size: 600, packets: 60 };

/** Steps between a rest before the first reset and a rest at the end. */
export function story(steps: readonly Step[], head: Partial<Script> = {}): Script {
  return { name: 'verdict', protocol: 'M', ...head, steps: [wait(150), ...steps, wait(60)] };
}

/** RTS is ON from the begin, so that a first pulse is seen whole. */
export const BEGINS_ON = { start: { rts: true, dtr: true } } as const;

export const healthy = story([reset(11.2), wait(60), circle]);
/** A reset and too few packets for anything that needs a hundred characters. */
export const short = story([reset(11), wait(60), move(5, 5)]);
/** Three resets without an answer, and nothing else. */
export const silent = story([reset(null), wait(60)]);
/** Packets, but RTS never changes. */
export const withoutReset = story([circle], BEGINS_ON);
