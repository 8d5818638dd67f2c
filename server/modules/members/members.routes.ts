import { Router } from 'express';
import {
  changeMemberRole,
  inviteMember,
  listMembers,
  removeMember,
  withdrawInvitation,
} from '#contract/deposits.ts';
import { mount } from '#server/lib/mount.ts';
import type { InvitationsService } from '../auth/invitations.service.ts';
import type { MembersService } from './members.service.ts';

const done = { done: true } as const;
/** Who belongs to a deposit is decided by people at a page, never by a program's token. */
const sessionOnly = { sessionOnly: true };

export function membersRoutes(members: MembersService, invitations: InvitationsService): Router {
  const router = Router();
  mount(router, listMembers, ({ params }) => members.list(params.depositId));
  mount(
    router,
    inviteMember,
    ({ params, body, actor }) =>
      invitations.toDeposit({ id: params.depositId, role: body.role }, body.email, actor),
    sessionOnly,
  );
  mount(
    router,
    withdrawInvitation,
    async ({ params, actor }) => {
      await invitations.withdraw(params.depositId, params.invitationId, actor);
      return done;
    },
    sessionOnly,
  );
  mount(
    router,
    changeMemberRole,
    ({ params, body, actor }) =>
      members.changeRole(params.depositId, params.userId, body.role, actor),
    sessionOnly,
  );
  mount(
    router,
    removeMember,
    async ({ params, actor }) => {
      await members.remove(params.depositId, params.userId, actor);
      return done;
    },
    sessionOnly,
  );
  return router;
}
