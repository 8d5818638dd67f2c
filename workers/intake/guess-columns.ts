import { COLUMN_ROLES, ROLES_OF_KIND, type ColumnGuess, type ColumnRole, type TableKind } from '#contract/files.ts';
import { parseHeader, type HeaderReading } from '#kernels/units/header.ts';

const SAMPLE_CELLS = 50;

const isRole = (role: string): role is ColumnRole => COLUMN_ROLES.some((known) => known === role);

function readingsOf(header: readonly string[], rows: readonly string[][]): HeaderReading[] {
  return header.map((text, index) => {
    const samples = rows.map((cells) => (cells[index] ?? '').trim()).filter((cell) => cell !== '').slice(0, SAMPLE_CELLS);
    return parseHeader(text, samples);
  });
}

/** The kind a table most likely is, by its columns; the file's name settles what columns leave open. */
export function guessKind(header: readonly string[], fileName: string, rows: readonly string[][] = []): TableKind {
  const readings = readingsOf(header, rows);
  const has = (...roles: string[]): boolean => roles.every((role) => readings.some((reading) => reading.role === role));
  const name = fileName.toLowerCase();
  const isAbout = (topic: string, word: RegExp): boolean => readings.some((reading) => reading.topic === topic) || word.test(name);
  if (has('alpha') || has('structure-type') || (has('depth', 'dip', 'dip-direction') && !isAbout('fault', /fault/))) return 'structure';
  if (isAbout('fault', /fault/) && has('dip', 'x')) return 'fault';
  if (has('analyte', 'from', 'to')) return 'assay';
  if (has('analyte', 'x', 'y')) return 'surface';
  if (has('depth', 'azimuth', 'dip')) return 'survey';
  if (has('from', 'to')) return isAbout('weathering', /weath|oxid/) ? 'weathering' : 'lithology';
  return 'collar';
}

type Guessed = Pick<HeaderReading, 'certainty' | 'reason'> & { role: ColumnRole | 'skip' };

/** A column named after what another kind of table calls it: a collar's depth is its hole's length, a structure's from its depth. */
const STAND_INS: Partial<Record<TableKind, { named: ColumnRole; is: ColumnRole; reading: Pick<HeaderReading, 'certainty' | 'reason'> }>> = {
  collar: { named: 'depth', is: 'length', reading: { certainty: 'sure', reason: 'the depth of a collar is the length of its hole' } },
  structure: { named: 'from', is: 'depth', reading: { certainty: 'check', reason: 'read as the depth it was measured at' } },
};

function roleIn(kind: TableKind, { role, certainty, reason }: HeaderReading, readings: readonly HeaderReading[]): Guessed {
  const standIn = STAND_INS[kind];
  if (standIn && role === standIn.named && !readings.some((other) => other.role === standIn.is)) return { role: standIn.is, ...standIn.reading };
  return { role: isRole(role) ? role : 'skip', certainty, reason };
}

/** What each column probably is, for a kind; a role is given once, to the first column that fits. */
export function guessColumns(header: readonly string[], rows: readonly string[][], kind: TableKind): ColumnGuess[] {
  const used = new Set<ColumnRole>();
  const readings = readingsOf(header, rows);
  const hasEasting = readings.some(({ role }) => role === 'x');
  return readings.map((reading, index) => {
    const text = header[index] ?? '';
    const firstValue = rows.map((cells) => (cells[index] ?? '').trim()).find((cell) => cell !== '') ?? '';
    const { role, certainty, reason } = roleIn(kind, reading, readings);
    const base = { index, header: text, analyte: null, unit: null, oxide: null, method: null, firstValue };
    const skipped = (reason: string): ColumnGuess => ({ ...base, role: 'skip', certainty: 'unknown', reason });
    if (role === 'skip') return skipped(reason);
    if (!ROLES_OF_KIND[kind].includes(role)) return skipped(`not used in a ${kind} table`);
    if (role === 'analyte') {
      const { element, unit, oxide, method } = reading;
      return { ...base, role, analyte: element, unit, oxide, method: method?.slice(0, 80) ?? null, certainty, reason };
    }
    if (used.has(role)) return skipped(`another column is ${role} already`);
    used.add(role);
    // Beside an x there is no doubt whether y is a coordinate.
    if (role === 'y' && hasEasting) return { ...base, role, certainty: 'sure', reason: 'stands beside x' };
    return { ...base, role, certainty, reason };
  });
}
