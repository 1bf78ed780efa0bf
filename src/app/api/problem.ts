import { HttpErrorResponse } from '@angular/common/http';
import type { Problem } from '#shared/contract/http/problem';

export type { Problem };

/** What went wrong with a request, in the server's words where it had some. Status 0: no answer came. */
export function toProblem(error: unknown): Problem {
  if (error instanceof HttpErrorResponse) {
    const body: unknown = error.error;
    if (isProblem(body)) return body;
    if (error.status === 0) return plain(0, 'offline', 'The server does not answer. Nothing was changed.');
    return plain(error.status, 'unexpected', `The server answered with status ${error.status}.`);
  }
  return plain(-1, 'fault', error instanceof Error ? error.message : 'Something went wrong in this page.');
}

function isProblem(body: unknown): body is Problem {
  return typeof body === 'object' && body !== null && 'code' in body && 'detail' in body;
}

function plain(status: number, code: string, detail: string): Problem {
  return { type: `urn:linewitness:problem:${code}`, title: detail, status, detail, code };
}

/** The message for one field of a form, by its path in the request. */
export function fieldMessage(problem: Problem | null, path: string): string | null {
  return problem?.fields?.find((field) => field.path === path)?.message ?? null;
}
