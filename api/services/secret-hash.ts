import { createHash } from 'node:crypto';

/**
 * What is stored in place of a secret. The secrets hashed here have at least 128 random bits, so a plain SHA-256 cannot
 * be turned back by guessing (a password would need a slow hash; the site keeps none).
 */
export function secretHash(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}

export function randomSecret(rng: (bytes: number) => Uint8Array, bytes = 24): string {
  return Buffer.from(rng(bytes)).toString('base64url');
}
