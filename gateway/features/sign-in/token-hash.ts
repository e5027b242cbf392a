import { createHash } from 'node:crypto';

/** SHA-256 in hex: tokens carry 256 random bits, so that a plain hash cannot be searched. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex');
}
