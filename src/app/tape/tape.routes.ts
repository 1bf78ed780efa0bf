import type { ResolveFn, Routes } from '@angular/router';
import { TapePage } from './tape-page';

const numberAsTitle: ResolveFn<string> = (route) => route.paramMap.get('number') ?? 'Tape';

export default [{ path: '', title: numberAsTitle, component: TapePage }] satisfies Routes;
