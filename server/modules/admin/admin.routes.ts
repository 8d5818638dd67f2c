import { Router } from 'express';
import { inviteUser, listAllDeposits, listUsers, resetDemo, updateUser } from '#contract/admin.ts';
import { mount } from '#server/lib/mount.ts';
import type { AdminService } from './admin.service.ts';
import { type Demo, requireDemo } from './demo.ts';

const done = { done: true } as const;

export function adminRoutes(admin: AdminService, demo: Demo | null): Router {
  const router = Router();
  mount(router, listUsers, () => admin.users());
  mount(router, inviteUser, async ({ body, actor }) => {
    await admin.invite(body.email, actor);
    return done;
  });
  mount(router, updateUser, ({ params, body, actor }) => admin.update(params.userId, body, actor));
  mount(router, listAllDeposits, () => admin.deposits());
  mount(router, resetDemo, async () => {
    await requireDemo(demo).reset();
    return done;
  });
  return router;
}
