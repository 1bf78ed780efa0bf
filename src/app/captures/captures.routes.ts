import type { Routes } from '@angular/router';
import { CapturesPage } from './captures-page';

export default [{ path: '', component: CapturesPage }] satisfies Routes;
