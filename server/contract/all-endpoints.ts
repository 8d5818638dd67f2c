import * as admin from './admin.ts';
import * as auth from './auth.ts';
import * as codes from './codes.ts';
import * as components from './components.ts';
import * as deposits from './deposits.ts';
import * as domains from './domains.ts';
import type { Endpoint } from './endpoint.ts';
import * as files from './files.ts';
import * as geomet from './geomet.ts';
import * as groupings from './groupings.ts';
import * as health from './health.ts';
import * as holes from './holes.ts';
import * as jobs from './jobs.ts';
import * as record from './record.ts';
import * as screens from './screens.ts';
import * as snapshots from './snapshots.ts';
import * as suites from './suites.ts';
import * as tables from './tables.ts';

/** Every contract file that holds endpoints; a new file is one line here. */
const CONTRACT_FILES: readonly object[] = [
  health, auth, admin, deposits, record, jobs, tables, files, snapshots, holes,
  suites, components, groupings, screens, domains, geomet, codes,
];

const isEndpoint = (value: unknown): value is Endpoint =>
  typeof value === 'object' && value !== null && 'access' in value && 'method' in value && 'path' in value;

/** Every endpoint the contract promises, in the order of the files. */
export const ALL_ENDPOINTS: readonly Endpoint[] = CONTRACT_FILES.flatMap((file) =>
  Object.values(file).filter(isEndpoint),
);
