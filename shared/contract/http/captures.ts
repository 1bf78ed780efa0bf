import * as z from 'zod';
import { personRefSchema } from './accounts';
import { decodeSummarySchema } from './decodes';
import { jobSchema } from './jobs';
import { overallVerdictSchema } from './rulebooks';

const text = (most: number) => z.string().trim().max(most);

/** What an auditor asks of a capture. */
export const aboutCaptureSchema = z.strictObject({
  subject: text(200).optional(),
  unitSerial: text(100).optional(),
  instrument: text(200).optional(),
  /** YYYY-MM-DD. */
  calibrationDue: z.iso.date().nullable().optional(),
  probe: text(200).optional(),
  probedEnd: z.enum(['receiver', 'driver', 'open-circuit']).nullable().optional(),
  threshold: text(200).optional(),
  hostPort: text(200).optional(),
  cable: text(200).optional(),
  supply: text(200).optional(),
  temperatureC: z.number().min(-100).max(200).nullable().optional(),
  operator: text(100).optional(),
  notes: text(4000).optional(),
});
export type AboutCapture = z.infer<typeof aboutCaptureSchema>;

/** Field `about` of an upload: JSON. */
export const newCaptureSchema = z.strictObject({
  about: aboutCaptureSchema.default({}),
  buildId: z.number().int().positive().nullable().default(null),
});
export type NewCapture = z.input<typeof newCaptureSchema>;

/** `about` replaces what was there. */
export const captureChangeSchema = z.strictObject({
  about: aboutCaptureSchema.optional(),
  buildId: z.number().int().positive().nullable().optional(),
});
export type CaptureChange = z.input<typeof captureChangeSchema>;

export const uploadCheckSchema = z.strictObject({
  name: z.string().min(1).max(500),
  size: z.number().int().min(0),
});
export type UploadCheck = z.infer<typeof uploadCheckSchema>;

/** `received`: stored and sealed, its lines not mapped yet. The other states are those of its latest decode. */
export const CAPTURE_STATES = ['received', 'queued', 'running', 'decoded', 'failed'] as const;
export type CaptureState = (typeof CAPTURE_STATES)[number];
export const CAPTURE_SORTS = ['newest', 'oldest', 'worst', 'longest'] as const;
export const PAGE_SIZE = 50;

export const captureQuerySchema = z.object({
  /** Looks at number, subject, file name, device, build and seal. */
  search: text(200).optional(),
  device: z.coerce.number().int().positive().optional(),
  build: z.coerce.number().int().positive().optional(),
  owner: z.coerce.number().int().positive().optional(),
  state: z.enum(CAPTURE_STATES).optional(),
  verdict: overallVerdictSchema.optional(),
  sort: z.enum(CAPTURE_SORTS).default('newest'),
  page: z.coerce.number().int().min(1).max(10_000).default(1),
});
export type CaptureQuery = z.input<typeof captureQuerySchema>;

export const captureSchema = z.object({
  number: z.string(),
  fileName: z.string(),
  /** SHA-256 of the file, hexadecimal; its first 8 digits are the seal people see. */
  sha256: z.string(),
  size: z.number(),
  owner: personRefSchema,
  device: z.object({ id: z.number().int(), name: z.string() }).nullable(),
  build: z.object({ id: z.number().int(), name: z.string() }).nullable(),
  about: aboutCaptureSchema,
  state: z.enum(CAPTURE_STATES),
  /** The latest, while it is queued or running or if it failed. */
  job: jobSchema.nullable(),
  /** The latest, with its latest check. */
  decode: decodeSummarySchema.nullable(),
  /** How many decodes there are. */
  decodes: z.number().int(),
  createdAt: z.string(),
  mayDelete: z.boolean(),
});
export type CaptureView = z.infer<typeof captureSchema>;

export const capturePageSchema = z.object({
  /** Captures that match. */
  total: z.number().int(),
  page: z.number().int(),
  pageSize: z.number().int(),
  captures: z.array(captureSchema),
  /** Of the whole workspace, whatever was asked for. Week: the last seven days. `violations`: rules violated in latest checks. */
  counts: z.object({
    registered: z.number().int(),
    thisWeek: z.number().int(),
    violations: z.number().int(),
    capturesWithViolations: z.number().int(),
    unmapped: z.number().int(),
  }),
  /** Everybody who has a capture: for the filter. */
  owners: z.array(personRefSchema),
});
export type CapturePage = z.infer<typeof capturePageSchema>;
