import type { RequestHandler } from 'express';
import { Passport } from 'passport';
import { ExtractJwt, Strategy } from 'passport-jwt';
import type { Account } from '../entities/account';
import type { AccessClaims, SessionService } from '../services/session-service';
import { TOKEN_ALGORITHM, TOKEN_PARTIES } from '../services/session-service';

/** Who asks, and until when the token is good (milliseconds since 1970). */
export interface SignedIn {
  readonly account: Account;
  readonly expiresAt: number;
}

declare global {
  // Passport's types leave this interface to be filled in.
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    // eslint-disable-next-line @typescript-eslint/no-empty-object-type
    interface User extends SignedIn {}
  }
}

/** Lets nobody pass without a bearer token that still opens something; sets `req.user`. */
export function authentication(sessions: SessionService): RequestHandler {
  const passport = new Passport();
  passport.use(
    new Strategy(
      {
        jwtFromRequest: ExtractJwt.fromAuthHeaderAsBearerToken(),
        secretOrKey: sessions.tokenKey,
        algorithms: [TOKEN_ALGORITHM],
        ...TOKEN_PARTIES,
      },
      (claims: AccessClaims, done) => {
        sessions.accountOf(claims).then(
          (account) => done(null, account === null ? false : { account, expiresAt: claims.exp * 1000 }),
          (error: unknown) => done(error, false),
        );
      },
    ),
  );
  return passport.authenticate('jwt', { session: false, failWithError: true }) as RequestHandler;
}
