import bcrypt from 'bcrypt';
import type { EntityManager } from 'typeorm';
import type {
  Account as AccountView,
  Person,
  PersonChange,
  Preferences,
  Role,
} from '#shared/contract/http/accounts';
import type { Config } from '../config';
import type { Store } from '../data-source';
import { Account } from '../entities/account';
import { toAccountView, toPerson } from './account-view';
import { audit } from './audit';
import type { EventHub } from './event-hub';
import { Conflict, NotFound } from './service-error';
import { endSessions } from './session-service';

/** The people of the workspace. */
export class AccountService {
  constructor(
    private readonly store: Store,
    private readonly events: EventHub,
    private readonly config: Pick<Config, 'passwordCost'>,
  ) {}

  async list(): Promise<Person[]> {
    const accounts = await this.store.reader.find(Account, { order: { name: 'ASC', id: 'ASC' } });
    return accounts.map(toPerson);
  }

  async create(by: Account, person: { email: string; name: string; role: Role }): Promise<Person> {
    const created = await this.store.write(async (manager) => {
      if (await manager.existsBy(Account, { email: person.email })) {
        throw new Conflict('email-taken', 'Somebody already has this e-mail address.', [
          { path: 'email', message: 'already in use' },
        ]);
      }
      const account = await manager.save(Account, newAccount(person));
      await audit(manager, by, 'person.created', account.email, { role: account.role });
      return account;
    });
    this.events.publish({ kind: 'person', id: created.id });
    return toPerson(created);
  }

  /** Name, role, active or not. The last admin stays one. Whoever is deactivated is out at once. */
  async change(by: Account, id: number, change: PersonChange): Promise<Person> {
    const changed = await this.store.write(async (manager) => {
      const account = await findPerson(manager, id);
      await refuseLosingLastAdmin(manager, account, change);
      await manager.update(Account, id, { ...change, id });
      if (change.isActive === false) await endSessions(manager, id);
      await audit(manager, by, 'person.changed', account.email, { ...change });
      return findPerson(manager, id);
    });
    if (!changed.isActive) this.events.endStreamsOf(id);
    this.events.publish({ kind: 'person', id });
    return toPerson(changed);
  }

  async setPreferences(account: Account, preferences: Preferences): Promise<AccountView> {
    await this.store.write(async (manager) => {
      await manager.save(Account, { id: account.id, preferences });
    });
    return toAccountView({ ...account, preferences });
  }

  /** Makes an account that has its password already: for the demo. */
  async createWithPassword(person: {
    email: string;
    name: string;
    role: Role;
    password: string;
  }): Promise<Account> {
    const passwordHash = await bcrypt.hash(person.password, this.config.passwordCost);
    return this.store.write((manager) => manager.save(Account, { ...newAccount(person), passwordHash }));
  }

  async count(): Promise<number> {
    return this.store.reader.count(Account);
  }
}

async function findPerson(manager: EntityManager, id: number): Promise<Account> {
  const account = await manager.findOneBy(Account, { id });
  if (account === null) throw new NotFound('This person');
  return account;
}

async function refuseLosingLastAdmin(
  manager: EntityManager,
  account: Account,
  change: PersonChange,
): Promise<void> {
  if (account.role !== 'admin' || !account.isActive) return;
  const isLosing = change.isActive === false || (change.role ?? 'admin') !== 'admin';
  if (!isLosing || (await manager.countBy(Account, { role: 'admin', isActive: true })) > 1) return;
  throw new Conflict('last-admin', 'This is the last admin: make somebody else an admin first.');
}

/** An account as it begins. */
export function newAccount(person: { email: string; name: string; role: Role }): Omit<Account, 'id'> {
  return {
    email: person.email.toLowerCase(),
    name: person.name,
    role: person.role,
    isActive: true,
    passwordHash: null,
    preferences: {},
    tokenEpoch: 0,
    createdAt: Date.now(),
    lastSeenAt: null,
  };
}
