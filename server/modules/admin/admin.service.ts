import type { Knex } from 'knex';
import type { AdminDeposit, AdminUser } from '#contract/admin.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound } from '#server/lib/errors.ts';
import type { Log } from '#server/lib/log.ts';
import type { InvitationsService } from '../auth/invitations.service.ts';
import type { Sessions } from '../auth/sessions.ts';
import { userByEmail, userById, type UserRow } from '../auth/users.repository.ts';
import type { RecordService } from '../record/record.service.ts';

export interface AdminDeps {
  db: Knex;
  log: Log;
  record: RecordService;
  sessions: Sessions;
  invitations: InvitationsService;
}

interface UserChange {
  isActive?: boolean | undefined;
  isAdministrator?: boolean | undefined;
}

export interface AdminService {
  users(): Promise<AdminUser[]>;
  invite(email: string, actor: Actor): Promise<void>;
  /** Every session of the person ends. @throws {AppError} 409 for the last active administrator. */
  update(userId: number, change: UserChange, actor: Actor): Promise<AdminUser>;
  deposits(): Promise<AdminDeposit[]>;
}

const COUNT_DEPOSITS =
  '(SELECT count(*) FROM memberships WHERE memberships.user_id = users.id) AS deposits';
const COUNT_MEMBERS =
  '(SELECT count(*) FROM memberships WHERE memberships.deposit_id = deposits.id) AS members';
const SUM_BYTES =
  '(SELECT coalesce(sum(size_bytes), 0) FROM uploads WHERE uploads.deposit_id = deposits.id) AS bytes_stored';

interface DepositLine {
  id: number;
  name: string;
  is_demo: number;
  created_at: string;
  members: number;
  bytes_stored: number;
}

const flag = (value: boolean | undefined): number | undefined =>
  value === undefined ? undefined : Number(value);

/** What a change does, for the record: "deactivated", "made an administrator". */
function wordsOf({ isActive, isAdministrator }: UserChange): string {
  const words = [
    isActive === undefined ? null : isActive ? 'reactivated' : 'deactivated',
    isAdministrator === undefined
      ? null
      : isAdministrator
        ? 'made an administrator'
        : 'no longer an administrator',
  ];
  return words.filter((word) => word !== null).join(', ');
}

export function createAdmin({ db, log, record, sessions, invitations }: AdminDeps): AdminService {
  const lines = () =>
    db('users')
      .orderBy('name')
      .select<(UserRow & { deposits: number })[]>('users.*', db.raw(COUNT_DEPOSITS));
  const asAdminUser = (row: UserRow & { deposits: number }): AdminUser => ({
    id: row.id,
    email: row.email,
    name: row.name,
    isAdministrator: row.is_administrator === 1,
    isActive: row.is_active === 1,
    deposits: row.deposits,
    lastSeenAt: row.last_seen_at,
    createdAt: row.created_at,
  });

  async function refuseLastAdministrator(
    trx: Knex,
    user: UserRow,
    change: UserChange,
  ): Promise<void> {
    const steps = change.isActive === false || change.isAdministrator === false;
    if (!steps || user.is_administrator === 0 || user.is_active === 0) return;
    const other = await trx<UserRow>('users')
      .where({ is_administrator: 1, is_active: 1 })
      .whereNot({ id: user.id })
      .first();
    if (other) return;
    throw new AppError(
      409,
      'last-administrator',
      `${user.name} is the only administrator: make somebody else administrator first.`,
    );
  }

  return {
    users: async () => (await lines()).map(asAdminUser),

    async invite(email, actor) {
      if (await userByEmail(db, email))
        throw new AppError(409, 'already-registered', `${email} has an account already.`);
      await invitations.toInstance(email, actor);
    },

    async update(userId, change, actor) {
      const words = wordsOf(change);
      if (words === '')
        throw new AppError(400, 'invalid', 'Expected isActive or isAdministrator, found neither.');
      await transact(db, async (trx) => {
        const user = orNotFound(await userById(trx, userId), 'person');
        await refuseLastAdministrator(trx, user, change);
        await trx<UserRow>('users')
          .where({ id: userId })
          .update({
            is_active: flag(change.isActive) ?? user.is_active,
            is_administrator: flag(change.isAdministrator) ?? user.is_administrator,
          });
        await sessions.endAllOf(trx, userId);
        await record.add(trx, {
          actor,
          depositId: null,
          action: 'account.changed',
          subject: `person ${userId}`,
          sentence: `${user.name}: ${words}, by ${actor.name}.`,
        });
      });
      log.info(
        { event: 'account.changed', userId: actor.id, accountId: userId, ...change },
        'account changed',
      );
      const [row] = await lines().where({ id: userId });
      return asAdminUser(orNotFound(row, 'person'));
    },

    async deposits() {
      const rows = await db('deposits')
        .orderBy('name')
        .select<DepositLine[]>(
          'id',
          'name',
          'is_demo',
          'created_at',
          db.raw(COUNT_MEMBERS),
          db.raw(SUM_BYTES),
        );
      const leads = await db('memberships')
        .join('users', 'users.id', 'memberships.user_id')
        .where({ role: 'lead' })
        .orderBy('users.name')
        .select<{ deposit_id: number; name: string }[]>('memberships.deposit_id', 'users.name');
      return rows.map((row) => ({
        id: row.id,
        name: row.name,
        isDemo: row.is_demo === 1,
        members: row.members,
        bytesStored: row.bytes_stored,
        createdAt: row.created_at,
        leads: leads.filter((lead) => lead.deposit_id === row.id).map((lead) => lead.name),
      }));
    },
  };
}
