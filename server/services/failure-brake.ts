import { ServiceError } from './service-error';

/** Failures in a row before waiting begins, the first wait, and the longest. */
const FREE_FAILURES = 5;
const FIRST_WAIT_MS = 1000;
const LONGEST_WAIT_MS = 15 * 60_000;
/** The list must not grow without bound under attack. */
const MOST_KEYS = 10_000;

interface Failures {
  readonly count: number;
  readonly until: number;
}

/** Makes whoever fails again and again wait, twice as long each time. Does not care whether there is such an account. */
export class FailureBrake {
  private readonly failures = new Map<string, Failures>();

  /** @throws ServiceError 429 while the key has to wait */
  refuseWhileWaiting(key: string): void {
    const waitMs = (this.failures.get(key)?.until ?? 0) - Date.now();
    if (waitMs <= 0) return;
    const retryAfterS = Math.ceil(waitMs / 1000);
    throw new ServiceError(429, 'wait', `Too many wrong tries. Wait ${retryAfterS} s and try again.`, {
      retryAfterS,
    });
  }

  countFailure(key: string): void {
    const count = (this.failures.get(key)?.count ?? 0) + 1;
    const excess = count - FREE_FAILURES;
    const waitMs = excess < 0 ? 0 : Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** Math.min(excess, 20));
    this.failures.delete(key);
    this.failures.set(key, { count, until: Date.now() + waitMs });
    if (this.failures.size > MOST_KEYS) this.forget(this.failures.keys().next().value!);
  }

  forget(key: string): void {
    this.failures.delete(key);
  }
}
