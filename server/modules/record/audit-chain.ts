import { setImmediate as breathe } from 'node:timers/promises';
import type { Knex } from 'knex';
import { sha256Hex } from '#server/lib/secrets.ts';

/** The hash before the first entry. */
export const GENESIS = '0'.repeat(64);
/** The chain of what concerns the instance and no deposit. */
export const INSTANCE_CHAIN = 0;
/** Some 3 ms of work: longer would hold up other requests. */
const BATCH = 500;

export interface AuditRow {
  id: number;
  chain: number;
  number: number;
  at: string;
  actor_id: number | null;
  who: string;
  action: string;
  subject: string;
  sentence: string;
  previous_hash: string;
  hash: string;
}

export interface AuditHead {
  chain: number;
  entries: number;
  hash: string;
}

/** SHA-256 over the entry's fields and the hash before it, as a JSON array in this order. */
export const hashOf = (row: Omit<AuditRow, 'id' | 'hash'>): string =>
  sha256Hex(
    JSON.stringify([
      row.previous_hash,
      row.chain,
      row.number,
      row.at,
      row.actor_id,
      row.who,
      row.action,
      row.subject,
      row.sentence,
    ]),
  );

export interface ChainState {
  holds: boolean;
  entries: number;
  /** Hash of the last entry recorded. */
  head: string;
  /** Number (from 1) of the first entry that is altered, missing or misplaced; null when the chain holds. */
  firstBadEntry: number | null;
}

/**
 * Walks one chain from its first entry. Edited, deleted, swapped and inserted entries break the
 * hashes; a cut tail is told by the recorded head.
 */
export async function verifyChain(db: Knex, chain: number): Promise<ChainState> {
  const head = await db<AuditHead>('audit_heads').where({ chain }).first();
  const entries = head?.entries ?? 0;
  let previous = GENESIS;
  let number = 0;
  const bad = (): ChainState => ({
    holds: false,
    entries,
    head: head?.hash ?? GENESIS,
    firstBadEntry: number,
  });
  for (;;) {
    const rows = await db<AuditRow>('audit_entries')
      .where({ chain })
      .andWhere('number', '>', number)
      .orderBy('number')
      .limit(BATCH);
    for (const row of rows) {
      number += 1;
      const holds =
        row.number === number &&
        row.previous_hash === previous &&
        row.hash === hashOf(row) &&
        number <= entries;
      if (!holds) return bad();
      previous = row.hash;
    }
    if (rows.length < BATCH) break;
    await breathe();
  }
  if (number === entries && previous === (head?.hash ?? GENESIS)) {
    return { holds: true, entries, head: previous, firstBadEntry: null };
  }
  number = number === entries ? number : number + 1;
  return bad();
}
