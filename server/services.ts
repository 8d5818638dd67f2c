import type { Knex } from 'knex';
import type { Compute } from '#workers/client.ts';
import { createAnalysis } from './analysis.ts';
import type { Background } from './lib/background.ts';
import type { Clock } from './lib/clock.ts';
import type { Env } from './lib/env.ts';
import type { Log } from './lib/log.ts';
import { createAdmin } from './modules/admin/admin.service.ts';
import type { DemoInstance } from './modules/demo/demo.ts';
import { createAccept } from './modules/auth/accept.service.ts';
import { createAuth } from './modules/auth/auth.service.ts';
import { createInvitations } from './modules/auth/invitations.service.ts';
import { createPasswords, type PasswordHasher } from './modules/auth/password-hasher.ts';
import { createResets } from './modules/auth/resets.service.ts';
import { createSessions } from './modules/auth/sessions.ts';
import { createThrottle } from './modules/auth/throttle.ts';
import { createDeposits, type DepositSummaries } from './modules/deposits/deposits.service.ts';
import type { Check } from './modules/health/readiness.ts';
import type { Mailer } from './modules/mail/mailer.ts';
import { createMembers } from './modules/members/members.service.ts';
import { createRecord } from './modules/record/record.service.ts';
import { createTokens } from './modules/tokens/tokens.service.ts';

/** What the app stands on: made at start, and by the tests in their own way. */
export interface AppDeps {
  env: Env;
  db: Knex;
  log: Log;
  clock: Clock;
  mailer: Mailer;
  background: Background;
  compute: Compute;
  hasher: PasswordHasher;
  /** Null on any instance but a demonstration. */
  demo: DemoInstance | null;
  /** What must be in order for the service to be ready. */
  checks: readonly Check[];
  /** Counts for the list of deposits; told by the overview unless given. */
  depositSummaries?: DepositSummaries;
}

/** Every module's service, one line each; a service may stand on those above it. */
export function createServices(deps: AppDeps) {
  const { env, db, clock, log } = deps;
  const publicUrl = env.publicUrl;
  const isDemoInstance = env.instance === 'demo';
  const passwords = createPasswords(deps.hasher);
  const record = createRecord(db, clock);
  const sessions = createSessions(db, env.sessionSecret, clock);
  const throttle = createThrottle(db, log);
  const auth = createAuth({ db, log, passwords, record, sessions, throttle, isDemoInstance });
  const resets = createResets({ ...deps, passwords, record, sessions, throttle, publicUrl });
  const invitations = createInvitations({ ...deps, record, publicUrl });
  const accept = createAccept({ db, clock, auth, invitations, passwords, sessions, throttle });
  const analysis = createAnalysis(deps, record);
  const deposits = createDeposits({ db, clock, record, depositSummaries: deps.depositSummaries ?? ((ids) => analysis.overview.summaries(ids)) });
  const members = createMembers({ db, log, record, invitations });
  const tokens = createTokens({ db, clock, log, record });
  const admin = createAdmin({ db, log, record, sessions, invitations });
  return { passwords, record, sessions, throttle, auth, resets, invitations, accept, deposits, members, tokens, admin, analysis };
}

export type Services = ReturnType<typeof createServices>;
