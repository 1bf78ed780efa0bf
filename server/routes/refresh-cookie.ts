import type { CookieOptions, Request, Response } from 'express';
import { REFRESH_MS } from '../services/session-service';

const NAME = 'lw_refresh';

/** The cookie that holds the refresh token: no script reads it, only the session's own addresses get it. */
export class RefreshCookie {
  private readonly options: CookieOptions;

  /** @param isSecure the address people use is https */
  constructor(isSecure: boolean) {
    this.options = { httpOnly: true, sameSite: 'strict', secure: isSecure, path: '/api/session' };
  }

  read(req: Request): string | undefined {
    const value = (req.cookies as Record<string, unknown> | undefined)?.[NAME];
    return typeof value === 'string' && value.length <= 200 ? value : undefined;
  }

  set(res: Response, token: string): void {
    res.cookie(NAME, token, { ...this.options, maxAge: REFRESH_MS });
  }

  clear(res: Response): void {
    res.clearCookie(NAME, this.options);
  }
}
