import { type Request, type Response, Router } from 'express';
import {
  acceptInvitation,
  askPasswordReset,
  changePassword,
  endSession,
  getInstance,
  getInvitation,
  getMe,
  type Instance,
  listSessions,
  resetPassword,
  signIn,
  signOut,
  updateMe,
} from '#contract/auth.ts';
import { mount } from '#server/lib/mount.ts';
import type { Accept } from './accept.service.ts';
import type { AuthService } from './auth.service.ts';
import type { InvitationsService } from './invitations.service.ts';
import type { ResetsService } from './resets.service.ts';
import { type Origin, SESSION_LIFE_MS, type Sessions } from './sessions.ts';

export interface AuthParts {
  auth: AuthService;
  accept: Accept;
  invitations: InvitationsService;
  resets: ResetsService;
  sessions: Sessions;
  cookie: { name: string; secure: boolean };
  instance: () => Instance;
}

const done = { done: true } as const;
const originOf = (req: Request): Origin => ({
  address: req.ip ?? 'unknown',
  userAgent: req.get('user-agent') ?? '',
});

export function authRoutes({
  auth,
  accept,
  invitations,
  resets,
  sessions,
  cookie,
  instance,
}: AuthParts): Router {
  const router = Router();
  const attributes = {
    httpOnly: true,
    secure: cookie.secure,
    sameSite: 'strict',
    path: '/',
  } as const;
  const setCookie = (res: Response, value: string): void =>
    void res.cookie(cookie.name, value, { ...attributes, maxAge: SESSION_LIFE_MS });

  mount(router, getInstance, () => instance());
  mount(router, signIn, async ({ body, req, res }) => {
    const signedIn = await auth.signIn(body, originOf(req));
    setCookie(res, signedIn.cookie);
    return signedIn.me;
  });
  mount(router, signOut, async ({ actor, res }) => {
    await auth.signOut(actor);
    res.clearCookie(cookie.name, attributes);
    res.setHeader('Clear-Site-Data', '"cache", "cookies", "storage"');
    return done;
  });
  mount(router, getMe, ({ actor }) => auth.me(actor));
  mount(router, updateMe, ({ actor, body }) => auth.rename(actor, body.name));
  mount(router, changePassword, async ({ actor, body, req }) => {
    await auth.changePassword(actor, body, originOf(req).address);
    return done;
  });
  mount(router, listSessions, ({ actor }) => sessions.list(actor));
  mount(router, endSession, async ({ actor, params }) => {
    await sessions.end(actor, params.sessionId);
    return done;
  });
  mount(router, askPasswordReset, ({ body, req }) => {
    resets.ask(body.email, originOf(req).address);
    return done;
  });
  mount(router, resetPassword, async ({ params, body }) => {
    await resets.use(params.token, body.newPassword);
    return done;
  });
  mount(router, getInvitation, ({ params }) => invitations.view(params.token));
  mount(router, acceptInvitation, async ({ params, body, req, res }) => {
    const { cookie: value, ...answer } = await accept(params.token, body, originOf(req));
    setCookie(res, value);
    return answer;
  });
  return router;
}
