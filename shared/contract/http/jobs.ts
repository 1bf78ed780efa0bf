import * as z from 'zod';
import { excerptSchema, placeSchema } from './problem';

export const JOB_STATES = ['queued', 'running', 'done', 'failed', 'cancelled'] as const;

/** What is wrong with the file or the map, in plain words. */
export const jobProblemSchema = z.object({
  code: z.string(),
  detail: z.string(),
  place: placeSchema.nullable(),
  excerpt: excerptSchema.nullable(),
});
export type JobProblem = z.infer<typeof jobProblemSchema>;

/** A decode or a check in the queue. It outlives the server's process. */
export const jobSchema = z.object({
  id: z.number().int(),
  /** Number of the capture. */
  capture: z.string(),
  kind: z.enum(['decode', 'check']),
  state: z.enum(JOB_STATES),
  /** 0 to 100. */
  percent: z.number(),
  /** What came of it, once done. */
  decodeId: z.number().int().nullable(),
  checkId: z.number().int().nullable(),
  /** Once failed. */
  problem: jobProblemSchema.nullable(),
  createdAt: z.string(),
});
export type JobView = z.infer<typeof jobSchema>;
