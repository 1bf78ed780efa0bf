/** Arguments or an input that cannot be used: one line for stderr, exit code 2. */
export class UsageError extends Error {
  override readonly name = 'UsageError';
}
