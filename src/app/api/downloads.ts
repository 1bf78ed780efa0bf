import { DOCUMENT, inject, Injectable } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import { ApiClient } from './api-client';

/** Saves files of the server by a one-time address, so that no token stands in one. */
@Injectable({ providedIn: 'root' })
export class Downloads {
  private readonly api = inject(ApiClient);
  private readonly document = inject(DOCUMENT);

  /** @param path below `/api`, with its query */
  async save(path: string): Promise<void> {
    const { url } = await firstValueFrom(this.api.ask('POST /download-tickets', { body: { path } }));
    const link = this.document.createElement('a');
    link.href = url;
    link.download = '';
    link.click();
  }
}
