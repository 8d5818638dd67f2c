import type { Knex } from 'knex';
import { DomainEvidence, type Domain } from '#contract/domains.ts';

interface EvidenceRow {
  domain_id: number;
  snapshot_id: string;
  domain_version: number;
  result: string;
  created_at: string;
}

/** What the task computed for one domain. */
export const EvidenceResult = DomainEvidence.omit({ snapshotId: true, snapshotNumber: true, createdAt: true, isStale: true });
export type EvidenceResult = Omit<DomainEvidence, 'snapshotId' | 'snapshotNumber' | 'createdAt' | 'isStale'>;

export function evidenceRepository(db: Knex) {
  return {
    async find({ id, evidenceIsStale }: Pick<Domain, 'id' | 'evidenceIsStale'>): Promise<DomainEvidence | null> {
      const row: (EvidenceRow & { snapshot_number: number }) | undefined = await db('domain_evidence')
        .join('domains', 'domains.id', 'domain_evidence.domain_id')
        .join('snapshots', (on) => on.on('snapshots.id', 'domain_evidence.snapshot_id').andOn('snapshots.deposit_id', 'domains.deposit_id'))
        .where('domain_evidence.domain_id', id)
        .first('domain_evidence.*', 'snapshots.number as snapshot_number');
      if (!row) return null;
      const result = EvidenceResult.parse(JSON.parse(row.result));
      return { ...result, snapshotId: row.snapshot_id, snapshotNumber: row.snapshot_number, createdAt: row.created_at, isStale: evidenceIsStale };
    },
    /** Evidence of one version stands for another that is the same but for its number. */
    carryOver: (domainId: number, from: number, to: number) => db<EvidenceRow>('domain_evidence').where({ domain_id: domainId, domain_version: from }).update({ domain_version: to }),
    put: (row: EvidenceRow) => db<EvidenceRow>('domain_evidence').insert(row).onConflict('domain_id').merge(),
  };
}
