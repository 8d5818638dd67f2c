import { Router } from 'express';
import { readMailbox } from '#contract/health.ts';
import { notFound } from '#server/lib/errors.ts';
import { mount } from '#server/lib/mount.ts';
import type { Mailer } from './mailer.ts';

export function mailRoutes(mailer: Mailer): Router {
  const router = Router();
  mount(router, readMailbox, () => {
    const caught = mailer.caught();
    if (!caught) throw notFound('mailbox');
    return caught;
  });
  return router;
}
