import { KernelError } from '#kernels/kernel-error.ts';
import {
  categoryFrom,
  checkCategory,
  NOT_LOGGED,
  type Category,
} from '#kernels/tables/category.ts';

/** Logged codes under a mapping, with what it moved. The raw codes stay as they are. */
export interface MappedCodes {
  codes: Category;
  /** Raw codes of each code in use, with their metres. */
  table: { code: string; metres: number; from: { raw: string; metres: number }[] }[];
  /** Metres with a code, the same before and after. */
  metres: number;
  /** Metres whose code changed. */
  changedMetres: number;
}

/**
 * Puts raw logging codes under the codes of a mapping; codes it does not name stay. One step: a target
 * is not mapped again.
 *
 * @param raw Codes as logged, or NOT_LOGGED. Not modified.
 * @param mapping Raw code to code.
 * @param lengthsM n lengths >= 0.
 * @throws {KernelError} `shape`; `bad-parameter` at a length < 0, an empty target, or with { code } at a
 *   target that is itself mapped elsewhere; `unknown-code` with { code } at a code nobody logged.
 */
export function mapCodes(
  raw: Category,
  mapping: ReadonlyMap<string, string>,
  lengthsM: Float64Array,
): MappedCodes {
  checkCategory(raw, lengthsM.length, 'logging');
  checkMapping(raw, mapping);
  const targets = raw.levels.map((level) => mapping.get(level) ?? level);
  const codes = categoryFrom(
    Array.from(raw.codes, (code) => (code === NOT_LOGGED ? null : (targets[code] ?? null))),
  );
  const rawMetres = new Float64Array(raw.levels.length);
  raw.codes.forEach((code, row) => {
    const length = lengthsM[row]!;
    if (!(length >= 0 && length < Infinity))
      throw new KernelError(
        'bad-parameter',
        `expected a length >= 0 m, found ${length} in row ${row}`,
        { row },
      );
    if (code !== NOT_LOGGED) rawMetres[code]! += length;
  });
  const inUse = new Set(raw.codes);
  const table = codes.levels.map((code) => {
    const from = raw.levels.flatMap((level, i) =>
      targets[i] === code && inUse.has(i) ? [{ raw: level, metres: rawMetres[i]! }] : [],
    );
    return { code, metres: from.reduce((sum, { metres }) => sum + metres, 0), from };
  });
  return {
    codes,
    table,
    metres: rawMetres.reduce((sum, metres) => sum + metres, 0),
    changedMetres: rawMetres.reduce(
      (sum, m, i) => (targets[i] === raw.levels[i] ? sum : sum + m),
      0,
    ),
  };
}

function checkMapping(raw: Category, mapping: ReadonlyMap<string, string>): void {
  for (const [code, target] of mapping) {
    if (!raw.levels.includes(code))
      throw new KernelError('unknown-code', `expected a logged code, found ${code}`, { code });
    if (target === '')
      throw new KernelError(
        'bad-parameter',
        `expected a code to put ${code} under, found an empty one`,
        { code },
      );
    const onward = mapping.get(target);
    if (onward !== undefined && onward !== target)
      throw new KernelError(
        'bad-parameter',
        `expected one step, found ${code} under ${target} and that under ${onward}`,
        { code },
      );
  }
}
