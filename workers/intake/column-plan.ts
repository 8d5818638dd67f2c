import { type ColumnMapping, type ColumnRole, type FileMapping, REQUIRED_ROLES } from '#contract/files.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { ppmPerUnit } from '#kernels/units/assay-unit.ts';
import { oxideFactor } from '#kernels/units/oxides.ts';

export interface AnalyteColumn {
  index: number;
  header: string;
  analyte: string;
  unit: string;
  method: string | null;
  /** Multiplies a written value into ppm of the element. */
  toPpm: number;
}

export interface PlainColumn {
  index: number;
  header: string;
  role: ColumnRole;
}

/** Which column of the file feeds what. */
export interface ColumnPlan {
  numbers: PlainColumn[];
  categories: PlainColumn[];
  texts: PlainColumn[];
  analytes: AnalyteColumn[];
  /** Cells a whole row has. */
  width: number;
}

const NUMBERS: readonly ColumnRole[] = ['from', 'to', 'depth', 'x', 'y', 'z', 'length', 'azimuth', 'dip', 'dip-direction', 'alpha', 'beta'];
const CATEGORIES: readonly ColumnRole[] = ['hole', 'code', 'name', 'confidence', 'structure-type', 'campaign', 'laboratory', 'batch'];
const TEXTS: readonly ColumnRole[] = ['sample', 'date', 'note'];

/**
 * Turns a mapping into a plan.
 *
 * @throws {KernelError} `bad-mapping` naming the missing role, the doubled role or column, or the column
 *   without a unit.
 */
export function planColumns(mapping: FileMapping): ColumnPlan {
  for (const alternatives of REQUIRED_ROLES[mapping.kind]) {
    if (mapping.columns.some(({ role }) => alternatives.includes(role))) continue;
    throw new KernelError('bad-mapping', `expected a column for ${alternatives.join(' or ')} in a ${mapping.kind} table, found none`);
  }
  const pick = (roles: readonly ColumnRole[]): PlainColumn[] =>
    mapping.columns.filter(({ role }) => roles.includes(role)).map(({ index, header, role }) => ({ index, header, role }));
  const plan = { numbers: pick(NUMBERS), categories: pick(CATEGORIES), texts: pick(TEXTS) };
  refuseSharedColumns(mapping.columns);
  refuseDoubles([...plan.numbers, ...plan.categories, ...plan.texts]);
  const analytes = mapping.columns.filter(({ role }) => role === 'analyte').map(toAnalyteColumn);
  const width = Math.max(...mapping.columns.map(({ index }) => index)) + 1;
  return { ...plan, analytes, width };
}

function refuseSharedColumns(columns: readonly ColumnMapping[]): void {
  const seen = new Map<number, string>();
  for (const { index, header } of columns) {
    const other = seen.get(index);
    if (other !== undefined) {
      throw new KernelError('bad-mapping', `expected each column once, found column ${index + 1} as “${other}” and “${header}”`);
    }
    seen.set(index, header);
  }
}

function refuseDoubles(columns: PlainColumn[]): void {
  const seen = new Map<ColumnRole, string>();
  for (const { role, header } of columns) {
    const other = seen.get(role);
    if (other !== undefined) {
      throw new KernelError('bad-mapping', `expected one column for ${role}, found “${other}” and “${header}”`);
    }
    seen.set(role, header);
  }
}

function toAnalyteColumn({ index, header, analyte, unit, oxide, method }: ColumnMapping): AnalyteColumn {
  if (analyte === null) throw new KernelError('bad-mapping', `column “${header}”: expected which analyte it is`);
  if (unit === null) throw new KernelError('bad-mapping', `column “${header}” (${analyte}): expected a unit`);
  const toPpm = ppmPerUnit(unit) / (oxide === null ? 1 : oxideFactor(oxide));
  return { index, header, analyte, unit: oxide ? `${unit} ${oxide}` : unit, method, toPpm };
}
