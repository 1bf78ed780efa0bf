import { DestroyRef, inject, Injectable } from '@angular/core';
import { EventSourceParserStream } from 'eventsource-parser/stream';
import { filter, firstValueFrom, Subject } from 'rxjs';
import type { ServerEvent } from '#shared/contract/http/events';
import { Session } from '../account/session';

/** What the pages hear: the server's events, or that some were missed and what is shown has to be asked for again. */
export type Heard = ServerEvent | { readonly kind: 'missed' };

const LOCK = 'lw-events';
const SHORTEST_WAIT_MS = 1000;
const LONGEST_WAIT_MS = 30_000;

/**
 * The server's events. A browser allows few connections to one server, so one tab of all reads the stream, holding a lock, and tells
 * the others over a channel; when it closes, the next takes over.
 */
@Injectable({ providedIn: 'root' })
export class EventStream {
  private readonly session = inject(Session);
  private readonly channel = new BroadcastChannel('lw-events');
  private readonly heard = new Subject<Heard>();
  private readonly closing = new AbortController();
  private lastId = '';

  readonly events = this.heard.asObservable();

  constructor() {
    this.channel.onmessage = ({ data }: MessageEvent<Heard>) => this.heard.next(data);
    inject(DestroyRef).onDestroy(() => {
      this.closing.abort();
      this.channel.close();
    });
    void navigator.locks
      .request(LOCK, { signal: this.closing.signal }, () => this.readForEver())
      // The page was closed while it waited for the lock.
      .catch(() => undefined);
  }

  of<K extends ServerEvent['kind']>(kind: K) {
    return this.heard.pipe(
      filter((event): event is Extract<ServerEvent, { kind: K }> => event.kind === kind),
    );
  }

  private async readForEver(): Promise<void> {
    let waitMs = SHORTEST_WAIT_MS;
    while (!this.closing.signal.aborted) {
      try {
        await this.readOnce();
        waitMs = SHORTEST_WAIT_MS;
      } catch {
        // The connection was lost or refused: try again, more slowly each time.
        waitMs = Math.min(LONGEST_WAIT_MS, waitMs * 2);
      }
      await new Promise((resolve) => setTimeout(resolve, waitMs));
    }
  }

  private async readOnce(): Promise<void> {
    if (this.session.account() === null) return;
    const token = this.session.freshToken() ?? (await firstValueFrom(this.session.refresh()));
    const headers: Record<string, string> = { Authorization: `Bearer ${token}` };
    if (this.lastId !== '') headers['last-event-id'] = this.lastId;
    const response = await fetch('/api/events', { headers, signal: this.closing.signal });
    if (!response.ok || response.body === null) throw new Error(`status ${response.status}`);
    const isFirst = this.lastId === '';
    const messages = response.body
      .pipeThrough(new TextDecoderStream() as ReadableWritablePair<string, Uint8Array<ArrayBuffer>>)
      .pipeThrough(new EventSourceParserStream());
    for await (const { id, data } of messages) {
      if (id !== undefined) this.lastId = id;
      const event = JSON.parse(data) as ServerEvent;
      this.tell(event);
      if (event.kind === 'hello' && !event.isComplete && !isFirst) this.tell({ kind: 'missed' });
    }
  }

  private tell(event: Heard): void {
    this.heard.next(event);
    this.channel.postMessage(event);
  }
}
