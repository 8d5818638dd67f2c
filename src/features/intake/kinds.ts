import { REQUIRED_ROLES, ROLES_OF_KIND, TABLE_KINDS, type ColumnRole, type TableKind } from '#contract/files.ts';

/** A kind of table as the interface names it. */
export const KIND_NAMES: Record<TableKind, string> = {
  collar: 'collars',
  survey: 'surveys',
  assay: 'assays',
  surface: 'surface samples',
  lithology: 'lithology',
  weathering: 'weathering',
  structure: 'structures',
  fault: 'faults',
};

/** What each kind is brought in for. */
export const KIND_PURPOSE: Record<TableKind, string> = {
  collar: 'where each hole starts and how long it is; all other tables are checked against it',
  survey: 'where each hole goes below its collar',
  assay: 'grades by interval, what everything else stands on',
  surface: 'grades at points on the ground',
  lithology: 'logged rock by interval',
  weathering: 'logged oxidation by interval',
  structure: 'planes measured on core',
  fault: 'planes that divide the ground into blocks',
};

export const ROLE_NAMES: Record<ColumnRole, string> = {
  skip: 'not used',
  hole: 'hole',
  from: 'from',
  to: 'to',
  depth: 'depth',
  sample: 'sample',
  x: 'x, easting',
  y: 'y, northing',
  z: 'z, elevation',
  length: 'length',
  azimuth: 'azimuth',
  dip: 'dip',
  'dip-direction': 'dip direction',
  alpha: 'alpha',
  beta: 'beta',
  confidence: 'confidence',
  'structure-type': 'structure type',
  code: 'code',
  name: 'name',
  campaign: 'campaign',
  laboratory: 'laboratory',
  batch: 'batch',
  date: 'date',
  analyte: 'analyte',
  note: 'note',
};

const METRES: readonly ColumnRole[] = ['from', 'to', 'depth', 'x', 'y', 'z', 'length'];
const DEGREES: readonly ColumnRole[] = ['azimuth', 'dip', 'dip-direction', 'alpha', 'beta'];

/** Unit of a column that is no analyte; null where it has none. */
export const unitOfRole = (role: ColumnRole): 'm' | '°' | null =>
  METRES.includes(role) ? 'm' : DEGREES.includes(role) ? '°' : null;

export const hasAnalytes = (kind: TableKind): boolean => ROLES_OF_KIND[kind].includes('analyte');

/** "hole, from, to, analyte", with alternatives as "alpha or dip". */
export const neededColumns = (kind: TableKind): string =>
  REQUIRED_ROLES[kind].map((roles) => roles.map((role) => role.replaceAll('-', ' ')).join(' or ')).join(', ');

/** Tables depend on those before them: collars first. */
export const kindOrder = (kind: TableKind): number => TABLE_KINDS.indexOf(kind);
