import { OXIDE_BY_FORMULA, type Oxide } from './oxides.ts';
import type { AssayUnit, UnitReading } from './assay-unit.ts';
import { readAnalyte, splitHeader, type AnalyteToken } from './header-analyte.ts';
import { proposeUnit, sampleNumbers } from './header-proposal.ts';
import { readHeaderWord, type HeaderRole, type HeaderTopic } from './header-words.ts';

/** What a column header says, and how sure that is. */
export interface HeaderReading {
  role: HeaderRole | 'analyte';
  topic: HeaderTopic | null;
  /** Element symbol (`Al` for a column of Al2O3), or `LOI`; null unless an analyte. */
  element: string | null;
  /** Oxide the grades are written as; null for an element. */
  oxide: string | null;
  /** Divide the grades by it to get the element; 1 for an element. */
  oxideFactor: number;
  unit: AssayUnit | null;
  /** Free text about digestion or finish, as written. */
  method: string | null;
  /** `check` when a person should look: a unit proposed or loose, a word with two meanings. */
  certainty: 'sure' | 'check' | 'unknown';
  reason: string;
}

/** Symbols that in capitals double as a word, a code or a compound. */
const DOUBTFUL_IN_CAPITALS = new Set(['Co', 'Cs', 'In', 'As', 'Ba', 'Nb', 'Na']);

/**
 * Reads a column header: an analyte with its form, unit and method, or the role of another column.
 *
 * @param header Header as written in the file.
 * @param samples Some cells of the column; used to propose a unit where the header gives none, and
 *   to tell the coordinate Y from yttrium.
 * @returns Never fails: a header nothing is known of has role `skip` and certainty `unknown`.
 */
export function parseHeader(header: string, samples: readonly string[] = []): HeaderReading {
  const text = header.replace(/\ufeff/g, '').trim();
  if (text === '') return unknown('the header is empty');
  const word = readHeaderWord(text);
  if (word) {
    const { role, topic, caution } = word;
    const certainty = caution ? 'check' : 'sure';
    return { ...blank(), role, topic, certainty, reason: caution ?? 'common column name' };
  }
  if (/^y$/i.test(text) && looksLikeCoordinate(samples)) {
    return {
      ...blank(),
      role: 'y',
      certainty: 'check',
      reason: 'read as a coordinate, not yttrium',
    };
  }
  const { tokens, unit } = splitHeader(text);
  const found = readAnalyte(tokens, unit !== null);
  if (!found) return unknown('no analyte and no common column name');
  return readGrades(found, unit, samples);
}

function blank(): Omit<HeaderReading, 'role' | 'certainty' | 'reason'> {
  return { topic: null, element: null, oxide: null, oxideFactor: 1, unit: null, method: null };
}

function unknown(reason: string): HeaderReading {
  return { ...blank(), role: 'skip', certainty: 'unknown', reason };
}

function looksLikeCoordinate(samples: readonly string[]): boolean {
  const numbers = sampleNumbers(samples);
  return numbers.length === 0 || numbers.some(({ value }) => value < 0 || value > 2000);
}

function readGrades(
  found: AnalyteToken,
  unit: UnitReading | null,
  samples: readonly string[],
): HeaderReading {
  const oxide = found.form === null ? null : (OXIDE_BY_FORMULA.get(found.form) ?? null);
  const base = {
    ...blank(),
    role: 'analyte' as const,
    element: found.element,
    oxide: oxide?.formula ?? null,
    oxideFactor: oxide?.factor ?? 1,
    method: found.method,
  };
  if (unit) return { ...base, unit: unit.unit, ...judge(found, oxide, unit) };
  const proposed = proposeUnit(found.element, oxide !== null, sampleNumbers(samples));
  const reason = proposed
    ? `no unit in the header; ${proposed} proposed from the size of the values`
    : 'no unit in the header: choose one';
  return { ...base, unit: proposed, certainty: 'check', reason };
}

function judge(
  found: AnalyteToken,
  oxide: Oxide | null,
  unit: UnitReading,
): Pick<HeaderReading, 'certainty' | 'reason'> {
  if (unit.isLoose) {
    const reason = `ounces per ton: read as ${unit.unit}; check whether the ton is short, long or metric`;
    return { certainty: 'check', reason };
  }
  if (found.isGlued)
    return { certainty: 'check', reason: `read as ${found.element} by ${found.method}` };
  if (oxide)
    return { certainty: 'sure', reason: `${oxide.formula}, turned into ${oxide.element} on load` };
  if (found.isInCapitals && DOUBTFUL_IN_CAPITALS.has(found.element)) {
    return {
      certainty: 'sure',
      reason: `capitals read as the symbol ${found.element}, since a unit follows`,
    };
  }
  return { certainty: 'sure', reason: 'symbol and unit in the header' };
}
