import * as z from 'zod';
import { Analyte, DepositParams, Done, Email, Id, Instant, Name, Note, PersonRef, Version } from './common.ts';
import { endpoint } from './endpoint.ts';
import { ANY_MEMBER, LEADS, Role, TokenRight } from './roles.ts';

/** Map grid: an EPSG code of a projected grid in metres, or a local grid named by the team. */
export const Grid = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('epsg'), code: z.number().int().min(1024).max(32767) }),
  z.strictObject({ kind: z.literal('local'), name: Name }),
]);
export type Grid = z.infer<typeof Grid>;

/** Units grades are shown in; storage is always ppm. */
export const GradeUnit = z.enum(['ppm', '%', 'g/t', 'ppb']);
export type GradeUnit = z.infer<typeof GradeUnit>;

export const PayAnalyte = z.strictObject({ analyte: Analyte, unit: GradeUnit });
export type PayAnalyte = z.infer<typeof PayAnalyte>;

const analyteList = <Item extends z.ZodType>(item: Item) => z.array(item).max(20);

export const DepositBody = z.strictObject({
  name: Name,
  description: Note.default(''),
  grid: Grid,
  payAnalytes: analyteList(PayAnalyte).min(1),
  deleteriousAnalytes: analyteList(Analyte),
});
export type DepositBody = z.infer<typeof DepositBody>;
export type DepositBodyInput = z.input<typeof DepositBody>;

export const Deposit = DepositBody.extend({
  id: z.number().int(),
  isDemo: z.boolean(),
  version: Version,
  createdAt: Instant,
  /** The caller's role; null for an administrator who is no member. */
  myRole: Role.nullable(),
  leads: z.array(PersonRef),
});
export type Deposit = z.infer<typeof Deposit>;

export const DepositListRow = z.object({
  id: z.number().int(),
  name: z.string(),
  description: z.string(),
  isDemo: z.boolean(),
  myRole: Role,
  payAnalytes: z.array(PayAnalyte),
  holes: z.number().int(),
  metres: z.number(),
  /** What holds, in one sentence. */
  finding: z.string(),
});
export type DepositListRow = z.infer<typeof DepositListRow>;

/** The stages this version works on, in the order of the job. */
export const StageKey = z.enum(['deposit', 'intake', 'suite', 'components', 'groups', 'populations', 'domains', 'geomet', 'releases', 'record']);
export type StageKey = z.infer<typeof StageKey>;
export const StageState = z.enum(['empty', 'ready', 'attention', 'stale', 'done']);
export type StageState = z.infer<typeof StageState>;

export const Stage = z.object({
  key: StageKey,
  state: StageState,
  /** With `attention`: how many things wait ("3 to settle"). */
  count: z.number().int().nullable(),
  /** State in words: "done", "stale", "3 to settle". */
  word: z.string(),
  /** What an empty stage waits for; null when it can start. */
  waitsFor: z.string().nullable(),
});
export type Stage = z.infer<typeof Stage>;

export const MetresRun = z.object({
  label: z.string(),
  metres: z.number(),
  note: z.string(),
  isStale: z.boolean(),
});

export const Overview = z.object({
  finding: z.string(),
  totalMetres: z.number(),
  /** Drilled, assayed, logged, grouped, coded, in that order. */
  metres: z.array(MetresRun),
  waiting: z.array(z.object({ stage: StageKey, tone: z.enum(['good', 'warn', 'bad', 'note', 'stale']), title: z.string(), detail: z.string() })),
  lately: z.array(z.object({ at: Instant, who: z.string(), what: z.string() })),
  grades: z.array(z.object({
    /** Median in ppm; `unit` is how the deposit shows it. */
    domainCode: z.string(), analyte: z.string(), unit: GradeUnit, median: z.number().nullable(),
    verdict: z.enum(['single', 'suspect', 'mixed', 'too-few']), n: z.number().int(),
  })),
});
export type Overview = z.infer<typeof Overview>;

const tag = 'Deposits';
const anyMember = { kind: 'deposit', roles: ANY_MEMBER } as const;
const lead = { kind: 'deposit', roles: LEADS } as const;

