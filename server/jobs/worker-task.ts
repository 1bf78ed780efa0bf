import type { MessagePort } from 'node:worker_threads';
import type { DecodeOptionsDocument, DecodeRequest } from '#shared/contract/http/decodes';
import type { JobProblem } from '#shared/contract/http/jobs';
import type { LinesView, PreviewView } from '#shared/contract/http/mapping';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import type { LineMapDocument } from '#shared/contract/line-map-document';
import type { CheckDetail, CheckFigures } from '../entities/check';
import type { DecodeDetail, DecodeFigures } from '../entities/decode';

/** A stored capture file. */
export interface SourceFile {
  readonly path: string;
  /** Name it was uploaded with. */
  readonly name: string;
  readonly sha256: string;
  readonly size: number;
}

interface WithSource {
  readonly file: SourceFile;
  /** Bytes of array buffers the task may hold. */
  readonly memoryBudget: number;
  /** Takes the percent done. */
  readonly port?: MessagePort;
}

/** What a worker is asked for. `draft`: folder for the products, not there yet. */
export type WorkerTask = WithSource &
  (
    | {
        readonly kind: 'decode' | 'check';
        readonly request: DecodeRequest;
        readonly rulebook: RulebookKey;
        readonly draft: string;
      }
    | { readonly kind: 'lines'; readonly sampleRateHz: number | undefined }
    | {
        readonly kind: 'preview';
        readonly map: LineMapDocument;
        readonly options: DecodeOptionsDocument;
      }
  );

export interface CheckOutcome {
  readonly rulebook: { readonly key: RulebookKey; readonly name: string; readonly version: number };
  readonly verdict: 'pass' | 'fail' | 'inconclusive';
  readonly figures: CheckFigures;
  readonly detail: CheckDetail;
}

export interface DecodeOutcome {
  readonly figures: DecodeFigures;
  readonly detail: DecodeDetail;
  readonly toolVersion: string;
}

/** `problem`: what is wrong with the file or the map; a result of the worker, not a crash of it. */
export type WorkerAnswer =
  | { readonly kind: 'judged'; readonly decode: DecodeOutcome; readonly check: CheckOutcome }
  | {
      readonly kind: 'lines';
      readonly lines: Omit<LinesView, 'presets'>;
      /** Names and aliases of all channels. */
      readonly names: readonly string[];
    }
  | { readonly kind: 'preview'; readonly preview: PreviewView }
  | { readonly kind: 'problem'; readonly problem: JobProblem };
