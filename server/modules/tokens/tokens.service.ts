import type { Knex } from 'knex';
import type { ApiToken } from '#contract/deposits.ts';
import type { TokenRight } from '#contract/roles.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor, Member } from '#server/lib/actor.ts';
import { type Clock, DAY_MS, instantAfter, MINUTE_MS } from '#server/lib/clock.ts';
import { AppError, notFound, orNotFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import { randomToken, sha256Hex } from '#server/lib/secrets.ts';
import { actorOf, type UserRow } from '../auth/users.repository.ts';
import type { RecordService } from '../record/record.service.ts';

const MAX_LIVE_TOKENS = 20;
const SEEN_EVERY_MS = MINUTE_MS;

interface TokenRow {
  id: number;
  deposit_id: number;
  user_id: number;
  name: string;
  token_right: TokenRight;
  token_hash: string;
  created_at: string;
  expires_at: string;
  last_used_at: string | null;
  revoked_at: string | null;
}

export interface TokensDeps {
  db: Knex;
  clock: Clock;
  log: Log;
  record: RecordService;
}

export interface TokensService {
  /** The person behind a token that is live; null for any other text. */
  actorOf: (text: string) => Promise<Actor | null>;
  /** Your own; all of them for a lead. */
  list(member: Member, actor: Actor): Promise<ApiToken[]>;
  /** The text is given back once and stored nowhere. @throws {AppError} 429 at 20 live tokens. */
  create(
    member: Member,
    wanted: { name: string; right: TokenRight; days: number },
    actor: Actor,
  ): Promise<{ token: ApiToken; text: string }>;
  revoke(member: Member, tokenId: number, actor: Actor): Promise<void>;
}

export function createTokens({ db, clock, log, record }: TokensDeps): TokensService {
  const live = (trx: Knex) =>
    trx<TokenRow>('api_tokens')
      .whereNull('revoked_at')
      .andWhere('expires_at', '>', clock().toISOString());
  const visibleTo = (trx: Knex, { depositId, role }: Member, actor: Actor) => {
    const tokens = live(trx).where({ deposit_id: depositId });
    return role === 'lead' ? tokens : tokens.where({ user_id: actor.id });
  };

  const viewsOf = async (rows: readonly TokenRow[]): Promise<ApiToken[]> => {
    const owners = await db<UserRow>('users').whereIn(
      'id',
      rows.map((row) => row.user_id),
    );
    const nameOf = new Map(owners.map((owner) => [owner.id, owner.name]));
    return rows.map((row) => ({
      id: row.id,
      name: row.name,
      right: row.token_right,
      createdAt: row.created_at,
      expiresAt: row.expires_at,
      lastUsedAt: row.last_used_at,
      owner: { id: row.user_id, name: nameOf.get(row.user_id) ?? '' },
    }));
  };

  return {
    async actorOf(text) {
      const row = await live(db)
        .where({ token_hash: sha256Hex(text) })
        .first();
      const owner =
        row && (await db<UserRow>('users').where({ id: row.user_id, is_active: 1 }).first());
      if (!owner) return null;
      if (row.last_used_at === null || row.last_used_at < instantAfter(clock, -SEEN_EVERY_MS)) {
        await db<TokenRow>('api_tokens')
          .where({ id: row.id })
          .update({ last_used_at: clock().toISOString() });
      }
      return actorOf(owner, {
        kind: 'token',
        tokenId: row.id,
        depositId: row.deposit_id,
        right: row.token_right,
      });
    },

    list: async (member, actor) =>
      viewsOf(await visibleTo(db, member, actor).orderBy('id', 'desc')),

    async create({ depositId }, { name, right, days }, actor) {
      const text = `slv_${randomToken()}`;
      const row = await transact(db, async (trx) => {
        const mine = await live(trx).where({ deposit_id: depositId, user_id: actor.id });
        if (mine.length >= MAX_LIVE_TOKENS) {
          throw new AppError(
            429,
            'too-many-tokens',
            `You have ${mine.length} API tokens on this deposit, the most there may be: revoke one first.`,
          );
        }
        await trx<TokenRow>('api_tokens').insert({
          deposit_id: depositId,
          user_id: actor.id,
          name,
          token_right: right,
          token_hash: sha256Hex(text),
          created_at: clock().toISOString(),
          expires_at: instantAfter(clock, days * DAY_MS),
        });
        await record.add(trx, {
          actor,
          depositId,
          action: 'token.created',
          subject: `API token ${name}`,
          sentence: `${actor.name} made the API token ${name} (${right}, ${days} days).`,
        });
        return orNotFound(
          await live(trx)
            .where({ token_hash: sha256Hex(text) })
            .first(),
          'API token',
        );
      });
      log.info(
        { event: 'token.created', userId: actor.id, depositId, tokenId: row.id, right },
        'API token created',
      );
      const [token] = await viewsOf([row]);
      return { token: orNotFound(token, 'API token'), text };
    },

    async revoke(member, tokenId, actor) {
      await transact(db, async (trx) => {
        const row = await visibleTo(trx, member, actor).where({ id: tokenId }).first();
        if (!row) throw notFound('API token');
        await trx<TokenRow>('api_tokens')
          .where({ id: row.id })
          .update({ revoked_at: clock().toISOString() });
        await record.add(trx, {
          actor,
          depositId: member.depositId,
          action: 'token.revoked',
          subject: `API token ${row.name}`,
          sentence: `${actor.name} revoked the API token ${row.name}.`,
        });
      });
      log.info(
        { event: 'token.revoked', userId: actor.id, depositId: member.depositId, tokenId },
        'API token revoked',
      );
    },
  };
}
