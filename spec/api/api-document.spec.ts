import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Endpoint } from '#shared/contract/http/endpoint';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import { successOf } from './ask-endpoint';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { Workspace } from './workspace';

interface Operation {
  readonly operationId: string;
  readonly tags: string[];
  readonly parameters?: {
    readonly name: string;
    readonly in: string;
    readonly required?: boolean;
    readonly schema: object;
  }[];
  readonly requestBody?: { readonly content: Record<string, { readonly schema: object }> };
  readonly responses: Record<
    string,
    { readonly description: string; readonly content?: Record<string, unknown> }
  >;
  readonly security?: Record<string, unknown[]>[];
}
interface ApiDocument {
  readonly openapi: string;
  readonly info: { readonly title: string; readonly version: string };
  readonly servers: { readonly url: string }[];
  readonly components: { readonly securitySchemes: Record<string, unknown> };
  readonly paths: Record<string, Record<string, Operation>>;
}

let workspace: Workspace;
let text: string;
let document: ApiDocument;
let operations: { key: string; path: string; operation: Operation }[];

beforeAll(async () => {
  workspace = await Workspace.open();
  const answer = await workspace.ask(undefined, 'get', '/openapi.json');
  expect(answer.headers['content-type']).toMatch(/^application\/json/);
  text = answer.text;
  document = JSON.parse(text) as ApiDocument;
  operations = Object.entries(document.paths).flatMap(([path, methods]) =>
    Object.entries(methods).map(([method, operation]) => ({
      key: `${method.toUpperCase()} ${path.replace(/\{(\w+)\}/g, ':$1')}`,
      path,
      operation,
    })),
  );
});
afterAll(() => workspace.close());

/** Every value below a value, itself included. */
function* walk(value: unknown): Generator<Record<string, unknown>> {
  if (typeof value !== 'object' || value === null) return;
  if (!Array.isArray(value)) yield value as Record<string, unknown>;
  for (const child of Object.values(value)) yield* walk(child);
}

// Source: OpenAPI Specification 3.1.0, section 4.8; JSON Schema 2020-12 for what stands in `schema`. Both from memory.
describe('the API document', () => {
  it('is OpenAPI 3.1 and lists every endpoint, and nothing else', () => {
    expect(document.openapi).toMatch(/^3\.1\.\d+$/);
    expect(document.info).toMatchObject({
      title: 'Linewitness',
      version: expect.stringMatching(/^\d+\.\d+\.\d+$/),
    });
    expect(document.servers).toEqual([{ url: 'http://127.0.0.1:4780/api' }]);
    expect(operations.map(({ key }) => key).sort()).toEqual(Object.keys(ENDPOINTS).sort());
  });

  it('names each operation once, and describes each answer', () => {
    const ids = operations.map(({ operation }) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
    for (const { key, operation } of operations) {
      expect(operation.operationId, key).toMatch(/^[A-Za-z]+$/);
      expect(operation.tags, key).toHaveLength(1);
      expect(Object.keys(operation.responses), key).toEqual([
        String(successOf(key as EndpointKey)),
        'default',
      ]);
      for (const { description } of Object.values(operation.responses)) expect(description, key).not.toBe('');
      expect(operation.responses['default'].content, key).toHaveProperty(['application/problem+json']);
    }
  });

  it('declares exactly the parameters of each path, as required', () => {
    for (const { key, path, operation } of operations) {
      const inPath = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name);
      const declared = (operation.parameters ?? []).filter((parameter) => parameter.in === 'path');
      expect(
        declared.map(({ name }) => name),
        key,
      ).toEqual(inPath);
      expect(
        declared.every(({ required }) => required === true),
        key,
      ).toBe(true);
      for (const { name, in: where, schema } of operation.parameters ?? []) {
        expect(['path', 'query'], `${key} ${name}`).toContain(where);
        expect(schema, `${key} ${name}`).toBeTypeOf('object');
      }
    }
  });

  it('holds no reference that leads nowhere, and no form of an older version', () => {
    for (const node of walk(document)) {
      if (typeof node['$ref'] === 'string') {
        const target = node['$ref']
          .replace(/^#\//, '')
          .split('/')
          .reduce<unknown>((value, name) => (value as Record<string, unknown> | undefined)?.[name], document);
        expect(target, node['$ref']).toBeDefined();
      }
      // 3.0 said `nullable`, and limits as true or false.
      expect(node['nullable']).not.toBe(true);
      expect(node['exclusiveMinimum']).not.toBe(true);
    }
  });

  it('says what goes in and comes out', () => {
    const of = (key: string) => operations.find((operation) => operation.key === key)!.operation;
    const upload = of('POST /captures').requestBody!.content['multipart/form-data'].schema;
    expect(upload).toMatchObject({
      properties: { file: { type: 'string', format: 'binary' } },
      required: ['file'],
    });
    for (const [key, endpoint] of Object.entries(ENDPOINTS) as [string, Endpoint][]) {
      const success = of(key).responses[successOf(key as EndpointKey)];
      const type = endpoint.answer === undefined ? endpoint.media : 'application/json';
      expect(Object.keys(success.content ?? {}), key).toEqual(type === undefined ? [] : [type]);
      expect(of(key).requestBody !== undefined, key).toBe(endpoint.body !== undefined);
    }
  });

  it('says who may ask without signing in', () => {
    const isOpen = (key: string) =>
      operations.find((one) => one.key === key)!.operation.security?.length === 0;
    expect(['POST /session', 'GET /docs', 'GET /people', 'GET /events'].map(isOpen)).toEqual([
      true,
      true,
      false,
      false,
    ]);
    expect(Object.keys(document.components.securitySchemes)).toEqual(['bearer']);
  });
});

describe('the API page', () => {
  it('names every endpoint, runs no script and asks nothing from outside', async () => {
    const answer = await workspace.ask(undefined, 'get', '/docs');
    expect(answer.headers['content-type']).toMatch(/^text\/html/);
    for (const key of Object.keys(ENDPOINTS)) expect(answer.text).toContain(`<code>${key}</code>`);
    expect(answer.text).not.toMatch(/<script|<link|<img|<iframe|\son\w+=|url\(|@import/i);
    const addresses = [...answer.text.matchAll(/(?:href|src)="([^"]*)"/g)].map(([, address]) => address);
    expect(addresses.filter((address) => !/^[#/](?!\/)/.test(address))).toEqual([]);
    const anchors = addresses.filter((address) => address.startsWith('#'));
    for (const anchor of anchors) expect(answer.text).toContain(`id="${anchor.slice(1)}"`);
  });
});
