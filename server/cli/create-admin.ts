import { mkdir } from 'node:fs/promises';
import * as z from 'zod';
import { Email, Name } from '#contract/common.ts';
import { openChecked } from '../db/open-checked.ts';
import { transact } from '../db/transact.ts';
import { systemClock } from '../lib/clock.ts';
import { readEnv } from '../lib/env.ts';
import { createLog } from '../lib/log.ts';
import { makeResetLink } from '../modules/auth/resets.service.ts';
import { insertUser, userByEmail, type UserRow } from '../modules/auth/users.repository.ts';
import { createRecord } from '../modules/record/record.service.ts';

/** `create-admin <e-mail> <name>`: makes an administrator and prints the link to set a password; none is ever typed here. */
const given = z.tuple([Email, Name]).safeParse(process.argv.slice(2));
if (!given.success) {
  process.stderr.write(
    'Expected an e-mail address and a name: create-admin ada@mine.example "Ada Person"\n',
  );
  process.exit(1);
}
const [email, name] = given.data;
const env = readEnv(process.env);
await mkdir(env.paths.root, { recursive: true, mode: 0o700 });
const db = await openChecked(env.paths, env.instance, createLog(env.logLevel));
const record = createRecord(db, systemClock);

const link = await transact(db, async (trx) => {
  const known = await userByEmail(trx, email);
  const id =
    known?.id ??
    (await insertUser(trx, {
      email,
      name,
      passwordHash: null,
      isAdministrator: true,
      createdAt: systemClock().toISOString(),
    }));
  await trx<UserRow>('users').where({ id }).update({ is_administrator: 1, is_active: 1 });
  await record.add(trx, {
    actor: null,
    depositId: null,
    action: 'account.changed',
    subject: `person ${id}`,
    sentence: `${email} was made an administrator from the command line.`,
  });
  return makeResetLink(trx, id, systemClock, env.publicUrl);
});
await db.destroy();
process.stdout.write(
  `${email} is an administrator. Open this link within an hour to set the password:\n${link}\n`,
);
