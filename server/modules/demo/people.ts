import type { Knex } from 'knex';
import type { Role } from '#contract/roles.ts';
import type { Actor } from '#server/lib/actor.ts';
import type { Clock } from '#server/lib/clock.ts';
import type { PasswordHasher } from '#server/modules/auth/password-hasher.ts';

interface DemoPerson {
  name: string;
  email: string;
  role: Role;
  isAdministrator: boolean;
}

/** Invented people, one of each role. They exist on demonstration instances only. */
const PEOPLE: readonly DemoPerson[] = [
  { name: 'Maren Oyelade', email: 'lead@demo.example', role: 'lead', isAdministrator: true },
  { name: 'Tomas Whitlock', email: 'geologist@demo.example', role: 'geologist', isAdministrator: false },
  { name: 'Priya Sandoval', email: 'geomet@demo.example', role: 'geometallurgist', isAdministrator: false },
  { name: 'Jonah Tierney', email: 'site@demo.example', role: 'site-geologist', isAdministrator: false },
  { name: 'Aiko Brandvold', email: 'estimator@demo.example', role: 'estimator', isAdministrator: false },
  { name: 'Rosa Lindqvist', email: 'viewer@demo.example', role: 'viewer', isAdministrator: false },
];

/** One sign-in for all of them, told on the sign-in page and at start. */
const PASSWORD = 'core-tray-and-lamp';

export const DEMO_SIGN_INS = PEOPLE.map(({ name, email, role }) => ({ name, email, role, password: PASSWORD }));

/** Makes the demonstration people who do not exist yet. Answers them as actors, by role. */
export async function ensurePeople(db: Knex, hasher: PasswordHasher, clock: Clock): Promise<Map<Role, Actor>> {
  const hash = await hasher.hash(PASSWORD);
  const at = clock().toISOString();
  const actors = new Map<Role, Actor>();
  for (const { name, email, role, isAdministrator } of PEOPLE) {
    const existing = await db<{ id: number; email: string }>('users').where({ email }).first('id');
    const id = existing?.id ?? (await insertUser(db, { email, name, password_hash: hash, is_administrator: isAdministrator ? 1 : 0, is_active: 1, created_at: at }));
    actors.set(role, { id, name, email, isAdministrator, via: { kind: 'session', sessionId: 'demonstration' } });
  }
  return actors;
}

async function insertUser(db: Knex, row: object): Promise<number> {
  const [made] = await db<{ id: number }>('users').insert(row).returning('id');
  return made?.id ?? 0;
}
