import { OpenApiGeneratorV31, OpenAPIRegistry } from '@asteasolutions/zod-to-openapi';
import type { RouteConfig } from '@asteasolutions/zod-to-openapi';
import * as z from 'zod';
import type { Endpoint } from '#shared/contract/http/endpoint';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import { problemSchema } from '#shared/contract/http/problem';
import { TOOL } from '#shared/decode/version';
import { permissionOf } from '../permissions';
import { describePermission } from './describe-permission';

const BEARER = 'bearer';

type Document = ReturnType<OpenApiGeneratorV31['generateDocument']>;

/** The contract as a document. Source: OpenAPI Specification 3.1.0. */
export function makeOpenApiDocument(publicUrl: string): Document {
  const registry = new OpenAPIRegistry();
  registry.registerComponent('securitySchemes', BEARER, {
    type: 'http',
    scheme: 'bearer',
    bearerFormat: 'JWT',
  });
  for (const [key, endpoint] of Object.entries(ENDPOINTS)) {
    registry.registerPath(toRoute(key as EndpointKey, endpoint));
  }
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Linewitness',
      version: TOOL.version,
      description: 'Everything the browser client uses. Refusals are problem details (RFC 9457).',
    },
    servers: [{ url: `${publicUrl}/api` }],
  });
}

function toRoute(key: EndpointKey, endpoint: Endpoint): RouteConfig {
  const [method, path] = key.split(' ');
  const status = endpoint.status ?? ((endpoint.answer ?? endpoint.media) ? 200 : 204);
  return {
    method: method.toLowerCase() as RouteConfig['method'],
    path: path.replace(/:(\w+)/g, '{$1}'),
    operationId: key.replace(/[^A-Za-z]+(\w)/g, (_, letter: string) => letter.toUpperCase()),
    tags: [endpoint.topic],
    summary: endpoint.summary,
    description: `Who: ${describePermission(key)}.`,
    security: permissionOf(key) === 'public' ? [] : [{ [BEARER]: [] }],
    request: {
      params: endpoint.params as z.ZodObject | undefined,
      query: endpoint.query as z.ZodObject | undefined,
      ...(endpoint.body === undefined ? {} : { body: { required: true, content: bodyOf(endpoint) } }),
    },
    responses: {
      [status]: { description: 'Done', ...(contentOf(endpoint) ?? {}) },
      default: {
        description: 'Refused',
        content: { 'application/problem+json': { schema: problemSchema } },
      },
    },
  };
}

function bodyOf({ body, isUpload }: Endpoint) {
  if (isUpload !== true) return { 'application/json': { schema: body! } };
  const file = z.string().meta({ format: 'binary' });
  return { 'multipart/form-data': { schema: z.object({ about: body!.optional(), file }) } };
}

function contentOf({ answer, media }: Endpoint) {
  if (answer !== undefined) return { content: { 'application/json': { schema: answer } } };
  return media === undefined ? undefined : { content: { [media]: { schema: z.string() } } };
}
