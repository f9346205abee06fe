import { hash, verify } from '@node-rs/argon2';

/** argon2id with 19 MiB, two passes, one lane: the first choice of OWASP's Password Storage Cheat Sheet. */
const ARGON2 = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize('NFKC'), ARGON2);
}

/** The same password typed on another keyboard may come in another Unicode form, hence NFKC (NIST SP 800-63B, 5.1.1.2). */
async function matches(passwordHash: string, password: string): Promise<boolean> {
  return verify(passwordHash, password.normalize('NFKC')).catch(() => false);
}

/** Made with the figures above from random bytes that were thrown away. */
const NO_ONES_HASH =
  '$argon2id$v=19$m=19456,t=2,p=1$gjpGMEUv2PIJPEvW3vZckg$P7UJcIwbTrMPoEzp1P4YmY8tY+k833NwOYe5Vg3TDqg';

/**
 * Whether the password belongs to the hash. For an account that does not exist (null) the same work is done on a hash
 * that no password fits, so that the time of the answer tells nothing.
 */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
  if (passwordHash !== null) return matches(passwordHash, password);
  await matches(NO_ONES_HASH, password);
  return false;
}
