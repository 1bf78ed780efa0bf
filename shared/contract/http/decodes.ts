import * as z from 'zod';
import { LINE_ROLES } from '../../line/line-map';
import { PROTOCOLS } from '../../packets/packet-table';
import { lineMapSchema } from '../line-map-document';
import { personRefSchema } from './accounts';
import { captureNumberSchema } from './capture-number';
import { checkSummarySchema } from './checks';
import { jobSchema } from './jobs';
import { problemSchema } from './problem';
import { rulebookKeySchema } from './rulebooks';

export const framingChoiceSchema = z.strictObject({
  dataBits: z.union([z.literal(7), z.literal(8)]),
  parity: z.enum(['none', 'odd', 'even', 'mark']),
  stopBits: z.union([z.literal(1), z.literal(2)]),
});

/** What a person states instead of leaving it to be found. */
export const decodeOptionsSchema = z.strictObject({
  protocol: z.enum(PROTOCOLS).optional(),
  bitRate: z.number().positive().max(1e6).optional(),
  framing: framingChoiceSchema.optional(),
  /** Of files without times of their own. */
  sampleRateHz: z.number().positive().max(1e12).optional(),
});
export type DecodeOptionsDocument = z.infer<typeof decodeOptionsSchema>;

export const newDecodeSchema = z.strictObject({
  map: lineMapSchema,
  options: decodeOptionsSchema.default({}),
  rulebook: rulebookKeySchema.default('baseline'),
});
/** As it is sent: what has a default may be left out. */
export type NewDecode = z.input<typeof newDecodeSchema>;
/** As it is kept. */
export type DecodeRequest = z.output<typeof newDecodeSchema>;

/** One map for many captures. */
export const batchDecodeSchema = newDecodeSchema.extend({
  numbers: z.array(captureNumberSchema).min(1).max(200),
});
export type BatchDecode = z.input<typeof batchDecodeSchema>;

/** `refused`: captures that are not there. A map that does not fit a file shows as its failed job. */
export const batchAnswerSchema = z.object({
  jobs: z.array(jobSchema),
  refused: z.array(z.object({ number: z.string(), problem: problemSchema })),
});
export type BatchAnswer = z.infer<typeof batchAnswerSchema>;

export const resolvedLineSchema = z.object({
  role: z.enum(LINE_ROLES),
  channel: z.string(),
  polarity: z.enum(['line', 'logic']),
  thresholds: z.object({ high: z.number(), low: z.number() }).nullable(),
});
export type ResolvedLineView = z.infer<typeof resolvedLineSchema>;

export const detectionSchema = z.object({
  subject: z.enum(['line', 'polarity', 'bit-rate', 'framing', 'protocol']),
  role: z.enum(LINE_ROLES).nullable(),
  chosen: z.string(),
  /** In plain words; `stated` where the person said so. */
  reason: z.string(),
  runnerUp: z.string().nullable(),
});
export type DetectionView = z.infer<typeof detectionSchema>;

export const defectSchema = z.object({
  code: z.string(),
  message: z.string(),
  line: z.number().nullable(),
  column: z.number().nullable(),
  byte: z.number().nullable(),
});
export type DefectView = z.infer<typeof defectSchema>;

/** Columns of `density`. */
export const DENSITY_COLUMNS = 200;

/** A decode at a glance, enough for a row of a list with its tiny tape. */
export const decodeSummarySchema = z.object({
  id: z.number().int(),
  /** 1, 2, … within its capture; this number stands in the address bar. */
  ordinal: z.number().int(),
  protocol: z.string().nullable(),
  /** Such as `7N1`. */
  framing: z.string().nullable(),
  /** Measured, bit/s. */
  bitRate: z.number().nullable(),
  nominalBitRate: z.number().nullable(),
  durationS: z.number(),
  resets: z.number().int(),
  characters: z.number().int(),
  packets: z.number().int(),
  defects: z.number().int(),
  /** Share of the data line in use, 0 to 1, in 200 even columns over the whole capture. */
  density: z.array(z.number()),
  /** Violations and inconclusive findings of the latest check: position 0 to 1. */
  marks: z.array(z.object({ at: z.number(), verdict: z.enum(['violation', 'inconclusive']) })),
  metrics: z.record(z.string(), z.number().nullable()),
  toolVersion: z.string(),
  createdAt: z.string(),
  /** The latest. */
  check: checkSummarySchema.nullable(),
});
export type DecodeSummary = z.infer<typeof decodeSummarySchema>;

/** A decode with what it was made from and all its checks, the latest first. */
export const decodeSchema = decodeSummarySchema.extend({
  capture: z.string(),
  map: lineMapSchema,
  options: decodeOptionsSchema,
  lines: z.array(resolvedLineSchema),
  detections: z.array(detectionSchema),
  defectList: z.array(defectSchema),
  madeBy: personRefSchema,
  checks: z.array(checkSummarySchema),
});
export type DecodeView = z.infer<typeof decodeSchema>;

/** `check`: which check the findings in a result or a log come from; the latest if left out. */
export const productQuerySchema = z.object({ check: z.coerce.number().int().positive().optional() });
export type ProductQuery = z.input<typeof productQuerySchema>;
