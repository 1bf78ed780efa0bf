import { createHash, randomBytes } from 'node:crypto';

/** A secret of 256 bits, for a link or a cookie. */
export function newSecret(): string {
  return randomBytes(32).toString('base64url');
}

/** What is stored of a secret. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
