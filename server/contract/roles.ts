import * as z from 'zod';

/** Roles a person may hold on one deposit. What each may do is decided per endpoint (`access`). */
export const ROLES = ['lead', 'geologist', 'geometallurgist', 'site-geologist', 'estimator', 'viewer'] as const;
export const Role = z.enum(ROLES);
export type Role = z.infer<typeof Role>;

/** Role sets the endpoints name, so that a right reads as a sentence. */
export const ANY_MEMBER: readonly Role[] = ROLES;
export const ANALYSTS: readonly Role[] = ['lead', 'geologist'];
export const GEOMET_ANALYSTS: readonly Role[] = ['lead', 'geologist', 'geometallurgist'];
export const LEADS: readonly Role[] = ['lead'];

/** What an API token may do: read everything, fetch codes only, or work with its owner's role. */
export const TOKEN_RIGHTS = ['read', 'codes', 'work'] as const;
export const TokenRight = z.enum(TOKEN_RIGHTS);
export type TokenRight = z.infer<typeof TokenRight>;
