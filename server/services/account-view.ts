import type { Account as AccountView, Person, PersonRef } from '#shared/contract/http/accounts';
import type { Account } from '../entities/account';

/** First letters of the first and the last word of a name. */
export function initialsOf(name: string): string {
  const words = name.trim().split(/\s+/);
  const chosen = words.length === 1 ? words : [words[0], words[words.length - 1]];
  return chosen.map((word) => Array.from(word)[0]?.toUpperCase() ?? '').join('');
}

export function toPersonRef({ id, name }: Pick<Account, 'id' | 'name'>): PersonRef {
  return { id, name, initials: initialsOf(name) };
}

export function toPerson(account: Account): Person {
  return {
    ...toPersonRef(account),
    email: account.email,
    role: account.role,
    isActive: account.isActive,
    hasPassword: account.passwordHash !== null,
    lastSeenAt: account.lastSeenAt === null ? null : new Date(account.lastSeenAt).toISOString(),
    createdAt: new Date(account.createdAt).toISOString(),
  };
}

export function toAccountView(account: Account): AccountView {
  const { email, role, preferences } = account;
  return { ...toPersonRef(account), email, role, preferences };
}
