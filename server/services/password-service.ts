import bcrypt from 'bcrypt';
import type { EntityManager } from 'typeorm';
import { IsNull, MoreThan } from 'typeorm';
import type { PasswordChange, PasswordReset, ResetLink, ResetState } from '#shared/contract/http/accounts';
import type { Config } from '../config';
import type { Store } from '../data-source';
import { Account } from '../entities/account';
import { ResetToken } from '../entities/reset-token';
import { newAccount } from './account-service';
import type { Actor } from './audit';
import { audit } from './audit';
import type { EventHub } from './event-hub';
import { hashSecret, newSecret } from './secret';
import { Conflict, Forbidden, Invalid, NotFound } from './service-error';
import { endSessions } from './session-service';

const LINK_MS = 3 * 24 * 3600_000;

/** Links that let a person choose a password once, and changes of passwords. */
export class PasswordService {
  constructor(
    private readonly store: Store,
    private readonly events: EventHub,
    private readonly config: Pick<Config, 'publicUrl' | 'passwordCost'>,
  ) {}

  /** Older links of the person end. */
  async makeLink(by: Actor, accountId: number): Promise<ResetLink> {
    return this.store.write(async (manager) => {
      const account = await manager.findOneBy(Account, { id: accountId });
      if (account === null) throw new NotFound('This person');
      if (!account.isActive) throw new Conflict('inactive', 'This person is deactivated.');
      await manager.delete(ResetToken, { accountId });
      await audit(manager, by, 'person.reset-link', account.email);
      return this.storeLink(manager, accountId);
    });
  }

  /** The one-time link that makes the first admin; null once there is an account. */
  async makeFirstAdminLink(): Promise<ResetLink | null> {
    return this.store.write(async (manager) => {
      if ((await manager.count(Account)) > 0) return null;
      await manager.delete(ResetToken, { accountId: IsNull() });
      return this.storeLink(manager, null);
    });
  }

  async check(token: string): Promise<ResetState> {
    const link = await findLink(this.store.reader, token);
    return {
      purpose: link.account === null ? 'first-admin' : 'reset',
      email: link.account?.email ?? null,
      name: link.account?.name ?? null,
      expiresAt: new Date(link.expiresAt).toISOString(),
    };
  }

  /** Uses a link up: sets the password, or makes the first admin. Every session of the person ends. */
  async reset(input: PasswordReset): Promise<void> {
    await findLink(this.store.reader, input.token);
    const passwordHash = await bcrypt.hash(input.password, this.config.passwordCost);
    const id = await this.store.write(async (manager) => {
      // Looked up again: hashing took a while, and a link works once.
      const link = await findLink(manager, input.token);
      await manager.update(ResetToken, link.id, { usedAt: Date.now() });
      if (link.account === null) return makeFirstAdmin(manager, input, passwordHash);
      await manager.update(Account, link.account.id, { passwordHash });
      await endSessions(manager, link.account.id);
      await audit(manager, link.account, 'person.password-reset', link.account.email);
      return link.account.id;
    });
    this.events.endStreamsOf(id);
    this.events.publish({ kind: 'person', id });
  }

  /** Every session of the person ends. */
  async change(account: Account, { current, next }: PasswordChange): Promise<void> {
    const isRight = account.passwordHash !== null && (await bcrypt.compare(current, account.passwordHash));
    if (!isRight) {
      throw new Invalid('wrong-password', 'The current password is wrong.', {
        fields: [{ path: 'current', message: 'wrong' }],
      });
    }
    const passwordHash = await bcrypt.hash(next, this.config.passwordCost);
    await this.store.write(async (manager) => {
      await manager.update(Account, account.id, { passwordHash });
      await endSessions(manager, account.id);
      await audit(manager, account, 'person.password-changed', account.email);
    });
    this.events.endStreamsOf(account.id);
  }

  private async storeLink(manager: EntityManager, accountId: number | null): Promise<ResetLink> {
    const secret = newSecret();
    const expiresAt = Date.now() + LINK_MS;
    await manager.insert(ResetToken, { hash: hashSecret(secret), accountId, expiresAt, usedAt: null });
    // Behind the number sign, so that it reaches no log of any server.
    return {
      url: `${this.config.publicUrl}/set-password#${secret}`,
      expiresAt: new Date(expiresAt).toISOString(),
    };
  }
}

async function findLink(manager: EntityManager, token: string): Promise<ResetToken> {
  const link = await manager.findOne(ResetToken, {
    where: { hash: hashSecret(token), expiresAt: MoreThan(Date.now()), usedAt: IsNull() },
    relations: { account: true },
  });
  if (link === null || link.account?.isActive === false) {
    throw new Forbidden('link-ended', 'This link has ended. Ask an admin for a new one.');
  }
  return link;
}

async function makeFirstAdmin(
  manager: EntityManager,
  { name, email }: PasswordReset,
  passwordHash: string,
): Promise<number> {
  const missing = Object.entries({ name, email }).filter(([, value]) => value === undefined);
  if (name === undefined || email === undefined) {
    throw new Invalid('incomplete', 'The first admin needs a name and an e-mail address.', {
      fields: missing.map(([path]) => ({ path, message: 'missing' })),
    });
  }
  if ((await manager.count(Account)) > 0) throw new Conflict('not-first', 'There is an account already.');
  const account = await manager.save(Account, {
    ...newAccount({ email, name, role: 'admin' }),
    passwordHash,
  });
  await audit(manager, account, 'person.first-admin', account.email);
  return account.id;
}
