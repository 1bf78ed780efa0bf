import { newSecret } from './secret';
import { NotFound } from './service-error';

const TICKET_MS = 60_000;
const MOST_TICKETS = 10_000;

interface Ticket<T> {
  readonly subject: T;
  readonly expiresAt: number;
}

/** One-time tickets, so that no token has to stand in an address. They do not outlive the process. */
export class TicketService<T> {
  private readonly tickets = new Map<string, Ticket<T>>();

  issue(subject: T): { ticket: string; expiresAt: number } {
    this.forgetOld();
    const ticket = newSecret();
    const expiresAt = Date.now() + TICKET_MS;
    this.tickets.set(ticket, { subject, expiresAt });
    return { ticket, expiresAt };
  }

  /** What the ticket stands for. It works once. @throws NotFound where it is used up or too old */
  redeem(ticket: string): T {
    const found = this.tickets.get(ticket);
    this.tickets.delete(ticket);
    if (found === undefined || found.expiresAt < Date.now()) throw new NotFound('This download');
    return found.subject;
  }

  private forgetOld(): void {
    const now = Date.now();
    for (const [ticket, { expiresAt }] of this.tickets) {
      // In order of time: the rest is younger.
      if (expiresAt >= now && this.tickets.size < MOST_TICKETS) return;
      this.tickets.delete(ticket);
    }
  }
}
