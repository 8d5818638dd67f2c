import type { Request } from 'express';
import type { Access, Endpoint } from '#contract/endpoint.ts';
import type { Role } from '#contract/roles.ts';
import type { Actor, Member } from './actor.ts';
import { refuseForeignSite } from './csrf.ts';
import { AppError, notFound } from './errors.ts';
import type { Log } from './log.ts';
import { requestFacts } from './request-facts.ts';

/** What the guard asks of the modules that know people and deposits. */
export interface GuardSources {
  actorOfSession(cookie: string): Promise<Actor | null>;
  actorOfToken(text: string): Promise<Actor | null>;
  /** The person's role on the deposit; null when they are no member or there is no such deposit. */
  roleOn(depositId: number, userId: number): Promise<Role | null>;
}

export interface AccessRule {
  access: Access;
  method: Endpoint['method'];
  /** Closed to API tokens of every right: rights and tokens are given by people at a page. */
  sessionOnly: boolean;
}

export type Verdict =
  'allow' | 'sign-in' | 'no-such-deposit' | 'role' | 'token-right' | 'administrators-only';

/** What one API token may do with one endpoint of its own deposit. */
function tokenMayCall(
  right: 'read' | 'codes' | 'work',
  { access, method, sessionOnly }: AccessRule,
): boolean {
  if (sessionOnly || access.kind !== 'deposit') return false;
  if (right === 'work') return true;
  return method === 'get' && (right === 'read' || access.codes === true);
}

/**
 * The one decision on rights. Everything not allowed by name is refused.
 *
 * @param depositId The deposit named by the address; null where there is none.
 * @param role The actor's role on that deposit; for a token, its owner's.
 */
export function decide(
  rule: AccessRule,
  actor: Actor | null,
  depositId: number | null,
  role: Role | null,
): Verdict {
  const { access } = rule;
  if (access.kind === 'public') return 'allow';
  if (actor === null) return 'sign-in';
  if (access.kind === 'deposit') {
    const isForeignToken = actor.via.kind === 'token' && actor.via.depositId !== depositId;
    if (depositId === null || role === null || isForeignToken) return 'no-such-deposit';
    if (actor.via.kind === 'token' && !tokenMayCall(actor.via.right, rule)) return 'token-right';
    return access.roles.includes(role) ? 'allow' : 'role';
  }
  if (actor.via.kind === 'token') return 'token-right';
  if (access.kind === 'signed-in') return 'allow';
  return actor.isAdministrator ? 'allow' : 'administrators-only';
}

const REFUSALS: Record<Exclude<Verdict, 'allow'>, () => AppError> = {
  'sign-in': () =>
    new AppError(401, 'sign-in-needed', 'Sign in first: there is no session, or it has ended.'),
  'no-such-deposit': () => notFound('deposit'),
  role: () => new AppError(403, 'role-needed', 'Your role on this deposit does not include this.'),
  'token-right': () => new AppError(403, 'token-right', 'This API token does not include this.'),
  'administrators-only': () =>
    new AppError(403, 'administrators-only', 'Only an administrator of this instance may do this.'),
};

export interface Grant {
  actor: Actor | null;
  member: Member | null;
}

export interface Guard {
  /**
   * Lets a request pass, or refuses it.
   *
   * @param readDepositId Reads the deposit from the address; called only once somebody is known,
   *   so that a stranger learns nothing of what an address should look like.
   * @throws {AppError} 401, 403 or 404.
   */
  admit(req: Request, rule: AccessRule, readDepositId: () => number | null): Promise<Grant>;
}

interface GuardSettings {
  cookieName: string;
  publicUrl: string;
  log: Log;
}

const bearerText = (req: Request): string | null =>
  /^Bearer ([\w.~+/=-]{1,400})$/i.exec(req.get('authorization') ?? '')?.[1] ?? null;

function cookieText(req: Request, name: string): string | null {
  const cookies: unknown = req.cookies;
  if (typeof cookies !== 'object' || cookies === null) return null;
  const found: unknown = Reflect.get(cookies, name);
  return typeof found === 'string' ? found : null;
}

export function createGuard(sources: GuardSources, settings: GuardSettings): Guard {
  /** A bearer token, once sent, is the only identity: a cookie beside it is not looked at. */
  const identify = async (req: Request): Promise<Actor | null> => {
    if (req.get('authorization') !== undefined) {
      const token = bearerText(req);
      return token === null ? null : sources.actorOfToken(token);
    }
    const cookie = cookieText(req, settings.cookieName);
    return cookie === null ? null : sources.actorOfSession(cookie);
  };

  return {
    async admit(req, rule, readDepositId) {
      if (req.get('authorization') === undefined) refuseForeignSite(req, settings.publicUrl);
      if (rule.access.kind === 'public') return { actor: null, member: null };
      const facts = requestFacts(req);
      const actor = await identify(req);
      facts.userId = actor?.id ?? null;
      const depositId = actor ? readDepositId() : null;
      facts.depositId = depositId;
      const asksDeposit = actor !== null && depositId !== null && rule.access.kind === 'deposit';
      const role = asksDeposit ? await sources.roleOn(depositId, actor.id) : null;
      const verdict = decide(rule, actor, depositId, role);
      if (verdict !== 'allow') {
        settings.log.warn({ event: 'access.refused', verdict, ...facts }, 'access refused');
        throw REFUSALS[verdict]();
      }
      return { actor, member: role !== null && depositId !== null ? { depositId, role } : null };
    },
  };
}
