import type { Routes } from '@angular/router';
import { BuildPage } from './build-page';
import { DevicePage } from './device-page';
import { DevicesPage } from './devices-page';

export default [
  { path: '', component: DevicesPage },
  { path: ':id', title: 'Device', component: DevicePage },
  { path: ':id/builds/:buildId', title: 'Build', component: BuildPage },
] satisfies Routes;
