import type * as z from 'zod';

/** One way to ask the server, as both sides and the API document see it. */
export interface Endpoint {
  /** Heading in the API document. */
  readonly topic: string;
  readonly summary: string;
  readonly params?: z.ZodType;
  readonly query?: z.ZodType;
  /** JSON, unless `upload` is set. */
  readonly body?: z.ZodType;
  /** The body is multipart: a field `about` with JSON of the type of `body`, then a field `file`. */
  readonly isUpload?: boolean;
  /** JSON; left out where there is none or where `media` says what comes. */
  readonly answer?: z.ZodType;
  /** Of success; 200 with an answer, 204 without. */
  readonly status?: number;
  /** Media type of an answer that is no JSON. */
  readonly media?: string;
}
