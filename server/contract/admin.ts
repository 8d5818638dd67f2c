import * as z from 'zod';
import { Done, Email, Id, Instant } from './common.ts';
import { endpoint } from './endpoint.ts';

export const AdminUser = z.object({
  id: z.number().int(), email: z.string(), name: z.string(), isAdministrator: z.boolean(), isActive: z.boolean(),
  deposits: z.number().int(), lastSeenAt: Instant.nullable(), createdAt: Instant,
});
export type AdminUser = z.infer<typeof AdminUser>;

export const AdminDeposit = z.object({
  id: z.number().int(), name: z.string(), isDemo: z.boolean(), members: z.number().int(), leads: z.array(z.string()), bytesStored: z.number(), createdAt: Instant,
});
export type AdminDeposit = z.infer<typeof AdminDeposit>;

const tag = 'Administration';
const access = { kind: 'administrator' } as const;
const UserParams = z.strictObject({ userId: Id });

export const listUsers = endpoint({
  id: 'listUsers', method: 'get', path: '/admin/users', tag, access, summary: 'Everybody with an account', response: z.array(AdminUser),
});
export const inviteUser = endpoint({
  id: 'inviteUser', method: 'post', path: '/admin/users', tag, access,
  summary: 'Invite a person to the instance by e-mail', body: z.strictObject({ email: Email }), response: Done, status: 201,
});
export const updateUser = endpoint({
  id: 'updateUser', method: 'patch', path: '/admin/users/:userId', tag, access,
  summary: 'Deactivate or reactivate an account, give or take administration; sessions end at once',
  params: UserParams, body: z.strictObject({ isActive: z.boolean().optional(), isAdministrator: z.boolean().optional() }), response: AdminUser,
});
export const listAllDeposits = endpoint({
  id: 'listAllDeposits', method: 'get', path: '/admin/deposits', tag, access, summary: 'All deposits, without their contents', response: z.array(AdminDeposit),
});
export const resetDemo = endpoint({
  id: 'resetDemo', method: 'post', path: '/admin/demo-reset', tag, access,
  summary: 'Put the demonstration deposits back to their first state (demonstration instances only)', response: Done, status: 202,
});
