import * as z from 'zod';
import type { Endpoint } from '#shared/contract/http/endpoint';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import { problemSchema } from '#shared/contract/http/problem';
import { TOOL } from '#shared/decode/version';
import { describePermission } from './describe-permission';

const STYLE = `
:root { color-scheme: light dark; }
body { margin: 0 auto; max-width: 62rem; padding: 1.5rem; font: 15px/1.5 system-ui, sans-serif;
  color: light-dark(#16232e, #ede8da); background: light-dark(#fcfaf4, #161f26); }
a, summary { color: light-dark(#264e8f, #a4c3f2); }
code, pre { font: 13px/1.5 ui-monospace, monospace; }
pre { overflow-x: auto; padding: .75rem; background: light-dark(#f2ede0, #10171d); }
h2 { margin-top: 2.5rem; border-bottom: 1px solid; }
h3 { margin: 1.75rem 0 .25rem; }
p { margin: .25rem 0; }
nav ul { columns: 3 12rem; padding-left: 1rem; }
`;

/** The contract as one plain page: no script, nothing from outside. */
export function renderApiPage(): string {
  const topics = [...new Set(Object.values(ENDPOINTS).map(({ topic }) => topic))];
  const links = topics.map((topic) => `<li><a href="#${anchor(topic)}">${escape(topic)}</a></li>`);
  return [
    '<!doctype html><html lang="en"><head><meta charset="utf-8">',
    '<meta name="viewport" content="width=device-width"><title>Linewitness API</title>',
    `<style>${STYLE}</style></head><body><header><h1>Linewitness API</h1>`,
    `<p>Version ${escape(TOOL.version)}. All paths stand below <code>/api</code>. The same as an OpenAPI 3.1 document: `,
    '<a href="/api/openapi.json">openapi.json</a>.</p>',
    '<p>Sign in with <code>POST /session</code> and send the access token as <code>Authorization: Bearer</code>.</p>',
    `</header><nav aria-label="Topics"><ul>${links.join('')}</ul></nav><main>`,
    ...topics.map(renderTopic),
    `<h2 id="refusals">Refusals</h2><p>Problem details as in RFC 9457.</p>${renderSchema('Problem', problemSchema, 'output')}`,
    '</main></body></html>',
  ].join('\n');
}

function renderTopic(topic: string): string {
  const entries = Object.entries(ENDPOINTS as Record<string, Endpoint>).filter(
    ([, endpoint]) => endpoint.topic === topic,
  );
  const body = entries.map(([key, endpoint]) => renderEndpoint(key as EndpointKey, endpoint));
  return `<section><h2 id="${anchor(topic)}">${escape(topic)}</h2>${body.join('\n')}</section>`;
}

function renderEndpoint(key: EndpointKey, endpoint: Endpoint): string {
  const { summary, params, query, body, isUpload, answer, media, status } = endpoint;
  const success = status ?? ((answer ?? media) ? 200 : 204);
  const parts = [
    `<h3 id="${anchor(key)}"><code>${escape(key)}</code></h3>`,
    `<p>${escape(summary)}. Who: ${escape(describePermission(key))}.</p>`,
    `<p>Answers ${success}${media === undefined ? '' : ` with <code>${escape(media)}</code>`}.</p>`,
    params === undefined ? '' : renderSchema('In the path', params, 'input'),
    query === undefined ? '' : renderSchema('In the query', query, 'input'),
    body === undefined ? '' : renderSchema(isUpload ? 'Field about, JSON' : 'Body', body, 'input'),
    answer === undefined ? '' : renderSchema('Answer', answer, 'output'),
  ];
  return parts.filter((part) => part !== '').join('\n');
}

function renderSchema(title: string, schema: z.ZodType, io: 'input' | 'output'): string {
  const document = z.toJSONSchema(schema, { io, unrepresentable: 'any' });
  delete document.$schema;
  const text = escape(JSON.stringify(document, null, 2));
  return `<details><summary>${escape(title)}</summary><pre tabindex="0">${text}</pre></details>`;
}

function anchor(text: string): string {
  return text.toLowerCase().replace(/[^a-z0-9]+/g, '-');
}

function escape(text: string): string {
  return text.replace(/[&<>"]/g, (c) => `&#${c.charCodeAt(0)};`);
}
