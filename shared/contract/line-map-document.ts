import * as z from 'zod';
import { LINE_ROLES } from '../line/line-map';

const assignment = z.strictObject({
  channel: z.string().min(1),
  polarity: z.enum(['line', 'logic', 'auto']).default('auto'),
  thresholds: z
    .strictObject({ high: z.number(), low: z.number() })
    .refine(({ high, low }) => high >= low, 'the rising threshold is below the falling one')
    .optional(),
});

const span = { startS: z.number(), endS: z.number() };
const isForward = ({ startS, endS }: { startS: number; endS: number }): boolean => endS > startS;

/** A line map as people write it down, in a file or through the web. */
export const lineMapSchema = z.strictObject({
  lines: z.partialRecord(z.enum(LINE_ROLES), assignment.nullable()).optional(),
  resolutionS: z.number().positive().optional(),
  timeAccuracyPpm: z.number().min(0).max(1e6).optional(),
  thresholdSkewS: z.number().min(0).optional(),
  voltageAccuracyPercent: z.number().min(0).max(100).optional(),
  voltageAccuracyV: z.number().min(0).max(100).optional(),
  excluded: z
    .array(
      z
        .strictObject({ ...span, reason: z.string().min(1).max(500) })
        .refine(isForward, 'the span ends before it begins'),
    )
    .max(1000)
    .optional(),
  declared: z
    .array(
      z
        .strictObject({
          ...span,
          kind: z.enum(['rest', 'stroke', 'closed-path']),
          axis: z.enum(['x', 'y']).optional(),
          lengthMm: z.number().positive().optional(),
          lengthUncertaintyMm: z.number().min(0).optional(),
        })
        .refine(isForward, 'the span ends before it begins'),
    )
    .max(1000)
    .optional(),
  countsPerInch: z.number().positive().optional(),
  probedEnd: z.enum(['receiver', 'driver', 'open-circuit']).optional(),
});

export type LineMapDocument = z.infer<typeof lineMapSchema>;
