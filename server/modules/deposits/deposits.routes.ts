import { Router } from 'express';
import { createDeposit, getDeposit, listDeposits, updateDeposit } from '#contract/deposits.ts';
import { mount } from '#server/lib/mount.ts';
import type { DepositsService } from './deposits.service.ts';

export function depositsRoutes(deposits: DepositsService): Router {
  const router = Router();
  mount(router, listDeposits, ({ actor }) => deposits.listOf(actor));
  mount(router, createDeposit, ({ body, actor }) => deposits.create(body, actor));
  mount(router, getDeposit, ({ member }) => deposits.get(member.depositId, member.role));
  mount(router, updateDeposit, ({ member, body, expectedVersion, actor }) =>
    deposits.update(member, body, expectedVersion, actor),
  );
  return router;
}
