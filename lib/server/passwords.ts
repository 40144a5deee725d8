import 'server-only';
import { hash, verify } from '@node-rs/argon2';

/** argon2id with the library's defaults: 19 MiB, two passes, one lane (OWASP's first choice, from memory). */
export const hashPassword = (password: string) => hash(password);

/** A hash that no password has: verified for unknown people, so that an answer's time doesn't tell who has an account. */
let nobody: Promise<string> | undefined;

export async function verifyPassword(
  stored: string | undefined,
  password: string,
): Promise<boolean> {
  nobody ??= hash(crypto.randomUUID());
  const right = await verify(stored ?? (await nobody), password);
  return right && stored !== undefined;
}
