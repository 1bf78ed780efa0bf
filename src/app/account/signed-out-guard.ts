import { inject } from '@angular/core';
import type { CanActivateFn } from '@angular/router';
import { Router } from '@angular/router';
import { Session } from './session';

export const signedOut: CanActivateFn = () =>
  inject(Session).account() === null || inject(Router).createUrlTree(['/captures']);
