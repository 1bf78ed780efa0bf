import supertest from 'supertest';
import type { Endpoint } from '#shared/contract/http/endpoint';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import type { Furniture, RequestParts } from './endpoint-requests';
import type { Answer, Person, Workspace } from './workspace';
import { sample } from './workspace';

/** Status of a success as the contract has it. */
export function successOf(key: EndpointKey): number {
  const { status, answer, media }: Endpoint = ENDPOINTS[key];
  return status ?? ((answer ?? media) ? 200 : 204);
}

/** Asks an endpoint with what a request holds. Of a stream it waits for the head only. */
export async function askEndpoint(
  { url }: Pick<Workspace, 'url'>,
  key: EndpointKey,
  { params = {}, query = {}, body, cookie, file }: RequestParts,
  token?: string,
): Promise<Answer> {
  const [method, path] = key.split(' ') as [string, string];
  const address = `/api${path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(params[name]))}`;
  if ((ENDPOINTS[key] as Endpoint).media === 'text/event-stream') return askStream(url + address, token);
  const test = supertest(url)[method.toLowerCase() as 'get'](address).query(query);
  if (token !== undefined) test.auth(token, { type: 'bearer' });
  if (cookie !== undefined) test.set('Cookie', cookie);
  if (file === undefined) return test.send(body as object | undefined);
  return test.field('about', JSON.stringify(body ?? {})).attach('file', await sample(file), file);
}

/** An answer that does not end is let go as soon as its head is there. */
async function askStream(address: string, token: string | undefined): Promise<Answer> {
  const leave = new AbortController();
  const answer = await fetch(address, {
    headers: token === undefined ? {} : { authorization: `Bearer ${token}` },
    signal: leave.signal,
  });
  const type = answer.headers.get('content-type')?.split(';')[0] ?? '';
  const text = answer.ok ? '' : await answer.text();
  leave.abort();
  return {
    status: answer.status,
    type,
    text,
    headers: { 'x-request-id': answer.headers.get('x-request-id') ?? '' },
    body: undefined,
  };
}

/** Captures, decodes, checks, devices and builds of one owner, made through the server. */
export async function furnish(workspace: Workspace, owner: Person): Promise<Furniture> {
  const device = await workspace.ask(owner, 'post', '/devices').send({ name: 'Desk mouse', kind: 'mouse' });
  const deviceId = (device.body as { id: number }).id;
  const build = await workspace.ask(owner, 'post', `/devices/${deviceId}/builds`).send({ name: '1.0' });
  const buildId = (build.body as { id: number }).id;
  const number = await workspace.upload(owner, 'silent.vcd', { buildId });
  const job = await workspace.decode(owner, number);
  return { number, decodeId: job.decodeId!, checkId: job.checkId!, jobId: job.id, deviceId, buildId };
}
