import type { ErrorHandler } from '@angular/core';
import { inject, Injectable, Injector } from '@angular/core';
import { Notices } from '../ui/notices';

const STALE_CHUNK = /dynamically imported module|Loading chunk|module script failed/i;

/** Faults of this page, which no caller expected: said to the person and to the console, for whoever looks into it. */
@Injectable()
export class FaultHandler implements ErrorHandler {
  private readonly injector = inject(Injector);

  handleError(error: unknown): void {
    const message = error instanceof Error ? error.message : String(error);
    // eslint-disable-next-line no-console -- the one place where a fault leaves a trace with its stack
    console.error(error);
    const notices = this.injector.get(Notices);
    if (STALE_CHUNK.test(message)) {
      notices.fail('Linewitness was updated. Load the page again.', {
        label: 'Load again',
        run: () => location.reload(),
      });
    } else notices.fail('Something went wrong in this page. Nothing was changed on the server.');
  }
}
