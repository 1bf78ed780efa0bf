import * as z from 'zod';
import { LINE_ROLES } from '../../line/line-map';
import { lineMapSchema } from '../line-map-document';
import { personRefSchema } from './accounts';
import { decodeOptionsSchema, defectSchema, detectionSchema, resolvedLineSchema } from './decodes';

/** Columns of a channel's `ribbon`. */
export const RIBBON_COLUMNS = 240;

/** A channel as the mapping shows it. */
export const channelSchema = z.object({
  name: z.string(),
  aliases: z.array(z.string()),
  kind: z.enum(['digital', 'analog']),
  /** 0 for voltages. */
  edges: z.number().int(),
  /** Changes too often to be a line of a pointing device. */
  isTooBusy: z.boolean(),
  /** Share of the time at the high level, 0 to 1; null for voltages. */
  shareHigh: z.number().nullable(),
  /** Range in volts; null for levels. */
  lowestV: z.number().nullable(),
  highestV: z.number().nullable(),
  /** 240 even columns over the whole capture: share of the time high, or the mean between lowest and highest; −1 where unknown. */
  ribbon: z.array(z.number()),
});
export type ChannelView = z.infer<typeof channelSchema>;

/** What the library would choose for a role, and why. `channel` is null where nothing fits. */
export const suggestionSchema = z.object({
  role: z.enum(LINE_ROLES),
  channel: z.string().nullable(),
  polarity: z.enum(['line', 'logic']).nullable(),
  reason: z.string(),
  polarityReason: z.string().nullable(),
  runnerUp: z.string().nullable(),
});
export type SuggestionView = z.infer<typeof suggestionSchema>;

export const presetSchema = z.object({
  id: z.number().int(),
  name: z.string(),
  /** A bench is recognised by these names: all must be in the capture. */
  channels: z.array(z.string()),
  map: lineMapSchema,
  options: decodeOptionsSchema,
  owner: personRefSchema,
  createdAt: z.string(),
  mayDelete: z.boolean(),
});
export type PresetView = z.infer<typeof presetSchema>;

export const newPresetSchema = z.strictObject({
  name: z.string().trim().min(1, 'a name is needed').max(100),
  channels: z.array(z.string().min(1).max(500)).min(1).max(500),
  map: lineMapSchema,
  options: decodeOptionsSchema.default({}),
});
export type NewPreset = z.input<typeof newPresetSchema>;

/** What a mapping makes of a capture: totals, and an excerpt to draw. Times in seconds of the file's own clock. */
export const previewSchema = z.object({
  lines: z.array(resolvedLineSchema),
  detections: z.array(detectionSchema),
  framing: z.string().nullable(),
  bitRate: z.number().nullable(),
  nominalBitRate: z.number().nullable(),
  protocol: z.string().nullable(),
  resolutionS: z.number(),
  totals: z.object({
    resets: z.number().int(),
    answeredResets: z.number().int(),
    characters: z.number().int(),
    damagedCharacters: z.number().int(),
    packets: z.number().int(),
    brokenPackets: z.number().int(),
  }),
  /** Of the first answered reset: `M`, `M3`, `MZ` … */
  identity: z.string().nullable(),
  /** The stretch to draw: around the first answered reset, else the first characters, else the begin. */
  excerpt: z.object({
    startS: z.number(),
    endS: z.number(),
    /** Levels in the sense of the line: 0 space or OFF, 1 mark or ON, 2 unknown. `levels[i]` holds from `times[i]` on. */
    lines: z.array(
      z.object({
        role: z.enum(LINE_ROLES),
        initialLevel: z.number().int(),
        times: z.array(z.number()),
        levels: z.array(z.number().int()),
      }),
    ),
    resets: z.array(z.object({ t: z.number(), replyT: z.number().nullable() })),
    characters: z.array(
      z.object({ t: z.number(), tEnd: z.number(), value: z.number().int(), hasError: z.boolean() }),
    ),
    packets: z.array(
      z.object({
        t: z.number(),
        tEnd: z.number(),
        dx: z.number().int(),
        dy: z.number().int(),
        wheel: z.number().int().nullable(),
        buttons: z.array(z.enum(['left', 'middle', 'right', 'fourth'])),
      }),
    ),
  }),
  /** What a person should look at before using the mapping. */
  doubts: z.array(z.object({ role: z.enum(LINE_ROLES).nullable(), message: z.string() })),
});
export type PreviewView = z.infer<typeof previewSchema>;

export const newPreviewSchema = z.strictObject({
  map: lineMapSchema,
  options: decodeOptionsSchema.default({}),
});
export type NewPreview = z.input<typeof newPreviewSchema>;

/** `sampleRateHz`: ask again with it after the problem `no-sample-rate`. */
export const linesQuerySchema = z.object({ sampleRateHz: z.coerce.number().positive().max(1e12).optional() });
export type LinesQuery = z.input<typeof linesQuerySchema>;

/** All a person needs to map a capture's lines. */
export const linesSchema = z.object({
  format: z.enum(['vcd', 'csv', 'bytes']),
  layout: z.enum(['sampled', 'transitions']),
  startS: z.number(),
  endS: z.number(),
  resolutionS: z.number(),
  /** Of `sampled` files. */
  sampleIntervalS: z.number().nullable(),
  channels: z.array(channelSchema),
  /** How many channels the file has; at most 500 are listed. */
  channelCount: z.number().int(),
  suggestions: z.array(suggestionSchema),
  /** Those whose channel names are all in this capture. */
  presets: z.array(presetSchema),
  defects: z.array(defectSchema),
  /** With everything left to be found. */
  preview: previewSchema,
});
export type LinesView = z.infer<typeof linesSchema>;
