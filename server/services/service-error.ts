import type { Excerpt, Place } from '#shared/contract/http/problem';

type Fields = readonly { readonly path: string; readonly message: string }[];

export interface ErrorDetails {
  readonly fields?: Fields;
  readonly place?: Place;
  readonly excerpt?: Excerpt;
  readonly retryAfterS?: number;
}

/** Why a service refuses; the error handler turns it into a problem. The message is for people. */
export class ServiceError extends Error {
  override readonly name: string = 'ServiceError';
  constructor(
    readonly status: number,
    /** Stable word to tell cases apart. */
    readonly code: string,
    message: string,
    readonly details: ErrorDetails = {},
  ) {
    super(message);
  }
}

/** What was asked for is not there. */
export class NotFound extends ServiceError {
  constructor(what: string) {
    super(404, 'not-found', `${what} does not exist.`);
  }
}

export class Forbidden extends ServiceError {
  constructor(code: string, message: string) {
    super(403, code, message);
  }
}

/** It contradicts what is there. */
export class Conflict extends ServiceError {
  constructor(code: string, message: string, fields?: Fields) {
    super(409, code, message, { fields });
  }
}

/** The request cannot be meant so. */
export class Invalid extends ServiceError {
  constructor(code: string, message: string, details?: ErrorDetails) {
    super(400, code, message, details);
  }
}

/** Sign in first, or again. */
export class Unauthorized extends ServiceError {
  constructor(code: string, message: string) {
    super(401, code, message);
  }
}
