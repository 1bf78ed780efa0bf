import { STATUS_CODES } from 'node:http';
import type { ErrorRequestHandler, Response } from 'express';
import { MulterError } from 'multer';
import type { Logger } from 'pino';
import * as z from 'zod';
import { CaptureError } from '#shared/capture/capture-error';
import type { Problem } from '#shared/contract/http/problem';
import { ServiceError } from '../services/service-error';

type Cause = Omit<Problem, 'type' | 'title' | 'requestId'>;

/** Errors of the body's parsers, by the words they use: they have no code. */
const BROKEN_BODY = /^(Unexpected end of form|Multipart: |Request aborted|Malformed part header)/;

/** Writes a refusal as problem details. Source: RFC 9457, section 3. */
export function sendProblem(res: Response, cause: Cause): void {
  const problem: Problem = {
    type: `urn:linewitness:problem:${cause.code}`,
    title: STATUS_CODES[cause.status] ?? 'Error',
    ...cause,
    requestId: String(res.req.id),
  };
  if (cause.retryAfterS !== undefined) res.set('Retry-After', String(cause.retryAfterS));
  res.status(cause.status).type('application/problem+json').set('Cache-Control', 'no-store');
  res.send(JSON.stringify(problem));
}

/** The one place where errors become answers. What is nobody's fault but ours is logged and told without details. */
export function problemHandler(logger: Logger): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    if (res.headersSent) {
      // The answer is under way: all that is left is to break it off.
      next(error);
      return;
    }
    const cause = toCause(error);
    if (cause.status >= 500 && cause.code === 'fault') {
      (req.log ?? logger).error({ err: error }, 'a request failed');
    }
    sendProblem(res, cause);
  };
}

function toCause(error: unknown): Cause {
  if (error instanceof ServiceError) {
    return { status: error.status, code: error.code, detail: error.message, ...plain(error.details) };
  }
  if (error instanceof z.ZodError) return ofFields(error);
  if (error instanceof CaptureError) {
    const detail = `This is no capture: ${error.message}.`;
    return { status: 415, code: error.code, detail, place: error.place };
  }
  if (error instanceof MulterError) return ofMulter(error);
  if (error instanceof Error && BROKEN_BODY.test(error.message)) {
    return { status: 400, code: 'broken-body', detail: 'The upload broke off or is damaged. Send it again.' };
  }
  return ofHttp(error) ?? { status: 500, code: 'fault', detail: 'Something went wrong on our side.' };
}

function plain(details: ServiceError['details']): Partial<Cause> {
  return { ...details, fields: details.fields?.map((field) => ({ ...field })) };
}

function ofFields(error: z.ZodError): Cause {
  const fields = error.issues.map(({ path, message }) => ({ path: path.join('.'), message }));
  const first = fields[0];
  const where = first.path === '' ? '' : `${first.path}: `;
  return {
    status: 400,
    code: 'invalid',
    detail: `The request cannot be used: ${where}${first.message}`,
    fields,
  };
}

function ofMulter(error: MulterError): Cause {
  if (error.code === 'LIMIT_FILE_SIZE') {
    return { status: 413, code: 'too-large', detail: 'The file is larger than the limit.' };
  }
  return { status: 400, code: 'broken-body', detail: `The upload cannot be used: ${error.message}.` };
}

/** By the types of the body's parser. */
const PARSER_DETAILS: Readonly<Record<string, readonly [code: string, detail: string]>> = {
  'entity.parse.failed': ['bad-json', 'The body is no JSON.'],
  'entity.too.large': ['too-large', 'The body is larger than the limit.'],
  'encoding.unsupported': ['refused', 'The packing of the body is not known.'],
  'charset.unsupported': ['refused', 'The character set of the body is not known.'],
};

/** Errors that Express and its parsers throw with a status of their own. */
function ofHttp(error: unknown): Cause | null {
  const { status, type } = (error ?? {}) as { status?: unknown; type?: unknown };
  if (typeof status !== 'number' || status < 400 || status > 499) return null;
  if (status === 401) return { status, code: 'not-signed-in', detail: 'Sign in first.' };
  if (error instanceof URIError) return { status, code: 'bad-path', detail: 'The path has a broken escape.' };
  const [code, detail] = PARSER_DETAILS[String(type)] ?? ['refused', 'The request cannot be used.'];
  return { status, code, detail };
}
