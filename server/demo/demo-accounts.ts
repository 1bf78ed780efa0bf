import { randomInt } from 'node:crypto';
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Account } from '../entities/account';
import type { Services } from '../services/services';
import type { DemoPerson } from './demo-script';
import { DEMO_PEOPLE } from './demo-script';

/** Without letters and digits that look alike. */
const ALPHABET = 'abcdefghjkmnpqrstuvwxyz23456789';
const GROUPS = 4;
const GROUP_LENGTH = 4;

export interface DemoLogin extends DemoPerson {
  readonly password: string;
}

/** Makes the demo's people. The passwords are kept in a file for its owner's eyes only. */
export async function makeDemoAccounts(
  { accounts }: Services,
  dataDir: string,
  onePassword: string | undefined,
): Promise<{ logins: readonly DemoLogin[]; people: ReadonlyMap<string, Account>; file: string }> {
  const logins = DEMO_PEOPLE.map((person) => ({ ...person, password: onePassword ?? randomPassword() }));
  const file = join(dataDir, 'secrets', 'demo-accounts.txt');
  writeFileSync(file, `${listLogins(logins).join('\n')}\n`, { mode: 0o600 });
  const people = new Map<string, Account>();
  for (const { key, ...person } of logins) people.set(key, await accounts.createWithPassword(person));
  return { logins, people, file };
}

/** A line for each: role, e-mail address, password. */
export function listLogins(logins: readonly DemoLogin[]): string[] {
  const width = Math.max(...logins.map(({ email }) => email.length));
  return logins.map(({ role, email, password }) => `${role.padEnd(9)} ${email.padEnd(width)}  ${password}`);
}

/** About 79 bits. */
function randomPassword(): string {
  const group = () =>
    Array.from({ length: GROUP_LENGTH }, () => ALPHABET[randomInt(ALPHABET.length)]).join('');
  return Array.from({ length: GROUPS }, group).join('-');
}
