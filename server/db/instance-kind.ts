import type { Knex } from 'knex';

const KEY = 'instance';

interface FactRow {
  key: string;
  value: string;
}

/**
 * Keeps a demonstration's database and a production one apart for good: the first has accounts
 * whose passwords everybody knows, and an open mailbox.
 *
 * @throws {Error} when the database belongs to the other kind.
 */
export async function claimInstanceKind(db: Knex, kind: 'demo' | 'production'): Promise<void> {
  await db<FactRow>('instance_facts').insert({ key: KEY, value: kind }).onConflict('key').ignore();
  const fact = await db<FactRow>('instance_facts').where({ key: KEY }).first();
  if (fact?.value === kind) return;
  throw new Error(
    `This data folder belongs to a ${fact?.value ?? 'different'} instance and INSTANCE is ${kind}. Set INSTANCE=${fact?.value ?? ''}, or give another DATA_DIR.`,
  );
}
