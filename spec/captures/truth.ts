import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** What an independent simulator says a capture carries; see README.md in this folder. */
export interface Truth {
  readonly id: string;
  readonly file: string;
  readonly lines: Record<string, string | null>;
  readonly lines_aliases?: Record<string, readonly string[]>;
  readonly bitRate: number;
  readonly bitRateNominal: number;
  readonly framing: string;
  readonly protocol: string;
  readonly timescale_s?: number;
  readonly time_tolerance_s?: number;
  readonly polarity: 'line' | 'logic';
  readonly characters: readonly (readonly [number, number])[];
  readonly framing_errors: readonly unknown[];
  readonly optional_characters: readonly (readonly [number, number])[];
  readonly resets: readonly {
    t_assert: number;
    t_reply: number | null;
    identity: string | null;
    t_deassert_before: number | null;
  }[];
  readonly packets: readonly {
    t: number;
    dx: number;
    dy: number;
    wheel: number | null;
    buttons: readonly string[];
    halves?: readonly (readonly number[])[];
  }[];
  readonly pnp?: Record<string, unknown>;
}

const FOLDER = fileURLToPath(new URL('.', import.meta.url));

/** Captures with their truth, by file name. */
export function loadTruths(): readonly { readonly path: string; readonly truth: Truth }[] {
  return readdirSync(FOLDER)
    .filter((name) => name.endsWith('.truth.json'))
    .sort()
    .map((name) => {
      const truth = JSON.parse(readFileSync(FOLDER + name, 'utf8')) as Truth;
      return { path: FOLDER + truth.file, truth };
    });
}
