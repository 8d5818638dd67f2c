import * as z from 'zod';
import { Done, Email, Instant, Name } from './common.ts';
import { endpoint } from './endpoint.ts';
import { Role } from './roles.ts';

/**
 * A password's text. Length is counted in bytes (12 to 72) because the hash reads no more; the
 * server also refuses common ones and those holding the product's or the person's name.
 */
export const Password = z.string().min(1).max(400);
export const NewPassword = z
  .string()
  .max(400)
  .refine((text) => new TextEncoder().encode(text).length >= 12, 'expected at least 12 bytes')
  .refine((text) => new TextEncoder().encode(text).length <= 72, 'expected at most 72 bytes');

export const Me = z.object({
  id: z.number().int(),
  email: z.string(),
  name: z.string(),
  isAdministrator: z.boolean(),
  /** True on a seeded demonstration instance, where the mailbox can be read at /mailbox. */
  isDemoInstance: z.boolean(),
});
export type Me = z.infer<typeof Me>;

export const SessionRow = z.object({
  id: z.string(),
  createdAt: Instant,
  lastSeenAt: Instant,
  address: z.string(),
  userAgent: z.string(),
  isThisOne: z.boolean(),
});
export type SessionRow = z.infer<typeof SessionRow>;

/** What the sign-in page may show before anyone is signed in. */
export const Instance = z.object({
  isDemoInstance: z.boolean(),
  /** Demonstration sign-ins; empty on any other instance. */
  demoSignIns: z.array(z.object({ email: z.string(), password: z.string(), name: z.string(), role: z.string() })),
});
export type Instance = z.infer<typeof Instance>;

const LinkParams = z.strictObject({ token: z.string().min(20).max(200) });
const tag = 'People';

export const getInstance = endpoint({
  id: 'getInstance', method: 'get', path: '/instance', tag, access: { kind: 'public' },
  summary: 'Whether this is a demonstration instance, and its sign-ins', response: Instance,
});
export const signIn = endpoint({
  id: 'signIn', method: 'post', path: '/session', tag, access: { kind: 'public' },
  summary: 'Sign in; the session comes as a cookie',
  body: z.strictObject({ email: Email, password: Password }), response: Me,
});
export const signOut = endpoint({
  id: 'signOut', method: 'delete', path: '/session', tag, access: { kind: 'signed-in' },
  summary: 'Sign out and end this session', response: Done,
});
export const getMe = endpoint({
  id: 'getMe', method: 'get', path: '/me', tag, access: { kind: 'signed-in' },
  summary: 'Who is signed in', response: Me,
});
export const updateMe = endpoint({
  id: 'updateMe', method: 'patch', path: '/me', tag, access: { kind: 'signed-in' },
  summary: 'Change your own name', body: z.strictObject({ name: Name }), response: Me,
});
export const changePassword = endpoint({
  id: 'changePassword', method: 'post', path: '/me/password', tag, access: { kind: 'signed-in' },
  summary: 'Change your own password; other sessions end',
  body: z.strictObject({ currentPassword: Password, newPassword: NewPassword }), response: Done,
});
export const listSessions = endpoint({
  id: 'listSessions', method: 'get', path: '/me/sessions', tag, access: { kind: 'signed-in' },
  summary: 'Your open sessions', response: z.array(SessionRow),
});
export const endSession = endpoint({
  id: 'endSession', method: 'delete', path: '/me/sessions/:sessionId', tag, access: { kind: 'signed-in' },
  summary: 'End one of your sessions', params: z.strictObject({ sessionId: z.string().min(8).max(80) }), response: Done,
});
export const askPasswordReset = endpoint({
  id: 'askPasswordReset', method: 'post', path: '/password-resets', tag, access: { kind: 'public' },
  summary: 'Ask for a reset link; the answer is the same whether or not the account exists',
  body: z.strictObject({ email: Email }), response: Done, status: 202,
});
export const resetPassword = endpoint({
  id: 'resetPassword', method: 'post', path: '/password-resets/:token', tag, access: { kind: 'public' },
  summary: 'Set a new password with a reset link', params: LinkParams,
  body: z.strictObject({ newPassword: NewPassword }), response: Done,
});

/** What an invitation says before it is accepted. */
export const InvitationView = z.object({
  email: z.string(),
  depositName: z.string().nullable(),
  role: Role.nullable(),
  invitedBy: z.string(),
  /** An account with this address exists: sign in with its password to accept. */
  hasAccount: z.boolean(),
});
export type InvitationView = z.infer<typeof InvitationView>;

export const getInvitation = endpoint({
  id: 'getInvitation', method: 'get', path: '/invitations/:token', tag, access: { kind: 'public' },
  summary: 'Read an invitation by its link', params: LinkParams, response: InvitationView,
});
export const acceptInvitation = endpoint({
  id: 'acceptInvitation', method: 'post', path: '/invitations/:token', tag, access: { kind: 'public' },
  summary: 'Accept an invitation: makes the account if there is none (name and a new password), or checks the password of the one there is; signs in',
  params: LinkParams,
  body: z.strictObject({ name: Name.optional(), password: Password }),
  response: z.object({ me: Me, depositId: z.number().int().nullable() }),
});
