import { knexConfig } from './server/db/knex.ts';
import { dataPaths } from './server/lib/paths.ts';

/** For Knex's own command line; the server and `npm run migrate` use the same settings. */
export default knexConfig(dataPaths(process.env['DATA_DIR'] ?? './data').database);
