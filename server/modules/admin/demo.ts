import type { Instance } from '#contract/auth.ts';
import { AppError } from '#server/lib/errors.ts';

/** What a demonstration instance has and no other. */
export interface Demo {
  signIns: Instance['demoSignIns'];
  /** Puts the demonstration deposits back to their first state. */
  reset(): Promise<void>;
}

/** @throws {AppError} 404 on an instance with real work on it. */
export function requireDemo(demo: Demo | null): Demo {
  if (demo) return demo;
  throw new AppError(
    404,
    'no-demonstration',
    'This instance has no demonstration deposits to reset.',
  );
}
