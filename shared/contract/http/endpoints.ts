import * as z from 'zod';
import * as accounts from './accounts';
import { captureNumberSchema } from './capture-number';
import * as captures from './captures';
import * as checks from './checks';
import * as decodes from './decodes';
import * as devices from './devices';
import * as downloads from './downloads';
import type { Endpoint } from './endpoint';
import { jobSchema } from './jobs';
import * as mapping from './mapping';
import * as rulebooks from './rulebooks';

const id = z.object({ id: z.coerce.number().int().positive() });
const number = z.object({ number: captureNumberSchema });

/**
 * Every way to ask the server, by method and path below `/api`. This table is the contract: the server takes its routes from it,
 * the API document is made from it. Who may use which stands in the server's table of permissions.
 */
export const ENDPOINTS = {
  'GET /workspace': {
    topic: 'Session',
    summary: 'Name of the workspace, version of the tool, limits',
    answer: accounts.workspaceSchema,
  },
  'POST /session': {
    topic: 'Session',
    summary: 'Sign in; sets the refresh cookie',
    body: accounts.signInSchema,
    answer: accounts.sessionSchema,
  },
  'POST /session/refresh': {
    topic: 'Session',
    summary: 'A new access token for the refresh cookie, which is exchanged too',
    answer: accounts.sessionSchema,
  },
  'DELETE /session': { topic: 'Session', summary: 'Sign out here' },
  'DELETE /sessions': { topic: 'Session', summary: 'Sign out everywhere' },
  'GET /me': { topic: 'Session', summary: 'The own account', answer: accounts.accountSchema },
  'PUT /me/preferences': {
    topic: 'Session',
    summary: 'Replace the own preferences',
    body: accounts.preferencesSchema,
    answer: accounts.accountSchema,
  },
  'POST /me/password': {
    topic: 'Session',
    summary: 'Change the own password; ends all other sessions and answers with a new one',
    body: accounts.passwordChangeSchema,
    answer: accounts.sessionSchema,
  },
  'POST /password-reset': {
    topic: 'Session',
    summary: 'Choose a password with a link; with the first link of a workspace, make the first admin',
    body: accounts.passwordResetSchema,
  },
  'POST /password-reset/check': {
    topic: 'Session',
    summary: 'What a link is for',
    body: accounts.resetCheckSchema,
    answer: accounts.resetStateSchema,
  },

  'GET /people': { topic: 'People', summary: 'All people', answer: z.array(accounts.personSchema) },
  'POST /people': {
    topic: 'People',
    summary: 'Create an account without a password',
    body: accounts.newPersonSchema,
    answer: accounts.personSchema,
    status: 201,
  },
  'PATCH /people/:id': {
    topic: 'People',
    summary: 'Change name or role, deactivate, activate',
    params: id,
    body: accounts.personChangeSchema,
    answer: accounts.personSchema,
  },
  'POST /people/:id/reset-link': {
    topic: 'People',
    summary: 'A link that lets the person choose a password once; ends older links',
    params: id,
    answer: accounts.resetLinkSchema,
    status: 201,
  },

  'POST /uploads/check': {
    topic: 'Captures',
    summary: 'Would a file of this name and size be taken? Refuses with the reason',
    body: captures.uploadCheckSchema,
  },
  'POST /captures': {
    topic: 'Captures',
    summary: 'Upload a capture file',
    body: captures.newCaptureSchema,
    isUpload: true,
    answer: captures.captureSchema,
    status: 201,
  },
  'GET /captures': {
    topic: 'Captures',
    summary: 'A page of captures, with counts of the workspace',
    query: captures.captureQuerySchema,
    answer: captures.capturePageSchema,
  },
  'GET /captures/:number': {
    topic: 'Captures',
    summary: 'One capture',
    params: number,
    answer: captures.captureSchema,
  },
  'PATCH /captures/:number': {
    topic: 'Captures',
    summary: 'Change what is known about a capture, or its build',
    params: number,
    body: captures.captureChangeSchema,
    answer: captures.captureSchema,
  },
  'DELETE /captures/:number': {
    topic: 'Captures',
    summary: 'Delete a capture with its decodes; the stored file goes with its last capture',
    params: number,
  },
  'GET /captures/:number/file': {
    topic: 'Captures',
    summary: 'The file as it was uploaded',
    params: number,
    media: 'application/octet-stream',
  },
  'GET /captures/:number/lines': {
    topic: 'Mapping',
    summary: 'Channels, suggestions, presets that fit, and a preview',
    params: number,
    query: mapping.linesQuerySchema,
    answer: mapping.linesSchema,
  },
  'POST /captures/:number/preview': {
    topic: 'Mapping',
    summary: 'What a mapping would make of the capture; nothing is stored',
    params: number,
    body: mapping.newPreviewSchema,
    answer: mapping.previewSchema,
  },
  'GET /presets': { topic: 'Mapping', summary: 'All presets', answer: z.array(mapping.presetSchema) },
  'POST /presets': {
    topic: 'Mapping',
    summary: 'Save a line map that recognises a bench by its channel names',
    body: mapping.newPresetSchema,
    answer: mapping.presetSchema,
    status: 201,
  },
  'DELETE /presets/:id': { topic: 'Mapping', summary: 'Delete a preset', params: id },

  'POST /captures/:number/decodes': {
    topic: 'Decodes',
    summary: 'Ask for a decode; answers with the job',
    params: number,
    body: decodes.newDecodeSchema,
    answer: jobSchema,
    status: 202,
  },
  'POST /captures/decodes': {
    topic: 'Decodes',
    summary: 'Ask for decodes of many captures with one map',
    body: decodes.batchDecodeSchema,
    answer: decodes.batchAnswerSchema,
    status: 202,
  },
  'GET /captures/:number/decodes': {
    topic: 'Decodes',
    summary: 'All decodes of a capture, the latest first',
    params: number,
    answer: z.array(decodes.decodeSchema),
  },
  'GET /decodes/:id': {
    topic: 'Decodes',
    summary: 'One decode',
    params: id,
    answer: decodes.decodeSchema,
  },
  'GET /decodes/:id/result': {
    topic: 'Decodes',
    summary: 'The result as the command line writes it',
    params: id,
    query: decodes.productQuerySchema,
    media: 'application/json',
  },
  'GET /decodes/:id/tape': {
    topic: 'Decodes',
    summary: 'Everything the tape draws, packed for the browser',
    params: id,
    media: 'application/octet-stream',
  },
  'GET /decodes/:id/log': {
    topic: 'Decodes',
    summary: 'The decoded log in plain text',
    params: id,
    query: decodes.productQuerySchema,
    media: 'text/plain',
  },
  'GET /decodes/:id/packets.csv': {
    topic: 'Decodes',
    summary: 'The packets as a table',
    params: id,
    media: 'text/csv',
  },

  'POST /decodes/:id/checks': {
    topic: 'Checks',
    summary: 'Ask for a check of a decode against a rulebook; answers with the job',
    params: id,
    body: checks.newCheckSchema,
    answer: jobSchema,
    status: 202,
  },
  'GET /decodes/:id/checks': {
    topic: 'Checks',
    summary: 'All checks of a decode, the latest first',
    params: id,
    answer: z.array(checks.checkSummarySchema),
  },
  'GET /checks/:id': {
    topic: 'Checks',
    summary: 'Rules and findings of a check',
    params: id,
    answer: checks.checkSchema,
  },
  'GET /checks/:id/changes': {
    topic: 'Checks',
    summary: 'What changed since another check of the same capture',
    params: id,
    query: checks.changesQuerySchema,
    answer: checks.checkChangesSchema,
  },
  'GET /rulebooks': {
    topic: 'Checks',
    summary: 'The rulebooks',
    answer: z.array(rulebooks.rulebookSummarySchema),
  },
  'GET /rulebooks/:key': {
    topic: 'Checks',
    summary: 'A rulebook with all its rules',
    params: z.object({ key: z.string().min(1).max(60) }),
    answer: rulebooks.rulebookViewSchema,
  },

  'GET /jobs': { topic: 'Jobs', summary: 'Own jobs that are queued or running', answer: z.array(jobSchema) },
  'GET /jobs/:id': { topic: 'Jobs', summary: 'One job', params: id, answer: jobSchema },
  'DELETE /jobs/:id': { topic: 'Jobs', summary: 'Cancel a job', params: id, answer: jobSchema },

  'GET /devices': {
    topic: 'Devices',
    summary: 'All devices with their builds',
    answer: z.array(devices.deviceSchema),
  },
  'POST /devices': {
    topic: 'Devices',
    summary: 'Create a device',
    body: devices.newDeviceSchema,
    answer: devices.deviceSchema,
    status: 201,
  },
  'GET /devices/:id': { topic: 'Devices', summary: 'One device', params: id, answer: devices.deviceSchema },
  'PATCH /devices/:id': {
    topic: 'Devices',
    summary: 'Change a device',
    params: id,
    body: devices.deviceChangeSchema,
    answer: devices.deviceSchema,
  },
  'POST /devices/:id/builds': {
    topic: 'Devices',
    summary: 'Create a build of a device',
    params: id,
    body: devices.newBuildSchema,
    answer: devices.buildSchema,
    status: 201,
  },
  'GET /builds/:id': {
    topic: 'Devices',
    summary: 'One build with its captures',
    params: id,
    answer: devices.buildDetailSchema,
  },
  'PATCH /builds/:id': {
    topic: 'Devices',
    summary: 'Change a build',
    params: id,
    body: devices.buildChangeSchema,
    answer: devices.buildSchema,
  },

  'POST /download-tickets': {
    topic: 'Downloads',
    summary: 'A one-time address for a download, so that no token stands in an address',
    body: downloads.newTicketSchema,
    answer: downloads.ticketSchema,
    status: 201,
  },
  'GET /downloads/:ticket': {
    topic: 'Downloads',
    summary: 'The download a ticket stands for, once',
    params: z.object({ ticket: z.string().min(20).max(100) }),
    media: 'application/octet-stream',
  },
  'GET /events': {
    topic: 'Events',
    summary: 'Server-sent events: progress of jobs and changes; one stream for every topic',
    media: 'text/event-stream',
  },
  'GET /openapi.json': {
    topic: 'API',
    summary: 'This contract as an OpenAPI 3.1 document',
    media: 'application/json',
  },
  'GET /docs': { topic: 'API', summary: 'This contract as a page', media: 'text/html' },
} as const satisfies Record<string, Endpoint>;

/** Method and path, such as `GET /captures/:number`. */
export type EndpointKey = keyof typeof ENDPOINTS;
