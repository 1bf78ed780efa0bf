import { provideHttpClient, withInterceptors } from '@angular/common/http';
import type { ApplicationConfig } from '@angular/core';
import {
  ErrorHandler,
  inject,
  provideAppInitializer,
  provideBrowserGlobalErrorListeners,
} from '@angular/core';
import {
  provideRouter,
  TitleStrategy,
  withComponentInputBinding,
  withInMemoryScrolling,
} from '@angular/router';
import { Session } from './account/session';
import { sessionInterceptor } from './api/session-interceptor';
import { routes } from './app.routes';
import { FaultHandler } from './shell/fault-handler';
import { PageTitle } from './shell/page-title';
import { Theme } from './shell/theme';

export const appConfig: ApplicationConfig = {
  providers: [
    provideBrowserGlobalErrorListeners(),
    provideHttpClient(withInterceptors([sessionInterceptor])),
    provideRouter(
      routes,
      withComponentInputBinding(),
      withInMemoryScrolling({ scrollPositionRestoration: 'enabled' }),
    ),
    provideAppInitializer(() => {
      inject(Theme).apply();
      return inject(Session).restore();
    }),
    { provide: TitleStrategy, useClass: PageTitle },
    { provide: ErrorHandler, useClass: FaultHandler },
  ],
};
