import { randomBytes } from 'node:crypto';
import { hash, verify } from '@node-rs/argon2';

/** What an unknown address is checked against, so that it takes as long as a wrong password. Matches nothing. */
const decoyHash = hash(randomBytes(32));

/** Argon2id of a password with the package's defaults (19 MiB, 2 passes, 1 lane) and a salt of its own. */
export function hashPassword(password: string): Promise<string> {
  return hash(password);
}

/**
 * Whether the password belongs to the hash.
 * @param passwordHash null where there is no such account: false, after the same work
 */
export async function checkPassword(passwordHash: string | null, password: string): Promise<boolean> {
  const isRight = await verify(passwordHash ?? (await decoyHash), password);
  return isRight && passwordHash !== null;
}
