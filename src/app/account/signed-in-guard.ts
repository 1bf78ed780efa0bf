import { inject } from '@angular/core';
import type { CanActivateFn } from '@angular/router';
import { Router } from '@angular/router';
import { Session } from './session';

export const signedIn: CanActivateFn = (_route, state) => {
  if (inject(Session).account() !== null) return true;
  const queryParams = state.url === '/' ? {} : { to: state.url };
  return inject(Router).createUrlTree(['/sign-in'], { queryParams });
};