export const listDeposits = endpoint({
  id: 'listDeposits', method: 'get', path: '/deposits', tag, access: { kind: 'signed-in' },
  summary: 'Deposits you belong to', response: z.array(DepositListRow),
});
export const createDeposit = endpoint({
  id: 'createDeposit', method: 'post', path: '/deposits', tag, access: { kind: 'signed-in' },
  summary: 'Create a deposit; you become its lead', body: DepositBody, response: Deposit, status: 201, idempotent: true,
});
export const getDeposit = endpoint({
  id: 'getDeposit', method: 'get', path: '/deposits/:depositId', tag, access: anyMember,
  summary: 'One deposit', params: DepositParams, response: Deposit,
});
export const updateDeposit = endpoint({
  id: 'updateDeposit', method: 'put', path: '/deposits/:depositId', tag, access: lead,
  summary: 'Change a deposit', params: DepositParams, body: DepositBody, response: Deposit, ifMatch: true,
});
export const getOverview = endpoint({
  id: 'getOverview', method: 'get', path: '/deposits/:depositId/overview', tag, access: anyMember,
  summary: 'How far the metres have come and what is waiting', params: DepositParams, response: Overview,
});
export const listStages = endpoint({
  id: 'listStages', method: 'get', path: '/deposits/:depositId/stages', tag, access: anyMember,
  summary: 'State of each stage', params: DepositParams, response: z.array(Stage),
});

export const Member = z.object({
  userId: z.number().int(), name: z.string(), email: z.string(), role: Role, since: Instant,
});
export type Member = z.infer<typeof Member>;
export const PendingInvitation = z.object({
  id: z.number().int(), email: z.string(), role: Role, invitedBy: z.string(), sentAt: Instant, expiresAt: Instant,
});
export type PendingInvitation = z.infer<typeof PendingInvitation>;
export const Invite = z.strictObject({ email: Email, role: Role });
export type InviteInput = z.input<typeof Invite>;

const MemberParams = DepositParams.extend({ userId: Id });

export const listMembers = endpoint({
  id: 'listMembers', method: 'get', path: '/deposits/:depositId/members', tag, access: anyMember,
  summary: 'Members and open invitations', params: DepositParams,
  response: z.object({ members: z.array(Member), invitations: z.array(PendingInvitation) }),
});
export const inviteMember = endpoint({
  id: 'inviteMember', method: 'post', path: '/deposits/:depositId/invitations', tag, access: lead,
  summary: 'Invite a person by e-mail with a role', params: DepositParams, body: Invite, response: PendingInvitation, status: 201, idempotent: true,
});
export const withdrawInvitation = endpoint({
  id: 'withdrawInvitation', method: 'delete', path: '/deposits/:depositId/invitations/:invitationId', tag, access: lead,
  summary: 'Withdraw an open invitation', params: DepositParams.extend({ invitationId: Id }), response: Done,
});
export const changeMemberRole = endpoint({
  id: 'changeMemberRole', method: 'patch', path: '/deposits/:depositId/members/:userId', tag, access: lead,
  summary: 'Give a member another role; the last lead cannot step down', params: MemberParams, body: z.strictObject({ role: Role }), response: Member,
});
export const removeMember = endpoint({
  id: 'removeMember', method: 'delete', path: '/deposits/:depositId/members/:userId', tag, access: lead,
  summary: 'Remove a member; the last lead cannot be removed', params: MemberParams, response: Done,
});

export const ApiToken = z.object({
  id: z.number().int(), name: z.string(), right: TokenRight, createdAt: Instant, expiresAt: Instant, lastUsedAt: Instant.nullable(), owner: PersonRef,
});
export type ApiToken = z.infer<typeof ApiToken>;

export const listTokens = endpoint({
  id: 'listTokens', method: 'get', path: '/deposits/:depositId/tokens', tag, access: anyMember,
  summary: 'Your API tokens on this deposit (a lead sees everybody’s)', params: DepositParams, response: z.array(ApiToken),
});
export const createToken = endpoint({
  id: 'createToken', method: 'post', path: '/deposits/:depositId/tokens', tag, access: anyMember,
  summary: 'Make an API token; its text is shown once', params: DepositParams,
  body: z.strictObject({ name: Name, right: TokenRight, days: z.number().int().min(1).max(366) }),
  response: z.object({ token: ApiToken, text: z.string() }), status: 201,
});
export const revokeToken = endpoint({
  id: 'revokeToken', method: 'delete', path: '/deposits/:depositId/tokens/:tokenId', tag, access: anyMember,
  summary: 'Revoke an API token', params: DepositParams.extend({ tokenId: Id }), response: Done,
});
