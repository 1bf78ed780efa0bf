import { createParser } from 'eventsource-parser';
import type { ServerEvent } from '#shared/contract/http/events';
import { serverEventSchema } from '#shared/contract/http/events';

export interface ReceivedEvent {
  readonly id: string;
  readonly event: ServerEvent;
}

/** One open stream of events, read as a browser does it. */
export class EventReader {
  readonly received: ReceivedEvent[] = [];
  private readonly leave = new AbortController();
  /** Resolves when the stream has ended, on whichever side. */
  readonly ended: Promise<void>;

  private constructor(body: ReadableStream<Uint8Array>) {
    this.ended = this.read(body);
  }

  static async open(url: string, token: string, lastEventId?: string): Promise<EventReader> {
    const leave = new AbortController();
    const answer = await fetch(`${url}/api/events`, {
      headers: {
        authorization: `Bearer ${token}`,
        ...(lastEventId === undefined ? {} : { 'last-event-id': lastEventId }),
      },
      signal: leave.signal,
    });
    if (!answer.ok) throw new Error(`the stream of events answers ${answer.status}`);
    const reader = new EventReader(answer.body!);
    reader.leave.signal.addEventListener('abort', () => leave.abort());
    return reader;
  }

  of<K extends ServerEvent['kind']>(kind: K): Extract<ServerEvent, { kind: K }>[] {
    return this.received
      .map(({ event }) => event)
      .filter((event): event is Extract<ServerEvent, { kind: K }> => event.kind === kind);
  }

  async close(): Promise<void> {
    this.leave.abort();
    await this.ended;
  }

  private async read(body: ReadableStream<Uint8Array>): Promise<void> {
    const parser = createParser({
      onEvent: ({ id, event, data }) => {
        const parsed = serverEventSchema.parse(JSON.parse(data));
        if (event !== parsed.kind) throw new Error(`the event ${parsed.kind} is named ${event}`);
        this.received.push({ id: id!, event: parsed });
      },
    });
    const decoder = new TextDecoder();
    try {
      for await (const chunk of body as unknown as AsyncIterable<Uint8Array>) {
        parser.feed(decoder.decode(chunk, { stream: true }));
      }
    } catch (error) {
      // Leaving on purpose arrives as an error too; so does a connection the server cut.
      if (!(error instanceof Error) || !/abort|terminated/i.test(`${error.name} ${error.message}`))
        throw error;
    }
  }
}
