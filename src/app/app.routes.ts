import type { Routes } from '@angular/router';
import { signedIn } from './account/signed-in-guard';
import { signedOut } from './account/signed-out-guard';
import { withRole } from './account/role-guard';

export const routes: Routes = [
  {
    path: 'sign-in',
    title: 'Sign in',
    canActivate: [signedOut],
    loadComponent: () => import('./account/sign-in-page').then((m) => m.SignInPage),
  },
  {
    path: 'set-password',
    title: 'Choose a password',
    loadComponent: () => import('./account/set-password-page').then((m) => m.SetPasswordPage),
  },
  {
    path: '',
    canActivate: [signedIn],
    loadComponent: () => import('./shell/shell').then((m) => m.Shell),
    children: [
      { path: '', pathMatch: 'full', redirectTo: 'captures' },
      {
        path: 'captures',
        children: [
          {
            path: '',
            title: 'Captures',
            loadChildren: () => import('./captures/captures.routes'),
          },
          { path: ':number', loadChildren: () => import('./tape/tape.routes') },
        ],
      },
      { path: 'devices', title: 'Devices', loadChildren: () => import('./devices/devices.routes') },
      {
        path: 'admin',
        title: 'Admin',
        canActivate: [withRole('admin')],
        loadChildren: () => import('./admin/admin.routes'),
      },
      {
        path: 'account',
        title: 'Own account',
        loadComponent: () => import('./account/account-page').then((m) => m.AccountPage),
      },
      {
        path: 'not-allowed',
        title: 'Not allowed',
        loadComponent: () => import('./shell/not-allowed-page').then((m) => m.NotAllowedPage),
      },
      {
        path: '**',
        title: 'Not found',
        loadComponent: () => import('./shell/not-found-page').then((m) => m.NotFoundPage),
      },
    ],
  },
];
