import { Router } from 'express';
import { createDomain, deleteDomain, gatherEvidence, getEvidence, listDomains, restoreDomain, updateDomain } from '#contract/domains.ts';
import { mount } from '#server/lib/mount.ts';
import type { DomainsService } from './domains.service.ts';

export function domainsRoutes(domains: DomainsService): Router {
  const router = Router();
  mount(router, listDomains, ({ params }) => domains.list(params.depositId));
  mount(router, createDomain, ({ params, body, actor }) => domains.create(params.depositId, body, actor));
  mount(router, updateDomain, ({ params, body, expectedVersion, actor }) => domains.update(params.depositId, params.domainId, body, expectedVersion, actor));
  mount(router, deleteDomain, ({ params, expectedVersion, actor }) => domains.remove(params.depositId, params.domainId, expectedVersion, actor));
  mount(router, restoreDomain, ({ params, actor }) => domains.restore(params.depositId, params.domainId, actor));
  mount(router, getEvidence, ({ params }) => domains.evidence(params.depositId, params.domainId));
  mount(router, gatherEvidence, ({ params, body, actor }) => domains.gatherEvidence(params.depositId, body.domainIds, actor));
  return router;
}
