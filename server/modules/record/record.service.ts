import type { Knex } from 'knex';
import type * as z from 'zod';
import type { AuditEntry, listAudit } from '#contract/record.ts';
import type { Person } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import { toCsv } from '#server/lib/csv.ts';
import {
  type AuditHead,
  type AuditRow,
  GENESIS,
  hashOf,
  INSTANCE_CHAIN,
  verifyChain,
} from './audit-chain.ts';

export interface NewEntry {
  /** Who did it; `null` for the service itself. */
  actor: Person | null;
  /** `null`: it concerns the instance. */
  depositId: number | null;
  /** Stable verb, for example `domain.created`. */
  action: string;
  /** What it was done to, for example `domain 12`. */
  subject: string;
  /** The sentence people read. */
  sentence: string;
}

export interface RecordService {
  /** Appends an entry within the transaction of what it tells, so that neither exists alone. */
  add(trx: Knex.Transaction, entry: NewEntry): Promise<void>;
  list(
    depositId: number,
    query: z.output<typeof listAudit.query>,
  ): Promise<z.output<typeof listAudit.response>>;
  csv(depositId: number): Promise<string>;
}

const asEntry = (row: AuditRow): AuditEntry => ({
  number: row.number,
  at: row.at,
  who: row.who,
  action: row.action,
  sentence: row.sentence,
  subject: row.subject,
  hash: row.hash,
});

const CSV_HEADER = [
  'number',
  'at',
  'who',
  'action',
  'subject',
  'sentence',
  'previous_hash',
  'hash',
];

export function createRecord(db: Knex, clock: Clock): RecordService {
  const entriesOf = (depositId: number) =>
    db<AuditRow>('audit_entries').where({ chain: depositId });

  return {
    async add(trx, { actor, depositId, action, subject, sentence }) {
      const chain = depositId ?? INSTANCE_CHAIN;
      const head = await trx<AuditHead>('audit_heads').where({ chain }).first();
      const entry = {
        chain,
        number: (head?.entries ?? 0) + 1,
        at: clock().toISOString(),
        actor_id: actor?.id ?? null,
        who: actor?.name ?? 'Selvage',
        action,
        subject,
        sentence,
        previous_hash: head?.hash ?? GENESIS,
      };
      const hash = hashOf(entry);
      await trx<AuditRow>('audit_entries').insert({ ...entry, hash });
      await trx<AuditHead>('audit_heads')
        .insert({ chain, entries: entry.number, hash })
        .onConflict('chain')
        .merge();
    },

    async list(depositId, { page, pageSize, text }) {
      const wanted = () => {
        const rows = entriesOf(depositId);
        if (text === undefined || text === '') return rows;
        const pattern = `%${text.replaceAll(/[\\%_]/g, '\\$&')}%`;
        return rows.whereRaw("(sentence LIKE ? ESCAPE '\\' OR who LIKE ? ESCAPE '\\')", [
          pattern,
          pattern,
        ]);
      };
      const counted = await wanted().count<{ total: number }[]>({ total: '*' });
      const rows = await wanted()
        .orderBy('number', 'desc')
        .limit(pageSize)
        .offset((page - 1) * pageSize);
      const chain = await verifyChain(db, depositId);
      return { rows: rows.map(asEntry), total: counted[0]?.total ?? 0, page, pageSize, chain };
    },

    async csv(depositId) {
      const rows = await entriesOf(depositId).orderBy('number');
      return toCsv(
        CSV_HEADER,
        rows.map((row) => [
          row.number,
          row.at,
          row.who,
          row.action,
          row.subject,
          row.sentence,
          row.previous_hash,
          row.hash,
        ]),
      );
    },
  };
}
