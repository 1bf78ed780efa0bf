import { randomUUID } from 'node:crypto';
import bcrypt from 'bcrypt';
import jwt from 'jsonwebtoken';
import type { EntityManager } from 'typeorm';
import { LessThan } from 'typeorm';
import type { Session, SignIn } from '#shared/contract/http/accounts';
import type { Config } from '../config';
import type { Store } from '../data-source';
import { Account } from '../entities/account';
import { RefreshToken } from '../entities/refresh-token';
import { toAccountView } from './account-view';
import { audit } from './audit';
import { FailureBrake } from './failure-brake';
import { hashSecret, newSecret } from './secret';
import { Unauthorized } from './service-error';

export const ACCESS_MS = 10 * 60_000;
export const REFRESH_MS = 14 * 24 * 3600_000;
/** Two tabs that refresh at once present the same token: the second within this time is no theft. */
export const REUSE_GRACE_MS = 20_000;

/** What access tokens are signed for. */
export const TOKEN_PARTIES = { issuer: 'linewitness', audience: 'linewitness' } as const;
export const TOKEN_ALGORITHM = 'HS256';

/** What an access token says. */
export interface AccessClaims {
  readonly sub: string;
  readonly epoch: number;
  readonly exp: number;
}

export interface OpenedSession {
  readonly session: Session;
  /** For the cookie. */
  readonly refreshToken: string;
}

/** Sign-in by e-mail and password, short access tokens, rotating refresh tokens. */
export class SessionService {
  private readonly brake = new FailureBrake();
  /** Compared with where there is no account, so that the answer takes as long. */
  private readonly decoy: Promise<string>;

  constructor(
    private readonly store: Store,
    private readonly config: Pick<Config, 'passwordCost'>,
    readonly tokenKey: string,
  ) {
    this.decoy = bcrypt.hash(randomUUID(), config.passwordCost);
  }

  /** @throws Unauthorized, the same for an unknown account, a wrong password and a deactivated person */
  async signIn({ email, password }: SignIn, address: string): Promise<OpenedSession> {
    const known = email.trim().toLowerCase();
    const key = `${address} ${known}`;
    this.brake.refuseWhileWaiting(key);
    const account = await this.store.reader.findOneBy(Account, { email: known });
    const isRight = await bcrypt.compare(password, account?.passwordHash ?? (await this.decoy));
    if (account === null || account.passwordHash === null || !isRight || !account.isActive) {
      this.brake.countFailure(key);
      throw new Unauthorized('wrong-credentials', 'The e-mail address or the password is wrong.');
    }
    this.brake.forget(key);
    return this.open(account);
  }

  /** A new session for somebody who has proved to be this person. */
  async open({ id }: Pick<Account, 'id'>): Promise<OpenedSession> {
    const secret = newSecret();
    const account = await this.store.write(async (manager) => {
      await manager.insert(RefreshToken, newToken(id, randomUUID(), secret));
      await manager.update(Account, id, { lastSeenAt: Date.now() });
      const fresh = await manager.findOneByOrFail(Account, { id });
      await audit(manager, fresh, 'session.opened', fresh.email);
      return fresh;
    });
    return { session: this.toSession(account), refreshToken: secret };
  }

  /**
   * Exchanges a refresh token for the next. A token presented again long after its exchange was stolen by one side or the other:
   * the whole chain ends.
   */
  async refresh(secret: string | undefined): Promise<OpenedSession> {
    const next = newSecret();
    const account =
      secret === undefined ? null : await this.store.write((manager) => exchange(manager, secret, next));
    if (account === null) throw new Unauthorized('session-ended', 'The session has ended. Sign in again.');
    return { session: this.toSession(account), refreshToken: next };
  }

  async signOut(secret: string | undefined): Promise<void> {
    if (secret === undefined) return;
    await this.store.write(async (manager) => {
      const token = await manager.findOneBy(RefreshToken, { hash: hashSecret(secret) });
      if (token !== null) await revokeChain(manager, token.chain);
    });
  }

  async signOutEverywhere(account: Account): Promise<void> {
    await this.store.write(async (manager) => {
      await endSessions(manager, account.id);
      await audit(manager, account, 'session.closed-everywhere', account.email);
    });
  }

  /** The person an access token stands for; null where it opens nothing any more. */
  async accountOf({ sub, epoch }: AccessClaims): Promise<Account | null> {
    const account = await this.store.reader.findOneBy(Account, { id: Number(sub) });
    return account?.isActive === true && account.tokenEpoch === epoch ? account : null;
  }

  /** Forgets tokens that have run out. */
  async sweep(): Promise<void> {
    await this.store.write((manager) => manager.delete(RefreshToken, { expiresAt: LessThan(Date.now()) }));
  }

  private toSession(account: Account): Session {
    const accessToken = jwt.sign({ epoch: account.tokenEpoch }, this.tokenKey, {
      algorithm: TOKEN_ALGORITHM,
      subject: String(account.id),
      expiresIn: ACCESS_MS / 1000,
      ...TOKEN_PARTIES,
    });
    return {
      accessToken,
      expiresAt: new Date(Date.now() + ACCESS_MS).toISOString(),
      account: toAccountView(account),
    };
  }
}

async function exchange(manager: EntityManager, secret: string, next: string): Promise<Account | null> {
  const token = await manager.findOne(RefreshToken, {
    where: { hash: hashSecret(secret) },
    relations: { account: true },
  });
  const now = Date.now();
  if (token === null || token.revokedAt !== null || token.expiresAt < now || !token.account.isActive) {
    return null;
  }
  if (token.usedAt !== null && now - token.usedAt > REUSE_GRACE_MS) {
    await revokeChain(manager, token.chain);
    await audit(manager, token.account, 'session.token-reused', token.account.email);
    return null;
  }
  if (token.usedAt === null) await manager.update(RefreshToken, token.id, { usedAt: now });
  await manager.insert(RefreshToken, newToken(token.accountId, token.chain, next));
  await manager.update(Account, token.accountId, { lastSeenAt: now });
  return token.account;
}

/** Ends all sessions of a person: refresh tokens and access tokens alike. */
export async function endSessions(manager: EntityManager, accountId: number): Promise<void> {
  await manager.update(RefreshToken, { accountId }, { revokedAt: Date.now() });
  await manager.increment(Account, { id: accountId }, 'tokenEpoch', 1);
}

async function revokeChain(manager: EntityManager, chain: string): Promise<void> {
  await manager.update(RefreshToken, { chain }, { revokedAt: Date.now() });
}

function newToken(accountId: number, chain: string, secret: string): Omit<RefreshToken, 'id' | 'account'> {
  return {
    hash: hashSecret(secret),
    chain,
    accountId,
    expiresAt: Date.now() + REFRESH_MS,
    usedAt: null,
    revokedAt: null,
  };
}
