import type { HttpEvent } from '@angular/common/http';
import { HttpClient, HttpParams } from '@angular/common/http';
import { inject, Injectable } from '@angular/core';
import type { Observable } from 'rxjs';
import type * as z from 'zod';
import type { EndpointKey, ENDPOINTS } from '#shared/contract/http/endpoints';

type Table = typeof ENDPOINTS;
type Part<K extends EndpointKey, P extends string> =
  Table[K] extends Record<P, infer S extends z.ZodType> ? S : never;

/** What an endpoint answers with; nothing where its answer is empty or no JSON. */
export type Answer<K extends EndpointKey> = Table[K] extends { answer: infer S extends z.ZodType }
  ? z.output<S>
  : undefined;

export interface Question<K extends EndpointKey> {
  /** Values for the `:names` of the path. */
  readonly params?: Readonly<Record<string, string | number>>;
  /** Values left undefined are not sent. */
  readonly query?: Part<K, 'query'> extends never ? never : z.input<Part<K, 'query'>>;
  readonly body?: Part<K, 'body'> extends never ? never : z.input<Part<K, 'body'>>;
}

/** Asks the server. The endpoint's row in the contract gives the types of question and answer; nothing of it is needed at run time. */
@Injectable({ providedIn: 'root' })
export class ApiClient {
  private readonly http = inject(HttpClient);

  ask<K extends EndpointKey>(key: K, question: Question<K> = {}): Observable<Answer<K>> {
    const [method, url] = addressOf(key, question.params);
    return this.http.request<Answer<K>>(method, url, {
      body: question.body,
      params: toParams(question.query),
    });
  }

  /** A download as bytes. */
  askBytes(key: EndpointKey, params: Readonly<Record<string, string | number>>): Observable<ArrayBuffer> {
    const [method, url] = addressOf(key, params);
    return this.http.request(method, url, { responseType: 'arraybuffer' });
  }

  /** Sends a form and tells its progress. */
  send<K extends EndpointKey>(key: K, form: FormData): Observable<HttpEvent<Answer<K>>> {
    const [method, url] = addressOf(key);
    return this.http.request<Answer<K>>(method, url, {
      body: form,
      observe: 'events',
      reportProgress: true,
    });
  }
}

function addressOf(
  key: EndpointKey,
  params: Readonly<Record<string, string | number>> = {},
): [method: string, url: string] {
  const [method, path] = key.split(' ') as [string, string];
  const filled = path.replace(/:(\w+)/g, (_, name: string) => {
    const value = params[name];
    if (value === undefined) throw new Error(`${key} needs ${name}`);
    return encodeURIComponent(value);
  });
  return [method, `/api${filled}`];
}

function toParams(query: unknown): HttpParams | undefined {
  if (query === undefined || query === null) return undefined;
  let params = new HttpParams();
  for (const [name, value] of Object.entries(query as Record<string, unknown>)) {
    if (value !== undefined && value !== null && value !== '') params = params.set(name, String(value));
  }
  return params;
}
