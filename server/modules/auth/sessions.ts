import type { Knex } from 'knex';
import type { SessionRow } from '#contract/auth.ts';
import type { Actor } from '#server/lib/actor.ts';
import {
  type Clock,
  DAY_MS,
  HOUR_MS,
  instantAfter,
  MINUTE_MS,
  SECOND_MS,
} from '#server/lib/clock.ts';
import { notFound } from '#server/lib/errors.ts';
import { randomToken } from '#server/lib/secrets.ts';
import { createSessionJwt } from './session-jwt.ts';
import { actorOf, type UserRow } from './users.repository.ts';

export const SESSION_LIFE_MS = 7 * DAY_MS;
const IDLE_LIMIT_MS = 12 * HOUR_MS;
/** Written no oftener: each request of a page would otherwise be a write. */
const SEEN_EVERY_MS = MINUTE_MS;

/** Where a request comes from, kept with a session so that its owner can recognise it. */
export interface Origin {
  address: string;
  userAgent: string;
}

interface Row {
  id: string;
  user_id: number;
  created_at: string;
  last_seen_at: string;
  expires_at: string;
  address: string;
  user_agent: string;
}

export interface Sessions {
  /** Opens a session; the text is the cookie's value. */
  open(db: Knex, userId: number, origin: Origin): Promise<string>;
  actorOf: (cookie: string) => Promise<Actor | null>;
  list(actor: Actor): Promise<SessionRow[]>;
  /** @throws {AppError} 404 when the session is not the actor's. */
  end(actor: Actor, sessionId: string): Promise<void>;
  /** Ends every session of a person, but the one to keep. */
  endAllOf(db: Knex, userId: number, keep?: string): Promise<void>;
}

export function createSessions(db: Knex, secret: string, clock: Clock): Sessions {
  const jwt = createSessionJwt(secret, clock);
  const idleSince = (): string => instantAfter(clock, -IDLE_LIMIT_MS);
  const rows = () => db<Row>('sessions');
  const open = () =>
    rows()
      .where('expires_at', '>', clock().toISOString())
      .andWhere('last_seen_at', '>', idleSince());

  async function noteSeen(row: Row): Promise<void> {
    if (row.last_seen_at > instantAfter(clock, -SEEN_EVERY_MS)) return;
    const now = clock().toISOString();
    await rows().where({ id: row.id }).update({ last_seen_at: now });
    await db<UserRow>('users').where({ id: row.user_id }).update({ last_seen_at: now });
  }

  return {
    async open(trx, userId, { address, userAgent }) {
      const now = clock().toISOString();
      const id = randomToken();
      await trx<Row>('sessions')
        .where('expires_at', '<', now)
        .orWhere('last_seen_at', '<', idleSince())
        .delete();
      await trx<Row>('sessions').insert({
        id,
        user_id: userId,
        created_at: now,
        last_seen_at: now,
        expires_at: instantAfter(clock, SESSION_LIFE_MS),
        address: address.slice(0, 60),
        user_agent: userAgent.slice(0, 300),
      });
      await trx<UserRow>('users').where({ id: userId }).update({ last_seen_at: now });
      const exp = Math.floor((clock().getTime() + SESSION_LIFE_MS) / SECOND_MS);
      return jwt.sign({ userId, sessionId: id, exp });
    },

    async actorOf(cookie) {
      const claims = jwt.verify(cookie);
      if (!claims) return null;
      const row = await open().where({ id: claims.sessionId, user_id: claims.userId }).first();
      if (!row) return null;
      const user = await db<UserRow>('users').where({ id: row.user_id, is_active: 1 }).first();
      if (!user) return null;
      await noteSeen(row);
      return actorOf(user, { kind: 'session', sessionId: row.id });
    },

    async list(actor) {
      const found = await open().where({ user_id: actor.id }).orderBy('last_seen_at', 'desc');
      return found.map((row) => ({
        id: row.id,
        createdAt: row.created_at,
        lastSeenAt: row.last_seen_at,
        address: row.address,
        userAgent: row.user_agent,
        isThisOne: actor.via.kind === 'session' && actor.via.sessionId === row.id,
      }));
    },

    async end(actor, sessionId) {
      const ended = await rows().where({ id: sessionId, user_id: actor.id }).delete();
      if (ended === 0) throw notFound('session');
    },

    async endAllOf(trx, userId, keep) {
      const all = trx<Row>('sessions').where({ user_id: userId });
      await (keep === undefined ? all : all.whereNot({ id: keep })).delete();
    },
  };
}
