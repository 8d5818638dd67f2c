import type { Knex } from 'knex';
import type { Domain, DomainBody, DomainEvidence, DomainList } from '#contract/domains.ts';
import type { JobStarted } from '#contract/jobs.ts';
import type { Grouping } from '#contract/groupings.ts';
import { transact } from '#server/db/transact.ts';
import type { Actor } from '#server/lib/actor.ts';
import { AppError, orNotFound, staleVersion } from '#server/lib/errors.ts';
import type { AnalysisDeps } from '#server/modules/components/components.service.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import { domainsRepository, labelsOf, type DomainRow } from './domains.repository.ts';
import { evidenceRepository } from './evidence.repository.ts';

export function createDomains({ db, clock, jobs, record, snapshots }: AnalysisDeps, groupings: GroupingsService) {
  const repository = domainsRepository(db);
  const evidence = evidenceRepository(db);

  const get = async (depositId: number, domainId: number): Promise<Domain> =>
    orNotFound(await repository.find(depositId, domainId, await snapshots.currentId(depositId)), 'domain');

  async function activeGrouping(depositId: number): Promise<Grouping> {
    const grouping = await groupings.active(depositId);
    if (!grouping) throw new AppError(409, 'no-grouping', 'Candidate domains stand on a grouping: run Groups first.');
    return grouping;
  }

  /** One code, one place: a code is used once, a group belongs to one domain. */
  function checkBody(body: DomainBody, grouping: Grouping, standing: readonly DomainRow[], ownId: number | null): void {
    const others = standing.filter(({ id }) => id !== ownId);
    const field = (path: string, message: string) => ({ fields: [{ path: `body.${path}`, message }] });
    const sameCode = others.find(({ code }) => code === body.code);
    if (sameCode) throw new AppError(409, 'code-taken', `Code ${body.code} is “${sameCode.name}”; expected a code of its own.`, field('code', `is “${sameCode.name}” already`));
    const known = new Set(grouping.groups.map(({ label }) => label));
    const unknown = body.groupLabels.filter((label) => !known.has(label));
    if (unknown.length > 0) throw new AppError(400, 'unknown-group', `Expected groups 1 to ${grouping.k} of “${grouping.name}”, found ${unknown.join(', ')}.`, field('groupLabels', 'expected groups of the grouping in use'));
    for (const label of body.groupLabels) {
      const owner = others.find((row) => labelsOf(row).includes(label));
      const name = grouping.groups.find((group) => group.label === label)?.name ?? String(label);
      if (owner) throw new AppError(409, 'group-taken', `${name} is in domain ${owner.code} already: an interval has one code.`, field('groupLabels', `${name} is in ${owner.code}`));
    }
  }

  const columnsOf = (body: DomainBody) => ({ code: body.code, name: body.name, rationale: body.rationale, slot: body.slot, group_labels: JSON.stringify([...body.groupLabels].sort((a, b) => a - b)) });

  async function change(depositId: number, domainId: number, expectedVersion: number, write: (trx: Knex.Transaction, row: DomainRow) => Promise<void>): Promise<void> {
    await transact(db, async (trx) => {
      const row = await domainsRepository(trx).row(depositId, domainId);
      const found = orNotFound(row?.deleted_at === null ? row : null, 'domain');
      if (found.version !== expectedVersion) throw staleVersion(found.version);
      await write(trx, found);
    });
  }

  return {
    get,

    async list(depositId: number): Promise<DomainList> {
      const [grouping, domains] = await Promise.all([groupings.active(depositId), repository.list(depositId, await snapshots.currentId(depositId))]);
      // What the domains cover is counted in the tables they stand on, which may not be the newest.
      const snapshot = await (grouping ? snapshots.find(depositId, grouping.snapshotId) : snapshots.latest(depositId));
      const total = totalsOf(grouping, snapshot);
      const coded = domains.reduce((sum, { intervals, metres }) => ({ intervals: sum.intervals + intervals, metres: sum.metres + metres }), { intervals: 0, metres: 0 });
      const unassigned = { intervals: total.intervals - coded.intervals, metres: Math.max(0, total.metres - coded.metres) };
      return { groupingId: grouping?.id ?? null, domains, unassigned, total, isStale: grouping?.isStale ?? false };
    },

    async create(depositId: number, body: DomainBody, actor: Actor): Promise<Domain> {
      const grouping = await activeGrouping(depositId);
      const id = await transact(db, async (trx) => {
        checkBody(body, grouping, await domainsRepository(trx).standing(depositId), null);
        const at = clock().toISOString();
        const made = await domainsRepository(trx).insert({ ...columnsOf(body), deposit_id: depositId, created_by: actor.id, created_at: at, updated_at: at, deleted_at: null, grouping_id: grouping.id, version: 1 });
        await record.add(trx, { actor, depositId, action: 'domain.created', subject: `domain ${made}`, sentence: `${actor.name} accepted ${body.name} as candidate domain ${body.code}` });
        return made;
      });
      return get(depositId, id);
    },

    async update(depositId: number, domainId: number, body: DomainBody, expectedVersion: number, actor: Actor): Promise<Domain> {
      await get(depositId, domainId);
      const grouping = await activeGrouping(depositId);
      await change(depositId, domainId, expectedVersion, async (trx, row) => {
        checkBody(body, grouping, await domainsRepository(trx).standing(depositId), domainId);
        await domainsRepository(trx).update(domainId, { ...columnsOf(body), grouping_id: grouping.id, updated_at: clock().toISOString(), version: row.version + 1 });
        await record.add(trx, { actor, depositId, action: 'domain.changed', subject: `domain ${domainId}`, sentence: `${actor.name} changed candidate domain ${body.code}` });
      });
      return get(depositId, domainId);
    },

    async remove(depositId: number, domainId: number, expectedVersion: number, actor: Actor) {
      await change(depositId, domainId, expectedVersion, async (trx, row) => {
        await domainsRepository(trx).update(domainId, { deleted_at: clock().toISOString(), version: row.version + 1 });
        await record.add(trx, { actor, depositId, action: 'domain.taken-back', subject: `domain ${domainId}`, sentence: `${actor.name} took candidate domain ${row.code} back` });
      });
      return { done: true as const };
    },

    async restore(depositId: number, domainId: number, actor: Actor): Promise<Domain> {
      const row = orNotFound(await repository.row(depositId, domainId), 'domain');
      if (row.deleted_at === null) return get(depositId, domainId);
      const grouping = await activeGrouping(depositId);
      if (grouping.id !== row.grouping_id) throw new AppError(409, 'grouping-changed', 'This domain stood on a grouping that is no longer in use.');
      await transact(db, async (trx) => {
        checkBody({ code: row.code, name: row.name, rationale: row.rationale, slot: row.slot, groupLabels: labelsOf(row) }, grouping, await domainsRepository(trx).standing(depositId), domainId);
        await domainsRepository(trx).update(domainId, { deleted_at: null, updated_at: clock().toISOString(), version: row.version + 1 });
        await evidenceRepository(trx).carryOver(domainId, row.version - 1, row.version + 1);
        await record.add(trx, { actor, depositId, action: 'domain.restored', subject: `domain ${domainId}`, sentence: `${actor.name} restored candidate domain ${row.code}` });
      });
      return get(depositId, domainId);
    },

    async evidence(depositId: number, domainId: number): Promise<DomainEvidence | null> {
      const domain = await get(depositId, domainId);
      return evidence.find(domain);
    },

    async gatherEvidence(depositId: number, domainIds: readonly number[], actor: Actor): Promise<JobStarted> {
      const snapshot = await snapshots.ready(depositId);
      const grouping = await activeGrouping(depositId);
      if (grouping.snapshotId !== snapshot.id) throw new AppError(409, 'grouping-stale', `“${grouping.name}” stands on snapshot ${grouping.snapshotNumber}; group again on snapshot ${snapshot.number} first.`);
      const { domains } = await this.list(depositId);
      const wanted = domainIds.length === 0 ? domains.map(({ id }) => id) : domainIds;
      if (wanted.length === 0) throw new AppError(409, 'no-domains', 'Expected a candidate domain to gather evidence for, found none: accept a group first.');
      for (const id of wanted) orNotFound(domains.find((domain) => domain.id === id), 'domain');
      return { job: await jobs.enqueue({ depositId, kind: 'evidence', title: `Gather evidence for ${wanted.length} ${wanted.length === 1 ? 'domain' : 'domains'}`, params: { domainIds: wanted }, actor }) };
    },
  };
}
export type DomainsService = ReturnType<typeof createDomains>;

/** All intervals of the support in use: the metres that need one code each. */
function totalsOf(grouping: Grouping | null, snapshot: { rows: number; surfaceRows: number; metresAssayed: number } | null) {
  if (!snapshot) return { intervals: 0, metres: 0 };
  const isSurface = grouping ? grouping.support === 'surface' : snapshot.rows === snapshot.surfaceRows;
  return isSurface ? { intervals: snapshot.surfaceRows, metres: snapshot.surfaceRows } : { intervals: snapshot.rows - snapshot.surfaceRows, metres: snapshot.metresAssayed };
}
