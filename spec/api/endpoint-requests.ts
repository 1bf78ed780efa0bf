import type { EndpointKey } from '#shared/contract/http/endpoints';
import type { Person, Workspace } from './workspace';

/** What a request holds beside method, path and who asks. */
export interface RequestParts {
  readonly params?: Readonly<Record<string, string | number>>;
  readonly query?: Readonly<Record<string, string>>;
  readonly body?: unknown;
  readonly cookie?: string;
  /** Sample to upload. */
  readonly file?: string;
}

/** Things that are there before anybody asks. */
export interface Furniture {
  readonly number: string;
  readonly decodeId: number;
  readonly checkId: number;
  readonly jobId: number;
  readonly deviceId: number;
  readonly buildId: number;
}

export interface EndpointRequest {
  /** A request that succeeds if `owner` may ask it; what it works on belongs to `owner`. */
  good(workspace: Workspace, there: Furniture, owner: Person): RequestParts | Promise<RequestParts>;
  /** Parameters that name nothing. */
  readonly unknown?: RequestParts['params'];
  /** A body that cannot be used, and the field that is to blame. */
  readonly bad?: { readonly body: unknown; readonly field: string };
}

const NO_ID = { id: 987_654 };
const NO_CAPTURE = { number: 'LW-987654' };
const PASSWORD = 'another long password';
const BATCH_MAP = { lines: { data: { channel: 'data', polarity: 'auto' } } };

let count = 0;
const unique = (text: string): string => `${text} ${++count}`;

const onNothing: EndpointRequest = { good: () => ({}) };
const onCapture: EndpointRequest = {
  good: (_, { number }) => ({ params: { number } }),
  unknown: NO_CAPTURE,
};
const onDecode: EndpointRequest = {
  good: (_, { decodeId }) => ({ params: { id: decodeId } }),
  unknown: NO_ID,
};
const onCheck: EndpointRequest = { good: (_, { checkId }) => ({ params: { id: checkId } }), unknown: NO_ID };
const noName = (body: object) => ({ body: { ...body, name: '  ' }, field: 'name' });

