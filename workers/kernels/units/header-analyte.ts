import { ELEMENT_BY_SYMBOL, SYMBOL_BY_NAME } from './atomic-weights.ts';
import { readUnit, type UnitReading } from './assay-unit.ts';
import { OXIDE_BY_LOWER_CASE } from './oxides.ts';

/** The analyte found in a header. */
export interface AnalyteToken {
  element: string;
  /** Oxide formula, or null for the element itself. */
  form: string | null;
  method: string | null;
  /** The symbol was written in capitals or lower case only, `CO` for cobalt. */
  isInCapitals: boolean;
  /** A method stood against the symbol without a separator, `AuFA`. */
  isGlued: boolean;
}

/** Splits a header into words and takes its unit out; units may hold `/`, `%` or `_`. */
export function splitHeader(header: string): { tokens: string[]; unit: UnitReading | null } {
  const tokens = header
    .replace(/%/g, ' % ')
    .split(/[\s_\-()[\]{},;:.|=]+/)
    .filter((token) => token !== '');
  for (let i = tokens.length - 1; i >= 0; i--) {
    const token = tokens[i] ?? '';
    const before = tokens[i - 1];
    // `Au g_t` and `Cu wt %` are split by the separators; put such pairs together first.
    const isPair = i >= 2 && before !== undefined && /^([kmuµμ]?g|oz|wt)$/i.test(before);
    const pair = isPair ? readUnit(before + token) : null;
    if (pair) return { tokens: tokens.toSpliced(i - 1, 2), unit: pair };
    const unit = readUnit(token);
    if (unit) return { tokens: tokens.toSpliced(i, 1), unit };
  }
  return splitGluedUnit(tokens);
}

/** `Cuppm`, `CuPPM`, `AuGPT`: a unit against the symbol. */
function splitGluedUnit(tokens: string[]): { tokens: string[]; unit: UnitReading | null } {
  const [first = '', ...rest] = tokens;
  const glued = /^(.+?)(ppm|ppb|pct|gpt|g\/t|mg\/kg|ug\/kg|kg\/t)$/i.exec(first);
  const [, analyte = '', unitText = ''] = glued ?? [];
  if (!glued || readToken(analyte) === null) return { tokens, unit: null };
  return { tokens: [analyte, ...rest], unit: readUnit(unitText) };
}

/** Symbols that begin common phrases. */
const WORDS_TOO: ReadonlySet<string> = new Set(['As', 'In', 'Co', 'Na', 'I']);

/**
 * Finds the analyte among the words of a header: the first word, or a later word with its symbol
 * written exactly when the header has a unit (`ICP Cu ppm`). Other words become the method.
 */
export function readAnalyte(tokens: readonly string[], hasUnit: boolean): AnalyteToken | null {
  for (const [i, token] of tokens.entries()) {
    const found = readToken(token);
    if (!found) continue;
    if (i > 0 && (!hasUnit || found.isInCapitals)) continue;
    // Without a unit `As received` or `In situ density` are words, not arsenic and indium.
    const others = tokens.length - 1;
    if (!hasUnit && (others > 1 || (others > 0 && WORDS_TOO.has(found.element)))) return null;
    const words = [
      ...tokens.slice(0, i),
      ...(found.method ? [found.method] : []),
      ...tokens.slice(i + 1),
    ];
    return { ...found, method: words.length > 0 ? words.join(' ') : null };
  }
  return null;
}

/** Digestion and finish abbreviations that may stand against a two-letter symbol. */
const GLUED_METHOD = /^([A-Z][a-z])((FA|AAS?|ICP|XRF|TOT|T|AS|CN|SOL|AR|4A|FUS)\d*|\d{1,2})$/;

function readToken(token: string): AnalyteToken | null {
  const plain = { form: null, method: null, isInCapitals: false, isGlued: false };
  if (ELEMENT_BY_SYMBOL.has(token)) return { ...plain, element: token };
  const oxide = readOxide(token);
  if (oxide) return oxide;
  if (/^loi\d*$/i.test(token)) return { ...plain, element: 'LOI' };
  const named = SYMBOL_BY_NAME.get(token.toLowerCase());
  if (named) return { ...plain, element: named };
  const titleCase = token.charAt(0).toUpperCase() + token.slice(1).toLowerCase();
  if (ELEMENT_BY_SYMBOL.has(titleCase)) return { ...plain, element: titleCase, isInCapitals: true };
  const [, symbol = '', method = null] = GLUED_METHOD.exec(token) ?? [];
  if (ELEMENT_BY_SYMBOL.has(symbol)) return { ...plain, element: symbol, method, isGlued: true };
  return null;
}

/** An oxide in any case; a T behind it (`Fe2O3T`) says that all of the element is reported so. */
function readOxide(token: string): AnalyteToken | null {
  const key = token.toLowerCase();
  const exact = OXIDE_BY_LOWER_CASE.get(key);
  const total = exact ? null : OXIDE_BY_LOWER_CASE.get(key.replace(/t(ot)?$/, ''));
  const oxide = exact ?? total;
  if (!oxide) return null;
  return {
    element: oxide.element,
    form: oxide.formula,
    method: total ? 'total' : null,
    isInCapitals: false,
    isGlued: false,
  };
}
