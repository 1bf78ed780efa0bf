import type { EntityManager } from 'typeorm';
import type { Account } from '../entities/account';
import { Event } from '../entities/event';

/** Who did something; null: the server itself. */
export type Actor = Pick<Account, 'id' | 'name'> | null;

/** Writes a line of the audit trail in the transaction of the change itself. */
export async function audit(
  manager: EntityManager,
  by: Actor,
  what: string,
  subject: string,
  details: Record<string, unknown> = {},
): Promise<void> {
  await manager.save(Event, {
    at: Date.now(),
    accountId: by?.id ?? null,
    who: by?.name ?? 'the server',
    what,
    subject,
    details,
  });
}
