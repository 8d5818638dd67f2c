/** What a word or number written in place of an assay stands for. */
export interface AssayCode {
  meaning: 'below' | 'above' | 'missing' | 'not-analysed';
  /** In a few words, kept with the cell. */
  reason: string;
}

/** Codes by text in upper case; replace or extend entries per laboratory. */
export type AssayCodes = ReadonlyMap<string, AssayCode>;

const WORDS = [
  ['below', 'below detection', 'BDL <DL <LOD LOD ND TR'],
  ['above', 'above the upper limit', 'OVR OVER'],
  ['missing', 'no sample', 'NS'],
  ['missing', 'insufficient sample', 'NSS IS INS'],
  ['missing', 'listed, not received', 'LNR NR SNR'],
  ['missing', 'interference', 'INTF'],
  ['missing', 'contamination', 'CONT'],
  ['not-analysed', 'not analysed', 'NA N.A. N/A #N/A NAN NULL - -9 -99 -999 -9999'],
] as const;

/**
 * Codes laboratories commonly write (common practice, from memory: their meaning differs between
 * laboratories, so the table is meant to be edited).
 */
export const COMMON_ASSAY_CODES: AssayCodes = new Map<string, AssayCode>([
  ['', { meaning: 'not-analysed', reason: 'blank' }],
  ...WORDS.flatMap(([meaning, reason, words]) =>
    words.split(' ').map((word): [string, AssayCode] => [word, { meaning, reason }]),
  ),
]);

/**
 * A code table with some entries changed: what one laboratory means by its codes.
 *
 * @param changes Text to code; null removes the text from the table.
 */
export function withAssayCodes(
  base: AssayCodes,
  changes: Readonly<Record<string, AssayCode | null>>,
): AssayCodes {
  const codes = new Map(base);
  for (const [text, code] of Object.entries(changes)) {
    const key = text.trim().toUpperCase();
    if (code) codes.set(key, code);
    else codes.delete(key);
  }
  return codes;
}
