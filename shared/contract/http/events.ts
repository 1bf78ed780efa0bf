import * as z from 'zod';
import { jobSchema } from './jobs';

/**
 * What the server tells while a page is open, one stream for every topic. The name of the event is its `kind`. The reader asks
 * again for what it shows.
 */
export const serverEventSchema = z.discriminatedUnion('kind', [
  /** First of each connection. `isComplete`: nothing was missed since the last event id that was sent along. */
  z.object({ kind: z.literal('hello'), toolVersion: z.string(), isComplete: z.boolean() }),
  /** Progress or a new state. */
  z.object({ kind: z.literal('job'), job: jobSchema }),
  z.object({
    kind: z.literal('capture'),
    number: z.string(),
    change: z.enum(['created', 'changed', 'deleted']),
  }),
  z.object({ kind: z.literal('device'), id: z.number().int() }),
  z.object({ kind: z.literal('preset'), id: z.number().int() }),
  z.object({ kind: z.literal('person'), id: z.number().int() }),
]);
export type ServerEvent = z.infer<typeof serverEventSchema>;
