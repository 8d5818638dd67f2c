import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';
import type { Clock } from '#server/lib/clock.ts';

export interface InvitationRow {
  id: number;
  deposit_id: number | null;
  role: Role | null;
  email: string;
  token_hash: string;
  invited_by: number;
  created_at: string;
  expires_at: string;
  accepted_at: string | null;
  withdrawn_at: string | null;
}

/** An open invitation with the names people know. */
export interface OpenInvitation extends InvitationRow {
  inviter: string;
  deposit_name: string | null;
}

/** Invitations neither accepted nor withdrawn nor too old. */
export const openInvitations = (db: Knex, clock: Clock) =>
  db<InvitationRow>('invitations')
    .whereNull('accepted_at')
    .whereNull('withdrawn_at')
    .andWhere('expires_at', '>', clock().toISOString());

export const openInvitationsWithNames = (db: Knex, clock: Clock) =>
  openInvitations(db, clock)
    .join('users', 'users.id', 'invitations.invited_by')
    .leftJoin('deposits', 'deposits.id', 'invitations.deposit_id')
    .select<OpenInvitation[]>(
      'invitations.*',
      'users.name as inviter',
      'deposits.name as deposit_name',
    );
