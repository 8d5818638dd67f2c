import type { Knex } from 'knex';
import * as z from 'zod';
import type { Domain } from '#contract/domains.ts';
import type { GroupRow } from '#server/modules/groupings/groupings.repository.ts';

export interface DomainRow {
  id: number;
  deposit_id: number;
  created_by: number;
  created_at: string;
  updated_at: string;
  deleted_at: string | null;
  grouping_id: number;
  code: string;
  name: string;
  rationale: string;
  slot: number;
  group_labels: string;
  version: number;
}

interface JoinedRow extends DomainRow {
  created_by_name: string;
  evidence_version: number | null;
  evidence_snapshot_id: string | null;
}

const Labels = z.array(z.number().int());
export const labelsOf = (row: Pick<DomainRow, 'group_labels'>): number[] => Labels.parse(JSON.parse(row.group_labels));

export function domainsRepository(db: Knex) {
  const joined = (depositId: number) =>
    db<JoinedRow>('domains')
      .join('users', 'users.id', 'domains.created_by')
      .leftJoin('domain_evidence', 'domain_evidence.domain_id', 'domains.id')
      .where('domains.deposit_id', depositId)
      .select<JoinedRow[]>('domains.*', 'users.name as created_by_name', 'domain_evidence.domain_version as evidence_version', 'domain_evidence.snapshot_id as evidence_snapshot_id');

  const toDomain = (row: JoinedRow, groups: readonly GroupRow[], currentSnapshotId: string): Domain => {
    const groupLabels = labelsOf(row);
    const own = groups.filter(({ grouping_id, label }) => grouping_id === row.grouping_id && groupLabels.includes(label));
    return {
      id: row.id, code: row.code, name: row.name, rationale: row.rationale, slot: row.slot, groupLabels, groupingId: row.grouping_id,
      intervals: own.reduce((sum, { intervals }) => sum + intervals, 0), metres: own.reduce((sum, { metres }) => sum + metres, 0),
      version: row.version, createdBy: { id: row.created_by, name: row.created_by_name }, createdAt: row.created_at, updatedAt: row.updated_at,
      hasEvidence: row.evidence_version !== null,
      evidenceIsStale: row.evidence_version !== null && (row.evidence_version !== row.version || row.evidence_snapshot_id !== currentSnapshotId),
    };
  };

  const groupsOf = (ids: readonly number[]) => db<GroupRow>('groups').whereIn('grouping_id', ids);

  return {
    async list(depositId: number, currentSnapshotId: string): Promise<Domain[]> {
      const rows: JoinedRow[] = await joined(depositId).whereNull('domains.deleted_at').orderBy('domains.code');
      const groups = await groupsOf(rows.map(({ grouping_id }) => grouping_id));
      return rows.map((row) => toDomain(row, groups, currentSnapshotId));
    },
    async find(depositId: number, domainId: number, currentSnapshotId: string): Promise<Domain | null> {
      const row: JoinedRow | undefined = await joined(depositId).whereNull('domains.deleted_at').where('domains.id', domainId).first();
      return row ? toDomain(row, await groupsOf([row.grouping_id]), currentSnapshotId) : null;
    },
    row: (depositId: number, domainId: number): Promise<DomainRow | undefined> => db<DomainRow>('domains').where({ deposit_id: depositId, id: domainId }).first(),
    standing: (depositId: number): Promise<DomainRow[]> => db<DomainRow>('domains').where({ deposit_id: depositId }).whereNull('deleted_at'),
    async insert(row: Omit<DomainRow, 'id'>): Promise<number> {
      const [made] = await db<DomainRow>('domains').insert(row).returning('id');
      return made?.id ?? 0;
    },
    update: (domainId: number, change: Partial<DomainRow>) => db<DomainRow>('domains').where({ id: domainId }).update(change),
  };
}
export type DomainsRepository = ReturnType<typeof domainsRepository>;
