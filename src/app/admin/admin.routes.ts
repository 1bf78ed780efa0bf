import type { Routes } from '@angular/router';
import { PeoplePage } from './people-page';

export default [
  { path: '', pathMatch: 'full', redirectTo: 'people' },
  { path: 'people', title: 'People', component: PeoplePage },
] satisfies Routes;
