import * as z from 'zod';

/** Where in a file something stands. `line` and `column` count from 1, `byte` from 0. */
export const placeSchema = z.object({
  line: z.number().int().optional(),
  column: z.number().int().optional(),
  byte: z.number().int().optional(),
});
export type Place = z.infer<typeof placeSchema>;

/** The lines of a file around a place. `firstLine`: number of the first of them. */
export const excerptSchema = z.object({ firstLine: z.number().int(), lines: z.array(z.string()) });
export type Excerpt = z.infer<typeof excerptSchema>;

/**
 * Why a request was refused, as problem details: `application/problem+json`. `code` is a stable word to tell cases apart, `fields`
 * the parts of the request that are wrong, `place` and `excerpt` where in the capture file. Source: RFC 9457, section 3.
 */
export const problemSchema = z.object({
  /** `urn:linewitness:problem:` and the code. */
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: z.string(),
  place: placeSchema.optional(),
  excerpt: excerptSchema.optional(),
  /** `path`: the names down to the field joined by dots, such as `map.lines.rts.channel`. */
  fields: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  /** Seconds to wait before trying again, with status 429 and 503. */
  retryAfterS: z.number().optional(),
  requestId: z.string().optional(),
});
export type Problem = z.infer<typeof problemSchema>;
