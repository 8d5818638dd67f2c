import compression from 'compression';
import cookieParser from 'cookie-parser';
import express, { type Express, type Router } from 'express';
import { analysisRouters } from './analysis.ts';
import { AppError } from './lib/errors.ts';
import { createGuard } from './lib/guard.ts';
import { createIdempotency } from './lib/idempotency.ts';
import { attachGate, type Mounted, mountedOn } from './lib/mount.ts';
import { describeApi } from './lib/openapi.ts';
import { CLIENT_DIR } from './lib/paths.ts';
import { problemHandler } from './lib/problems.ts';
import { requestLog } from './lib/request-log.ts';
import { securityHeaders } from './lib/security-headers.ts';
import { serveClient } from './lib/static-client.ts';
import { createStreamWatch, type StreamWatch } from './lib/stream-watch.ts';
import { adminRoutes } from './modules/admin/admin.routes.ts';
import { authRoutes } from './modules/auth/auth.routes.ts';
import { roleOn } from './modules/deposits/deposits.repository.ts';
import { demoRoutes } from './modules/demo/demo.routes.ts';
import { depositsRoutes } from './modules/deposits/deposits.routes.ts';
import { healthRoutes } from './modules/health/health.routes.ts';
import { mailRoutes } from './modules/mail/mail.routes.ts';
import { membersRoutes } from './modules/members/members.routes.ts';
import { recordRoutes } from './modules/record/record.routes.ts';
import { tokensRoutes } from './modules/tokens/tokens.routes.ts';
import { type AppDeps, createServices, type Services } from './services.ts';

export interface App {
  express: Express;
  services: Services;
  /** Every endpoint mounted, in order: what the API document is written from. */
  mounted: readonly Mounted[];
  /** The API document. Written at the first call, which takes a moment: called once before listening. */
  describe(): object;
  /** Open event streams, to be ended before the server can close. */
  streams: StreamWatch;
}

const cookieOf = (isHttps: boolean) => ({ name: isHttps ? '__Host-selvage' : 'selvage', secure: isHttps });

/** Compressing gathers bytes, and an event must go out as it comes. */
const compressed = compression({
  filter: (req, res) => !String(res.getHeader('Content-Type')).startsWith('text/event-stream') && compression.filter(req, res),
});

/** One line per module. */
function moduleRouters(deps: AppDeps, services: Services, describe: () => object): Router[] {
  const { demo, env } = deps;
  const instance = () => ({ isDemoInstance: env.instance === 'demo', demoSignIns: demo?.signIns ?? [] });
  return [
    healthRoutes(deps.checks, describe),
    authRoutes({ ...services, cookie: cookieOf(env.isHttps), instance }),
    adminRoutes(services.admin, demo),
    depositsRoutes(services.deposits),
    membersRoutes(services.members, services.invitations),
    tokensRoutes(services.tokens),
    recordRoutes(services.record),
    mailRoutes(deps.mailer),
    demoRoutes(demo),
    ...analysisRouters(services.analysis, deps),
  ];
}

/** The whole HTTP side: headers, log, API, problem documents, and the built client. */
export function createApp(deps: AppDeps, clientDir = CLIENT_DIR): App {
  const { db, env, log, clock } = deps;
  const services = createServices(deps);
  const cookieName = cookieOf(env.isHttps).name;
  const sources = {
    actorOfSession: services.sessions.actorOf,
    actorOfToken: services.tokens.actorOf,
    roleOn: (depositId: number, userId: number) => roleOn(db, depositId, userId),
  };

  const app = express();
  app.disable('x-powered-by').disable('etag').set('trust proxy', env.trustProxy);
  app.use(requestLog(log), securityHeaders(env.isHttps), compressed, cookieParser());

  let description: object | null = null;
  const describe = (): object => (description ??= describeApi(mounted, { cookieName }));
  const routers = moduleRouters(deps, services, describe);
  const mounted = routers.flatMap(mountedOn);
  const streams = createStreamWatch();
  const guard = createGuard(sources, { cookieName, publicUrl: env.publicUrl, log });
  const { events } = services.analysis;
  attachGate(app, { guard, idempotency: createIdempotency(db, clock), streams, changed: (depositId, resource) => events.changed(depositId, resource) });
  app.use('/api', ...routers);
  app.use('/api', () => {
    throw new AppError(404, 'no-such-address', 'There is nothing at this address.');
  });

  serveClient(app, clientDir);
  app.use(problemHandler(log));
  return { express: app, services, mounted, describe, streams };
}
