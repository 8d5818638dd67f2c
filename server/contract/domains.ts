import * as z from 'zod';
import { ColourSlot, DepositParams, Done, Id, Instant, Name, Note, PersonRef, Version } from './common.ts';
import { endpoint } from './endpoint.ts';
import { JobStarted } from './jobs.ts';
import { ANALYSTS, ANY_MEMBER } from './roles.ts';
import { CellSummary, Verdict } from './screens.ts';

export const UNASSIGNED = 'UNASSIGNED';
export const DomainCode = z.string().trim().regex(/^[A-Z0-9][A-Z0-9_-]{0,11}$/, 'expected 1 to 12 of A–Z, 0–9, _ or -').refine((code) => code !== UNASSIGNED, `${UNASSIGNED} is kept for intervals without a domain`);

export const DomainBody = z.strictObject({
  code: DomainCode,
  name: Name,
  rationale: Note.min(1, 'expected a sentence on why this is one domain'),
  slot: ColourSlot,
  /** Groups of the active grouping that make the domain; a group belongs to one domain only. */
  groupLabels: z.array(z.number().int().min(1).max(20)).min(1).max(20),
});
export type DomainBody = z.infer<typeof DomainBody>;
export type DomainBodyInput = z.input<typeof DomainBody>;

export const Domain = DomainBody.extend({
  id: z.number().int(), groupingId: z.number().int(), intervals: z.number().int(), metres: z.number(), version: Version, createdBy: PersonRef, createdAt: Instant, updatedAt: Instant,
  hasEvidence: z.boolean(), evidenceIsStale: z.boolean(),
});
export type Domain = z.infer<typeof Domain>;

/** All candidate domains with what they cover; every interval is in one of them or unassigned. */
export const DomainList = z.object({
  groupingId: z.number().int().nullable(), domains: z.array(Domain),
  unassigned: z.object({ intervals: z.number().int(), metres: z.number() }), total: z.object({ intervals: z.number().int(), metres: z.number() }), isStale: z.boolean(),
});
export type DomainList = z.infer<typeof DomainList>;

/** How one domain divides by one logged category, against all other intervals. */
export const CategorySplit = z.object({
  category: z.string(),
  levels: z.array(z.object({ level: z.string(), intervals: z.number().int(), metres: z.number(), share: z.number(), shareElsewhere: z.number(), adjustedResidual: z.number().nullable() })),
  notLogged: z.object({ intervals: z.number().int(), metres: z.number() }),
  n: z.number().int(), chiSquare: z.number().nullable(), df: z.number().int().nullable(), nominalP: z.number().nullable(), nominalPWithheld: z.string().nullable(), permutationP: z.number().nullable(),
  cramersV: z.number().nullable(), cramersVCorrected: z.number().nullable(), strength: z.string(), notes: z.array(z.string()),
});
export type CategorySplit = z.infer<typeof CategorySplit>;

export const OrientationSet = z.object({
  structureType: z.string(), confidence: z.string(), n: z.number().int(),
  /** A horizontal plane has no dip direction. */
  meanPlane: z.object({ dip: z.number(), dipDirection: z.number().nullable() }).nullable(), fisherK: z.number().nullable(), alpha95: z.number().nullable(),
  eigenvalues: z.tuple([z.number(), z.number(), z.number()]).nullable(), woodcockK: z.number().nullable(), strengthC: z.number().nullable(), uniformityP: z.number().nullable(), reading: z.string(),
});
export type OrientationSet = z.infer<typeof OrientationSet>;

export const PopulationPart = CellSummary.extend({
  label: z.string(),
  role: z.enum(['before', 'domain', 'part']),
  splitBy: z.string().nullable(),
  /** Kernel density of ln grade on a shared grid, scaled to height 1; null when too few. */
  density: z.object({ ppm: z.array(z.number()), height: z.array(z.number()) }).nullable(),
});
export type PopulationPart = z.infer<typeof PopulationPart>;

export const DomainEvidence = z.object({
  domainId: z.number().int(), snapshotId: z.string(), snapshotNumber: z.number().int(), createdAt: Instant, isStale: z.boolean(), finding: z.string(),
  intervals: z.number().int(), metres: z.number(), holes: z.number().int(), runs: z.number().int(), meanRunM: z.number(), meanMembership: z.number(),
  splits: z.array(CategorySplit),
  structures: z.array(z.object({ hole: z.string(), depthM: z.number(), structureType: z.string(), confidence: z.string(), dip: z.number(), dipDirection: z.number().nullable() })),
  orientations: z.array(OrientationSet),
  populations: z.array(PopulationPart),
  grades: z.array(z.object({ analyte: z.string(), mean: z.number().nullable(), median: z.number().nullable(), cv: z.number().nullable(), verdict: Verdict, shareOfMetal: z.number().nullable() })),
  notes: z.array(z.string()),
});
export type DomainEvidence = z.infer<typeof DomainEvidence>;

const tag = 'Domains';
const read = { kind: 'deposit', roles: ANY_MEMBER } as const;
const write = { kind: 'deposit', roles: ANALYSTS } as const;
const DomainParams = DepositParams.extend({ domainId: Id });

export const listDomains = endpoint({
  id: 'listDomains', method: 'get', path: '/deposits/:depositId/domains', tag, access: read, summary: 'Candidate domains and what they cover', params: DepositParams, response: DomainList,
});
export const createDomain = endpoint({
  id: 'createDomain', method: 'post', path: '/deposits/:depositId/domains', tag, access: write, summary: 'Accept one or several groups as a candidate domain', params: DepositParams, body: DomainBody, response: Domain, status: 201, idempotent: true,
});
export const updateDomain = endpoint({
  id: 'updateDomain', method: 'put', path: '/deposits/:depositId/domains/:domainId', tag, access: write, summary: 'Change a candidate domain', params: DomainParams, body: DomainBody, response: Domain, ifMatch: true,
});
export const deleteDomain = endpoint({
  id: 'deleteDomain', method: 'delete', path: '/deposits/:depositId/domains/:domainId', tag, access: write, summary: 'Take a candidate domain back; its intervals become unassigned', params: DomainParams, response: Done, ifMatch: true,
});
export const restoreDomain = endpoint({
  id: 'restoreDomain', method: 'post', path: '/deposits/:depositId/domains/:domainId/restore', tag, access: write, summary: 'Undo taking a candidate domain back', params: DomainParams, response: Domain,
});
export const getEvidence = endpoint({
  id: 'getEvidence', method: 'get', path: '/deposits/:depositId/domains/:domainId/evidence', tag, access: read, summary: 'Evidence for a domain, or null before it is gathered', params: DomainParams, response: DomainEvidence.nullable(),
});
export const gatherEvidence = endpoint({
  id: 'gatherEvidence', method: 'post', path: '/deposits/:depositId/evidence', tag, access: write, summary: 'Gather evidence for all candidate domains, or the ones named', params: DepositParams,
  body: z.strictObject({ domainIds: z.array(Id).max(100).default([]) }), response: JobStarted, status: 202, idempotent: true,
});
