import { inject } from '@angular/core';
import type { CanActivateFn } from '@angular/router';
import { RedirectCommand, Router } from '@angular/router';
import type { Role } from '#shared/contract/http/accounts';
import { Session } from './session';

/** Says that the role does not allow it, under the address that was asked for. */
export function withRole(...roles: Role[]): CanActivateFn {
  return () => {
    if (inject(Session).has(...roles)) return true;
    const tree = inject(Router).createUrlTree(['/not-allowed'], { queryParams: { needs: roles.join() } });
    return new RedirectCommand(tree, { skipLocationChange: true });
  };
}
