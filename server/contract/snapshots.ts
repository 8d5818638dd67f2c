import * as z from 'zod';
import { DepositParams, Instant } from './common.ts';
import { endpoint } from './endpoint.ts';
import { TableKind } from './files.ts';
import { ANY_MEMBER } from './roles.ts';

/** What one analyte of one table can bear. Shares are of that table's rows. */
const AnalyteReading = z.object({
  method: z.string().nullable(),
  originalUnit: z.string(),
  n: z.number().int(),
  missingShare: z.number(),
  belowShare: z.number(),
  aboveShare: z.number(),
  /** Detection limits found, in ppm, most frequent first. */
  limitsPpm: z.array(z.object({ limit: z.number(), count: z.number().int() })),
  medianPpm: z.number().nullable(),
  maxPpm: z.number().nullable(),
  decision: z.enum(['keep', 'keep-with-care', 'drop']),
  reason: z.string(),
  /** Four-acid digestion caution, or null. */
  caution: z.string().nullable(),
});

/** One analyte of the snapshot, read in its assays, or in the surface samples where it has no others. */
export const AnalyteSummary = AnalyteReading.extend({
  analyte: z.string(),
  supports: z.array(z.enum(['drill', 'surface'])),
  /** The surface samples' own reading of an analyte that is assayed too. */
  onSurface: AnalyteReading.nullable().default(null),
});
export type AnalyteSummary = z.infer<typeof AnalyteSummary>;

/** Analytes of one support, each as that support's rows read it. */
export const analytesOf = (analytes: readonly AnalyteSummary[], support: 'drill' | 'surface'): AnalyteSummary[] =>
  analytes.flatMap((summary) => (summary.supports.includes(support) ? [support === 'surface' && summary.onSurface ? { ...summary, ...summary.onSurface } : summary] : []));

export const CodeMetres = z.object({ code: z.string(), metres: z.number(), intervals: z.number().int() });
export type CodeMetres = z.infer<typeof CodeMetres>;

export const FaultPlane = z.object({ name: z.string(), x: z.number(), y: z.number(), z: z.number(), dip: z.number(), dipDirection: z.number() });
export type FaultPlane = z.infer<typeof FaultPlane>;

/**
 * The state of all tables that an analysis runs on. `id` is a SHA-256 over the current revisions.
 * `frameTableId` names the column table with one row per interval (and per surface sample): hole,
 * from, to, length, x, y, z, support, lithology, weathering, one side column per fault.
 */
export const Snapshot = z.object({
  id: z.string(),
  number: z.number().int(),
  createdAt: Instant,
  isCurrent: z.boolean(),
  frameTableId: z.number().int(),
  /** Analyte columns of the drill rows (the frame's first `rows - surfaceRows`) and of the surface rows after them. */
  assayTableId: z.number().int().nullable(),
  surfaceTableId: z.number().int().nullable(),
  /** Structures as planes: hole, depth, dip, dip direction, confidence, structure type. */
  structureTableId: z.number().int().nullable(),
  revisions: z.array(z.object({ kind: TableKind, revisionId: z.number().int(), number: z.number().int(), rows: z.number().int() })),
  rows: z.number().int(),
  surfaceRows: z.number().int(),
  holes: z.number().int(),
  metresDrilled: z.number(),
  metresAssayed: z.number(),
  metresLogged: z.number(),
  analytes: z.array(AnalyteSummary),
  lithologies: z.array(CodeMetres),
  weatherings: z.array(CodeMetres),
  faults: z.array(FaultPlane),
  structures: z.number().int(),
  /** What assembly had to note: intervals without a collar, holes extended past their last station… */
  notes: z.array(z.string()),
});
export type Snapshot = z.infer<typeof Snapshot>;

/** Names of the frame's columns. */
export const FRAME = {
  hole: 'hole', from: 'from', to: 'to', length: 'length', x: 'x', y: 'y', z: 'z', support: 'support', sample: 'sample',
  lithology: 'lithology', lithologyDominance: 'lithology dominance', weathering: 'weathering', campaign: 'campaign',
} as const;
/** Frame column telling the side of a fault: `side of <fault>`, categories `above` and `below`. */
export const sideColumn = (fault: string): string => `side of ${fault}`;

const tag = 'Snapshots';
const access = { kind: 'deposit', roles: ANY_MEMBER } as const;

export const getSnapshot = endpoint({
  id: 'getSnapshot', method: 'get', path: '/deposits/:depositId/snapshot', tag, access,
  summary: 'The current snapshot, or null while no intervals or samples are loaded; `assembling` while a newer one is being put together',
  params: DepositParams, response: z.object({ snapshot: Snapshot.nullable(), assembling: z.boolean() }),
});
