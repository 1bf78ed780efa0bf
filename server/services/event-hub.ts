import { randomUUID } from 'node:crypto';
import type { ServerEvent } from '#shared/contract/http/events';

/** An event with the id a reader sends along when it connects again. */
export interface NumberedEvent {
  readonly id: string;
  readonly event: ServerEvent;
}

/** Somebody who reads along. */
export interface Listener {
  readonly accountId: number;
  take(event: NumberedEvent): void;
  /** The stream has to end: its person may not read on, or the server stops. */
  end(): void;
}

const KEPT = 500;

/** Tells what happens to everyone who has a page open. */
export class EventHub {
  /** Ids of another run of the server mean nothing. */
  private readonly run = randomUUID().slice(0, 8);
  private readonly listeners = new Set<Listener>();
  private kept: NumberedEvent[] = [];
  private count = 0;

  publish(event: ServerEvent): void {
    const numbered = { id: `${this.run}-${++this.count}`, event };
    this.kept.push(numbered);
    if (this.kept.length > KEPT * 2) this.kept = this.kept.slice(-KEPT);
    for (const listener of this.listeners) listener.take(numbered);
  }

  /** @returns what stops the listening */
  listen(listener: Listener): () => void {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  }

  /** What came after the event of this id; null where that can't be told any more. */
  since(lastId: string): readonly NumberedEvent[] | null {
    if (lastId === this.lastId) return [];
    const index = this.kept.findIndex(({ id }) => id === lastId);
    return index < 0 ? null : this.kept.slice(index + 1);
  }

  get lastId(): string {
    return `${this.run}-${this.count}`;
  }

  endStreamsOf(accountId: number): void {
    for (const listener of [...this.listeners]) if (listener.accountId === accountId) listener.end();
  }

  endAllStreams(): void {
    for (const listener of [...this.listeners]) listener.end();
  }
}
