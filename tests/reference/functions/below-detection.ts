import { centredLogRatio } from '#kernels/compositions/centred-log-ratio.ts';
import { close } from '#kernels/compositions/closure.ts';
import {
  harmoniseLimit,
  replaceBelowLimit,
  replaceInClosed,
} from '#kernels/compositions/replacement.ts';
import { rawTable, toColumns } from '#tests/support/reference-transform.ts';
import type { ReferenceCheck, ReferenceSet } from '#tests/support/reference.ts';
import { inputNumber, inputText, type Adapters } from '../adapter.ts';
import { reported, rowsOfColumns, rowsOfTable } from '../transform.ts';

/** A table with one column taken as below detection under a limit. */
function censoredTable(set: ReferenceSet, check: ReferenceCheck) {
  const columns = toColumns(rawTable(set, check));
  const at = (check.inputs.columns ?? []).indexOf(inputText(check, 'censor_column'));
  const column = columns[at];
  if (!column) throw new Error(`${check.id}: the censored column is not among its columns`);
  const limit = inputNumber(check, 'censor_below');
  return { columns, at, column, limit, fraction: inputNumber(check, 'fraction') };
}

/** Values below detection: the kernels set them, the checks make them up from measured values. */
export const BELOW_DETECTION: Adapters = {
  substitute_below_detection: (set, check) => {
    const { columns, at, column, limit, fraction } = censoredTable(set, check);
    const { values, states } = harmoniseLimit(column, new Uint8Array(column.length), limit);
    const replaced = columns.with(at, replaceBelowLimit(values, states, { fraction }).values);
    const flat = Float64Array.from(rowsOfColumns(replaced).flat());
    return reported(check, rowsOfTable(centredLogRatio(flat, columns.length), columns.length));
  },
  multiplicative_replacement: (set, check) => {
    const { columns, at, limit, fraction } = censoredTable(set, check);
    const rows = rowsOfColumns(columns).map((row) => {
      if (!(row[at]! < limit)) return [...close(Float64Array.from(row), row.length)];
      const others = Float64Array.from(row.toSpliced(at, 1));
      const sum = others.reduce((a, b) => a + b, 0);
      const closed = [...close(others, others.length)].toSpliced(at, 0, 0);
      const delta = new Float64Array(row.length).fill((fraction * limit) / sum);
      return [...replaceInClosed(Float64Array.from(closed), row.length, delta)];
    });
    return reported(check, rows);
  },
};
