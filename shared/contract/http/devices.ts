import * as z from 'zod';
import { PROTOCOLS } from '../../packets/packet-table';
import { personRefSchema } from './accounts';
import { captureSchema } from './captures';

const name = z.string().trim().min(1, 'a name is needed').max(100);
const countsPerInch = z.number().positive().max(100_000).nullable();
const protocol = z.enum(PROTOCOLS).nullable();
const maker = z.string().trim().max(100);
const board = z.string().trim().max(100);
const notes = z.string().trim().max(4000);

export const DEVICE_KINDS = ['mouse', 'trackball', 'touch surface', 'adapter'] as const;
const kind = z.enum(DEVICE_KINDS);

export const newDeviceSchema = z.strictObject({
  name,
  kind,
  maker: maker.default(''),
  /** Counts per inch the device claims. */
  countsPerInch: countsPerInch.default(null),
  /** The protocol the device declares. */
  protocol: protocol.default(null),
  notes: notes.default(''),
});
export type NewDevice = z.input<typeof newDeviceSchema>;

export const deviceChangeSchema = z.strictObject({
  name: name.optional(),
  kind: kind.optional(),
  maker: maker.optional(),
  countsPerInch: countsPerInch.optional(),
  protocol: protocol.optional(),
  notes: notes.optional(),
});
export type DeviceChange = z.input<typeof deviceChangeSchema>;

export const newBuildSchema = z.strictObject({ name, board: board.default(''), notes: notes.default('') });
export type NewBuild = z.input<typeof newBuildSchema>;

export const buildChangeSchema = z.strictObject({
  name: name.optional(),
  board: board.optional(),
  notes: notes.optional(),
});
export type BuildChange = z.input<typeof buildChangeSchema>;

/** Captures by their overall verdict; `open`: not decoded (yet). */
export const captureCountsSchema = z.object({
  total: z.number().int(),
  pass: z.number().int(),
  fail: z.number().int(),
  inconclusive: z.number().int(),
  open: z.number().int(),
});
export type CaptureCounts = z.infer<typeof captureCountsSchema>;

export const buildSchema = z.object({
  id: z.number().int(),
  device: z.object({ id: z.number().int(), name: z.string() }),
  name: z.string(),
  /** Board or hardware revision. */
  board: z.string(),
  notes: z.string(),
  captures: captureCountsSchema,
  createdBy: personRefSchema,
  createdAt: z.string(),
});
export type BuildView = z.infer<typeof buildSchema>;

/** Its newest captures, at most 200; for more ask `GET /captures?build=`. */
export const buildDetailSchema = buildSchema.extend({ captureList: z.array(captureSchema) });
export type BuildDetail = z.infer<typeof buildDetailSchema>;

/** Builds: newest first. */
export const deviceSchema = z.object({
  id: z.number().int(),
  name: z.string(),
  kind,
  maker: z.string(),
  countsPerInch: z.number().nullable(),
  protocol: z.string().nullable(),
  notes: z.string(),
  captures: captureCountsSchema,
  builds: z.array(buildSchema),
  createdAt: z.string(),
});
export type DeviceView = z.infer<typeof deviceSchema>;
