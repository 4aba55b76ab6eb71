import { hash, verify } from '@node-rs/argon2';

/** argon2id (RFC 9106) at 19 MiB, two passes, one lane: the first OWASP setting, about 26 ms a check. */
const SETTINGS = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

export const PASSWORD_MIN_LENGTH = 12;

export function hashPassword(password: string): Promise<string> {
  return hash(password, SETTINGS);
}

let unknownAccountHash: Promise<string> | undefined;

/** Checks a password; where there is no account a check of equal cost is made, so that time tells nothing. */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
  if (passwordHash) return verify(passwordHash, password);
  unknownAccountHash ??= hashPassword('no account has this password');
  await verify(await unknownAccountHash, password);
  return false;
}
