import * as z from 'zod';
import { Id } from '#contract/common.ts';
import { orNotFound } from '#server/lib/errors.ts';
import type { AnalysisDeps } from '#server/modules/components/components.service.ts';
import { depositById, storedParts } from '#server/modules/deposits/deposits.repository.ts';
import { chunksOf } from '#server/modules/jobs/run-parts.ts';
import type { GroupingsService } from '#server/modules/groupings/groupings.service.ts';
import { tablesOf } from '#server/modules/snapshots/snapshot-tables.ts';
import type { EvidenceInput, EvidenceOutput } from '#workers/tasks/evidence.ts';
import type { DomainsService } from './domains.service.ts';
import { evidenceRepository } from './evidence.repository.ts';

const Params = z.strictObject({ domainIds: z.array(Id) });

/** Registers gathering evidence as a job. */
export function registerEvidence({ db, clock, jobs, snapshots }: AnalysisDeps, groupings: GroupingsService, domains: DomainsService): void {
  jobs.register<EvidenceInput, EvidenceOutput>('evidence', {
    task: 'evidence',
    async prepare({ depositId, params }) {
      const { domainIds } = Params.parse(params);
      const grouping = orNotFound(await groupings.active(depositId), 'grouping');
      const snapshot = orNotFound(await snapshots.find(depositId, grouping.snapshotId), 'snapshot');
      const { domains: standing } = await domains.list(depositId);
      const deposit = orNotFound(await depositById(db, depositId), 'deposit');
      const pay = storedParts(deposit).payAnalytes;
      const known = new Set(snapshot.analytes.map(({ analyte }) => analyte));
      return {
        tables: tablesOf(snapshot), structureTableId: snapshot.structureTableId, faults: snapshot.faults.map(({ name }) => name), support: grouping.support, groupingTableId: grouping.tableId,
        payAnalytes: pay.map(({ analyte }) => analyte).filter((analyte) => known.has(analyte)),
        domains: standing.map(({ id, code, name, groupLabels, version }) => ({ id, code, name, groupLabels, version })), domainIds, snapshotId: snapshot.id,
      };
    },
    // A thread per run of domains: what speaks for one does not depend on the evidence of another.
    parts: {
      split: (input, count) => chunksOf(input.domainIds, count).map((domainIds) => ({ ...input, domainIds })),
      join: (outputs) => ({ snapshotId: outputs[0].snapshotId, evidence: outputs.flatMap(({ evidence }) => evidence) }),
    },
    async finish(trx, _job, { snapshotId, evidence }) {
      const repository = evidenceRepository(trx);
      for (const { domainVersion, ...result } of evidence) {
        await repository.put({ domain_id: result.domainId, snapshot_id: snapshotId, domain_version: domainVersion, result: JSON.stringify(result), created_at: clock().toISOString() });
      }
      return { kind: 'evidence', id: evidence[0]?.domainId ?? 0 };
    },
  });
}
