import type { ColumnRole, TableKind } from '#contract/files.ts';
import type { KnownHoles } from './hole-names.ts';

/** One row's values by role, as read; NaN and '' where a cell is empty. */
export interface RowValues {
  number(role: ColumnRole): number;
  text(role: ColumnRole): string;
  has(role: ColumnRole): boolean;
}

export interface Finding {
  role: ColumnRole;
  code: string;
  message: string;
  severity: 'aside' | 'warning';
}

export interface CheckContext {
  /** Null while no collars are loaded: holes and lengths cannot be checked then. */
  holes: KnownHoles | null;
}

/** Depths are logged to the half centimetre. */
const ROUNDING_M = 0.005;
const metres = (value: number): string => `${Number(value.toFixed(3))} m`;
const signed = (value: number): string => String(value).replace('-', '\u2212');
const aside = (role: ColumnRole, code: string, message: string): Finding => ({ role, code, message, severity: 'aside' });
const warning = (role: ColumnRole, code: string, message: string): Finding => ({ role, code, message, severity: 'warning' });

type Check = (row: RowValues, context: CheckContext) => Finding[];

const needsNumbers = (...roles: ColumnRole[]): Check => (row) =>
  roles.filter((role) => Number.isNaN(row.number(role))).map((role) => aside(role, 'number-missing', `expected a number for ${role}, found an empty cell`));

const needsText = (role: ColumnRole): Check => (row) =>
  row.text(role) === '' ? [aside(role, 'text-missing', `expected ${role === 'hole' ? 'a hole name' : `a ${role}`}, found an empty cell`)] : [];

const within = (role: ColumnRole, low: number, high: number): Check => (row) => {
  const value = row.number(role);
  const isOut = value < low || value > high;
  return isOut ? [aside(role, `${role}-out-of-range`, `expected ${role} between ${signed(low)} and ${signed(high)}°, found ${signed(value)}`)] : [];
};

const knownHole: Check = (row, { holes }) => {
  const hole = row.text('hole');
  if (!holes || hole === '' || holes.lengthOf(hole) !== undefined) return [];
  const suggestion = holes.suggestionFor(hole);
  return [aside('hole', 'hole-unknown', `no hole ${hole} among the collars${suggestion ? `; ${suggestion} meant?` : ''}`)];
};

const intervalOrder: Check = (row) => {
  const from = row.number('from');
  const to = row.number('to');
  if (from < 0) return [aside('from', 'interval-negative', `expected from at or below the collar, found ${from}`)];
  return to <= from ? [aside('to', 'interval-reversed', `expected to beyond from ${from}, found ${to}`)] : [];
};

const endOfHole = (role: 'to' | 'depth', start: 'from' | 'depth'): Check => (row, { holes }) => {
  const length = holes?.lengthOf(row.text('hole'));
  if (length === undefined || !(row.number(role) > length + ROUNDING_M)) return [];
  const past = metres(row.number(role) - length);
  if (row.number(start) >= length) return [aside(role, 'past-end', `lies wholly past the end of the hole at ${metres(length)}`)];
  return [warning(role, 'past-end', `${past} past the end of the hole at ${metres(length)}`)];
};

const positiveLength: Check = (row) =>
  row.number('length') <= 0 ? [aside('length', 'length-not-positive', `expected a length above 0 m, found ${row.number('length')}`)] : [];

const notNegative = (role: ColumnRole): Check => (row) =>
  row.number(role) < 0 ? [aside(role, `${role}-negative`, `expected ${role} of 0 or more, found ${row.number(role)}`)] : [];

const planeOfStructure: Check = (row) => {
  const isOriented = row.has('alpha') ? !Number.isNaN(row.number('alpha')) : !Number.isNaN(row.number('dip'));
  return isOriented ? [] : [aside(row.has('alpha') ? 'alpha' : 'dip', 'angle-missing', 'expected an alpha or a dip, found an empty cell')];
};

const logged: Check[] = [needsText('hole'), needsNumbers('from', 'to'), intervalOrder, knownHole, endOfHole('to', 'from')];

const CHECKS: Record<TableKind, Check[]> = {
  collar: [needsText('hole'), needsNumbers('x', 'y', 'z', 'length'), positiveLength],
  survey: [needsText('hole'), needsNumbers('depth', 'azimuth', 'dip'), notNegative('depth'), within('azimuth', 0, 360), within('dip', -90, 90), knownHole],
  assay: logged,
  surface: [needsNumbers('x', 'y')],
  lithology: [...logged, needsText('code')],
  weathering: [...logged, needsText('code')],
  structure: [
    needsText('hole'), needsNumbers('depth'), notNegative('depth'), planeOfStructure, within('alpha', 0, 90), within('beta', 0, 360),
    within('dip', -90, 90), within('dip-direction', 0, 360), knownHole, endOfHole('depth', 'depth'),
  ],
  fault: [needsText('name'), needsNumbers('x', 'y', 'z', 'dip', 'dip-direction'), within('dip', 0, 90), within('dip-direction', 0, 360)],
};

/** What is wrong with one row of a kind of table; empty when it is sound. */
export function checkRow(kind: TableKind, row: RowValues, context: CheckContext): Finding[] {
  return CHECKS[kind].flatMap((check) => check(row, context));
}
