import type { Knex } from 'knex';
import type { TestClient } from '#tests/support/test-client.ts';

/** Where the thing an id parameter names is kept, by `<endpoint>.<parameter>` or by the parameter alone. */
const TABLE_OF: Readonly<Record<string, string>> = {
  invitationId: 'invitations',
  tokenId: 'api_tokens',
  jobId: 'jobs',
  tableId: 'column_tables',
  uploadId: 'uploads',
  revisionId: 'revisions',
  suiteId: 'suites',
  runId: 'component_runs',
  'listZones.runId': 'zone_runs',
  'downloadZones.runId': 'zone_runs',
  groupingId: 'groupings',
  screenId: 'screens',
  domainId: 'domains',
  codeSetId: 'code_sets',
};

/** Names and numbers within the thing that stands before them in the address: they are no ids. */
export const NAMES_WITHIN: readonly string[] = ['label', 'column', 'hole'];

/** Query strings good enough to reach the id. */
export const QUERIES_FOR_FOREIGN_IDS: Readonly<Record<string, string>> = {
  getScreenCell: '?subset=all&variable=Cu',
};

const MAPPING = {
  kind: 'collar',
  delimiter: ',',
  decimalMark: '.',
  columns: [{ index: 0, header: 'HoleID', role: 'hole' }],
} as const;

/** Bodies good enough to reach the id, for endpoints that read one. */
export const BODIES_FOR_FOREIGN_IDS: Readonly<Record<string, object>> = {
  changeMemberRole: { role: 'viewer' },
  saveMapping: MAPPING,
  previewRows: { mapping: MAPPING, rows: 5 },
  loadFile: { mode: 'replace' },
  updateSuite: { name: 'S', support: 'drill', analytes: ['Cu', 'As', 'Mg'] },
  updateGroup: { name: 'G' },
  updateDomain: {
    code: 'D1',
    name: 'D',
    rationale: 'It holds together.',
    slot: 1,
    groupLabels: [1],
  },
};

interface Column {
  name: string;
  type: string;
  notnull: number;
  dflt_value: unknown;
  pk: number;
}

let serial = 500_000;

/** A row of deposit B with just enough in it to be there: whatever must not be null is a number or text never used before. */
async function insertBareRow(db: Knex, table: string, depositId: number): Promise<number> {
  const columns: Column[] = await db.raw(`PRAGMA table_info(${table})`);
  const needed = columns.filter(
    ({ name, notnull, dflt_value, pk }) =>
      pk === 0 && name !== 'deposit_id' && notnull === 1 && dflt_value === null,
  );
  const row = Object.fromEntries(
    needed.map(({ name, type }) => [
      name,
      /int|real|float|bool/i.test(type) ? ++serial : `${name} ${++serial}`,
    ]),
  );
  await db.raw('PRAGMA foreign_keys = OFF');
  await db.raw('PRAGMA ignore_check_constraints = ON');
  const [id] = await db(table).insert({ ...row, deposit_id: depositId });
  await db.raw('PRAGMA ignore_check_constraints = OFF');
  await db.raw('PRAGMA foreign_keys = ON');
  if (id === undefined) throw new Error(`${table}: nothing was made in deposit B`);
  return id;
}

/** Makes what the parameter names in deposit B and answers its id. */
export async function foreignId(
  client: TestClient,
  endpointId: string,
  parameter: string,
): Promise<number> {
  if (parameter === 'userId') return client.of('lead-of-b').id;
  const table = TABLE_OF[`${endpointId}.${parameter}`] ?? TABLE_OF[parameter];
  if (table === undefined)
    throw new Error(`${endpointId}: tests/server/foreign-ids.ts names no table for ${parameter}`);
  return insertBareRow(client.db, table, client.otherDepositId);
}
