import type { Knex } from 'knex';
import { type Clock, DAY_MS, instantAfter } from './clock.ts';
import { AppError } from './errors.ts';
import { sha256Hex } from './secrets.ts';

export interface Answer {
  status: number;
  body: unknown;
}

interface Row {
  user_id: number;
  endpoint: string;
  key: string;
  request_hash: string;
  status: number | null;
  body: string | null;
  expires_at: string;
}

interface Request {
  userId: number;
  endpoint: string;
  key: string;
  /** Everything that makes a request this one: parameters, query, body. */
  request: unknown;
}

export interface Idempotency {
  /** Does the work once per key: a repeat within 24 hours gets the first answer. */
  once(request: Request, work: () => Promise<Answer>): Promise<Answer>;
}

/** The key a caller sent, or null. @throws {AppError} 400 when it is not 8 to 200 plain characters. */
export function readIdempotencyKey(header: string | undefined): string | null {
  if (header === undefined) return null;
  if (/^[\x21-\x7e]{8,200}$/.test(header)) return header;
  throw new AppError(
    400,
    'bad-idempotency-key',
    'Expected Idempotency-Key to be 8 to 200 visible ASCII characters.',
  );
}

const isTaken = (error: unknown): boolean =>
  error instanceof Error && 'code' in error && error.code === 'SQLITE_CONSTRAINT_PRIMARYKEY';

export function createIdempotency(db: Knex, clock: Clock): Idempotency {
  const underWay = new Map<string, Promise<Answer>>();
  const rows = () => db<Row>('idempotency_keys');

  async function replay(found: Row, requestHash: string, id: string): Promise<Answer> {
    if (found.request_hash !== requestHash) {
      throw new AppError(
        422,
        'idempotency-key-reused',
        'This Idempotency-Key was used with another request: use a new key.',
      );
    }
    const running = underWay.get(id);
    if (running) return running;
    if (found.status !== null && found.body !== null) {
      const body: unknown = JSON.parse(found.body);
      return { status: found.status, body };
    }
    // Begun by a process that ended in between: repeating could do it twice, so a person must look.
    throw new AppError(
      409,
      'outcome-unknown',
      'The first request with this Idempotency-Key was cut short. Check whether it took effect, then use a new key.',
    );
  }

  async function begin(row: Row, work: () => Promise<Answer>): Promise<Answer> {
    const mine = () => rows().where({ user_id: row.user_id, endpoint: row.endpoint, key: row.key });
    try {
      const answer = await work();
      await mine().update({ status: answer.status, body: JSON.stringify(answer.body) });
      return answer;
    } catch (error) {
      await mine().delete(); // refused requests took no effect and may be put right under the same key
      throw error;
    }
  }

  return {
    async once({ userId, endpoint, key, request }, work) {
      const id = JSON.stringify([userId, endpoint, key]);
      const requestHash = sha256Hex(JSON.stringify(request));
      await rows().where('expires_at', '<', clock().toISOString()).delete();
      const row: Row = {
        user_id: userId,
        endpoint,
        key,
        request_hash: requestHash,
        status: null,
        body: null,
        expires_at: instantAfter(clock, DAY_MS),
      };
      try {
        await rows().insert(row);
      } catch (error) {
        if (!isTaken(error)) throw error;
        const found = await rows().where({ user_id: userId, endpoint, key }).first();
        if (!found)
          throw new AppError(
            409,
            'try-again',
            'The first request with this Idempotency-Key has just been refused: send it again.',
          );
        return replay(found, requestHash, id);
      }
      const running = begin(row, work);
      underWay.set(id, running);
      try {
        return await running;
      } finally {
        underWay.delete(id);
      }
    },
  };
}
