import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ROLES } from '#shared/contract/http/accounts';
import { permissionOf } from '../permissions';

/** Who may use an endpoint, in words. */
export function describePermission(key: EndpointKey): string {
  const permission = permissionOf(key);
  if (permission === 'public') return 'anybody, signed in or not';
  const any = permission.any.length === ROLES.length ? 'everybody signed in' : permission.any.join(', ');
  if (permission.own === undefined || permission.own.length === 0) return any;
  return `${any}; on their own things also ${permission.own.join(', ')}`;
}
