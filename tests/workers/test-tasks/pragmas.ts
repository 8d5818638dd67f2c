import { defineTask } from '#workers/task.ts';

const NAMES = ['journal_mode', 'synchronous', 'foreign_keys', 'trusted_schema', 'busy_timeout'];

export default defineTask<null, unknown[]>((_input, { store }) =>
  NAMES.map((name) => store().db.pragma(name, { simple: true })),
);