/** How to ask each endpoint so that only the permission decides. */
export const REQUESTS: Readonly<Record<EndpointKey, EndpointRequest>> = {
  'GET /workspace': onNothing,
  'POST /session': {
    good: (_, __, { account, password }) => ({ body: { email: account.email, password } }),
    bad: { body: { email: 'ines@norrhavn.example' }, field: 'password' },
  },
  'POST /session/refresh': { good: (_, __, { cookie }) => ({ cookie }) },
  'DELETE /session': { good: (_, __, { cookie }) => ({ cookie }) },
  'DELETE /sessions': onNothing,
  'GET /me': onNothing,
  'PUT /me/preferences': {
    good: () => ({ body: { theme: 'dark' } }),
    bad: { body: { notes: 'x'.repeat(20_000) }, field: '' },
  },
  'POST /me/password': {
    good: (_, __, { password }) => ({ body: { current: password, next: PASSWORD } }),
    bad: { body: { current: 'a long password', next: 'short' }, field: 'next' },
  },
  'POST /password-reset': {
    good: async ({ services }, _, { account }) => {
      const { url } = await services.passwords.makeLink(null, account.id);
      return { body: { token: url.split('#')[1], password: PASSWORD } };
    },
    bad: { body: { token: 'x'.repeat(43), password: 'é'.repeat(37) }, field: 'password' },
  },
  'POST /password-reset/check': {
    good: async ({ services }, _, { account }) => {
      const { url } = await services.passwords.makeLink(null, account.id);
      return { body: { token: url.split('#')[1] } };
    },
    bad: { body: { token: 7 }, field: 'token' },
  },

  'GET /people': onNothing,
  'POST /people': {
    good: () => ({
      body: { email: `${unique('new').replace(' ', '')}@quintal.example`, name: 'New', role: 'qa' },
    }),
    bad: { body: { email: 'nobody', name: 'New', role: 'qa' }, field: 'email' },
  },
  'PATCH /people/:id': {
    good: async (workspace) => ({
      params: { id: (await workspace.person('qa')).account.id },
      body: { name: 'Renamed' },
    }),
    unknown: NO_ID,
    bad: { body: { role: 'owner' }, field: 'role' },
  },
  'POST /people/:id/reset-link': {
    good: async (workspace) => ({ params: { id: (await workspace.person('qa')).account.id } }),
    unknown: NO_ID,
  },

  'POST /uploads/check': {
    good: () => ({ body: { name: 'capture.vcd', size: 1000 } }),
    bad: { body: { name: 'capture.vcd', size: -1 }, field: 'size' },
  },
  'POST /captures': { good: () => ({ file: 'silent.vcd', body: { about: { subject: 'silent' } } }) },
  'GET /captures': { good: () => ({ query: { sort: 'worst' } }) },
  'GET /captures/:number': onCapture,
  'PATCH /captures/:number': {
    ...onCapture,
    good: (_, { number }) => ({ params: { number }, body: { about: { subject: 'Renamed' } } }),
    bad: { body: { about: { temperatureC: 'warm' } }, field: 'about.temperatureC' },
  },
  'DELETE /captures/:number': {
    good: async (workspace, _, owner) => ({
      params: { number: await workspace.upload(owner, 'silent.vcd') },
    }),
    unknown: NO_CAPTURE,
  },
  'GET /captures/:number/file': onCapture,
  'GET /captures/:number/lines': onCapture,
  'POST /captures/:number/preview': {
    good: (_, { number }) => ({ params: { number }, body: { map: {} } }),
    unknown: NO_CAPTURE,
    bad: { body: { map: { lines: { rts: { channel: 7 } } } }, field: 'map.lines.rts.channel' },
  },
  'GET /presets': onNothing,
  'POST /presets': {
    good: () => ({ body: { name: unique('Rig'), channels: ['data', 'rts'], map: {} } }),
    bad: { body: { name: 'Rig', channels: [], map: {} }, field: 'channels' },
  },
  'DELETE /presets/:id': {
    good: async ({ services }, _, { account }) => {
      const preset = { name: unique('Rig'), channels: ['data'], map: {}, options: {} };
      return { params: { id: (await services.presets.create(account, preset)).id } };
    },
    unknown: NO_ID,
  },

  'POST /captures/:number/decodes': {
    good: (_, { number }) => ({ params: { number }, body: { map: {} } }),
    unknown: NO_CAPTURE,
    bad: { body: { map: {}, options: { bitRate: -1200 } }, field: 'options.bitRate' },
  },
  'POST /captures/decodes': {
    good: (_, { number }) => ({ body: { numbers: [number], map: BATCH_MAP } }),
    bad: { body: { numbers: ['LW-0001', '2'], map: {} }, field: 'numbers.1' },
  },
  'GET /captures/:number/decodes': onCapture,
  'GET /decodes/:id': onDecode,
  'GET /decodes/:id/result': onDecode,
  'GET /decodes/:id/tape': onDecode,
  'GET /decodes/:id/log': onDecode,
  'GET /decodes/:id/packets.csv': onDecode,

  'POST /decodes/:id/checks': {
    good: (_, { decodeId }) => ({ params: { id: decodeId }, body: { rulebook: 'host-limits' } }),
    unknown: NO_ID,
    bad: { body: { rulebook: 'house' }, field: 'rulebook' },
  },
  'GET /decodes/:id/checks': onDecode,
  'GET /checks/:id': onCheck,
  'GET /checks/:id/changes': onCheck,
  'GET /rulebooks': onNothing,
  'GET /rulebooks/:key': { good: () => ({ params: { key: 'baseline' } }), unknown: { key: 'house' } },

  'GET /jobs': onNothing,
  'GET /jobs/:id': { good: (_, { jobId }) => ({ params: { id: jobId } }), unknown: NO_ID },
  'DELETE /jobs/:id': {
    good: async (workspace, { number }, owner) => {
      const answer = await workspace.ask(owner, 'post', `/captures/${number}/decodes`).send({ map: {} });
      return { params: { id: (answer.body as { id: number }).id } };
    },
    unknown: NO_ID,
  },

  'GET /devices': onNothing,
  'POST /devices': {
    good: () => ({ body: { name: unique('Mouse'), kind: 'mouse' } }),
    bad: noName({ kind: 'mouse' }),
  },
  'GET /devices/:id': { good: (_, { deviceId }) => ({ params: { id: deviceId } }), unknown: NO_ID },
  'PATCH /devices/:id': {
    good: (_, { deviceId }) => ({ params: { id: deviceId }, body: { notes: 'Seen.' } }),
    unknown: NO_ID,
    bad: noName({}),
  },
  'POST /devices/:id/builds': {
    good: (_, { deviceId }) => ({ params: { id: deviceId }, body: { name: unique('2.0') } }),
    unknown: NO_ID,
    bad: noName({}),
  },
  'GET /builds/:id': { good: (_, { buildId }) => ({ params: { id: buildId } }), unknown: NO_ID },
  'PATCH /builds/:id': {
    good: (_, { buildId }) => ({ params: { id: buildId }, body: { notes: 'Seen.' } }),
    unknown: NO_ID,
    bad: { body: { board: 7 }, field: 'board' },
  },

  'POST /download-tickets': {
    good: (_, { number }) => ({ body: { path: `/captures/${number}/file` } }),
    bad: { body: { path: '/people' }, field: 'path' },
  },
  'GET /downloads/:ticket': {
    good: async ({ services }, { number }) => ({
      params: { ticket: services.tickets.issue(await services.downloads.capture(number)).ticket },
    }),
    unknown: { ticket: 'x'.repeat(43) },
  },
  'GET /events': onNothing,
  'GET /openapi.json': onNothing,
  'GET /docs': onNothing,
};
