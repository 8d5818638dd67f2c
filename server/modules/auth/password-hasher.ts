import { randomToken } from '#server/lib/secrets.ts';
import type { Compute } from '#workers/client.ts';

/** Hashing by bcrypt. In production it runs in a worker thread: one hash takes a third of a second. */
export interface PasswordHasher {
  hash(password: string): Promise<string>;
  verify(password: string, hash: string): Promise<boolean>;
}

export const computeHasher = (compute: Pick<Compute, 'run'>): PasswordHasher => ({
  hash: async (password) =>
    (await compute.run<{ password: string }, { hash: string }>('hash-password', { password })).hash,
  verify: async (password, hash) =>
    (
      await compute.run<{ password: string; hash: string }, { matches: boolean }>(
        'verify-password',
        { password, hash },
      )
    ).matches,
});

/** bcrypt reads no more; what follows would be ignored without a word. */
const MAX_BYTES = 72;

export interface Passwords {
  hash(password: string): Promise<string>;
  /** Takes as long without a hash (no such account, no password yet) as with one, and is then false. */
  matches(password: string, hash: string | null): Promise<boolean>;
}

export function createPasswords(hasher: PasswordHasher): Passwords {
  let decoy: Promise<string> | null = null;
  const decoyHash = (): Promise<string> => {
    decoy ??= hasher.hash(randomToken()).catch((error: unknown) => {
      decoy = null;
      throw error;
    });
    return decoy;
  };
  return {
    hash: (password) => hasher.hash(password),
    async matches(password, hash) {
      if (new TextEncoder().encode(password).length > MAX_BYTES) return false;
      const against = hash ?? (await decoyHash());
      const matches = await hasher.verify(password, against);
      return hash !== null && matches;
    },
  };
}
