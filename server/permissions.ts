import type { Role } from '#shared/contract/http/accounts';
import type { EndpointKey } from '#shared/contract/http/endpoints';

/**
 * Who may use an endpoint. `public`: whoever asks. Else `any` lists the roles that may use it on everything, `own` those that may
 * use it only on what is theirs.
 */
export type Permission = 'public' | { readonly any: readonly Role[]; readonly own?: readonly Role[] };

const ALL = ['firmware', 'qa', 'support', 'admin'] as const;
const EVERYONE = { any: ALL } as const;
const ADMIN = { any: ['admin'] } as const;
const NOT_SUPPORT = { any: ['firmware', 'qa', 'admin'] } as const;
const OWN_OR_ADMIN = { any: ['admin'], own: ['firmware', 'qa', 'support'] } as const;

/**
 * The one table of permissions: routes, tests and the API document are driven by it. An endpoint that is missing here does not
 * compile, and a route that is not in it stops the server at its start.
 */
export const PERMISSIONS = {
  'GET /workspace': 'public',
  'POST /session': 'public',
  'POST /session/refresh': 'public',
  'DELETE /session': 'public',
  'DELETE /sessions': EVERYONE,
  'GET /me': EVERYONE,
  'PUT /me/preferences': EVERYONE,
  'POST /me/password': EVERYONE,
  'POST /password-reset': 'public',
  'POST /password-reset/check': 'public',

  'GET /people': ADMIN,
  'POST /people': ADMIN,
  'PATCH /people/:id': ADMIN,
  'POST /people/:id/reset-link': ADMIN,

  'POST /uploads/check': EVERYONE,
  'POST /captures': EVERYONE,
  'GET /captures': EVERYONE,
  'GET /captures/:number': EVERYONE,
  'PATCH /captures/:number': EVERYONE,
  'DELETE /captures/:number': OWN_OR_ADMIN,
  'GET /captures/:number/file': EVERYONE,
  'GET /captures/:number/lines': EVERYONE,
  'POST /captures/:number/preview': EVERYONE,
  'GET /presets': EVERYONE,
  'POST /presets': EVERYONE,
  'DELETE /presets/:id': OWN_OR_ADMIN,

  'POST /captures/:number/decodes': EVERYONE,
  'POST /captures/decodes': EVERYONE,
  'GET /captures/:number/decodes': EVERYONE,
  'GET /decodes/:id': EVERYONE,
  'GET /decodes/:id/result': EVERYONE,
  'GET /decodes/:id/tape': EVERYONE,
  'GET /decodes/:id/log': EVERYONE,
  'GET /decodes/:id/packets.csv': EVERYONE,

  'POST /decodes/:id/checks': EVERYONE,
  'GET /decodes/:id/checks': EVERYONE,
  'GET /checks/:id': EVERYONE,
  'GET /checks/:id/changes': EVERYONE,
  'GET /rulebooks': EVERYONE,
  'GET /rulebooks/:key': EVERYONE,

  'GET /jobs': EVERYONE,
  'GET /jobs/:id': EVERYONE,
  'DELETE /jobs/:id': OWN_OR_ADMIN,

  'GET /devices': EVERYONE,
  'POST /devices': NOT_SUPPORT,
  'GET /devices/:id': EVERYONE,
  'PATCH /devices/:id': NOT_SUPPORT,
  'POST /devices/:id/builds': NOT_SUPPORT,
  'GET /builds/:id': EVERYONE,
  'PATCH /builds/:id': NOT_SUPPORT,

  'POST /download-tickets': EVERYONE,
  // The ticket itself is the permission: it was given to somebody who may have what it stands for.
  'GET /downloads/:ticket': 'public',
  'GET /events': EVERYONE,
  'GET /openapi.json': 'public',
  'GET /docs': 'public',
} as const satisfies Record<EndpointKey, Permission>;

export type PublicKey = {
  [K in EndpointKey]: (typeof PERMISSIONS)[K] extends 'public' ? K : never;
}[EndpointKey];

/** Endpoints where it matters whose the thing is. */
export type OwnedKey = {
  [K in EndpointKey]: (typeof PERMISSIONS)[K] extends { own: unknown } ? K : never;
}[EndpointKey];

interface Somebody {
  readonly id: number;
  readonly role: Role;
}

export function permissionOf(key: EndpointKey): Permission {
  return PERMISSIONS[key];
}

/** May this role use the endpoint at all, if only on what is its own? */
export function mayAsk(key: EndpointKey, role: Role): boolean {
  const permission = permissionOf(key);
  return permission === 'public' || permission.any.includes(role) || permission.own?.includes(role) === true;
}

/** May this person use the endpoint on a thing of that owner? */
export function mayTouch(key: EndpointKey, who: Somebody, ownerId: number): boolean {
  const permission = permissionOf(key);
  if (permission === 'public' || permission.any.includes(who.role)) return true;
  return permission.own?.includes(who.role) === true && who.id === ownerId;
}
