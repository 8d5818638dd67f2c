import { intervalFault } from '#kernels/intervals/interval-table.ts';
import { KernelError } from '#kernels/kernel-error.ts';
import { compareCodePoints } from '#kernels/tables/category.ts';

/** An interval with its code. */
export interface CodedInterval {
  hole: string;
  fromM: number;
  toM: number;
  code: string;
}

/** A depth as written to files: metres with three decimals, decimal point. */
export function formatDepth(depthM: number): string {
  return depthM.toFixed(3);
}

/** A text as a CSV field by RFC 4180: quoted only where it holds a comma, a quote or a line end. */
export function csvField(text: string): string {
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** Order of coded intervals in a file: hole by code point, then from, to and code. */
export function compareIntervals(a: CodedInterval, b: CodedInterval): number {
  return (
    compareCodePoints(a.hole, b.hole) ||
    a.fromM - b.fromM ||
    a.toM - b.toM ||
    compareCodePoints(a.code, b.code)
  );
}

/**
 * The text whose SHA-256 (of its UTF-8 bytes) is the checksum of a set of codes: one line
 * `hole,from,to,code` per interval, each ended by LF, in the order of `compareIntervals`. The order
 * of the rows given cannot change it.
 *
 * @throws {KernelError} `bad-interval` with { row } at depths that are none; `bad-parameter` with
 *   { row } at an empty hole or code.
 */
export function codeLines(intervals: readonly CodedInterval[]): string {
  intervals.forEach(({ hole, fromM, toM, code }, row) => {
    const fault = intervalFault(fromM, toM);
    if (fault) throw new KernelError('bad-interval', `${fault} in row ${row}`, { row });
    if (hole === '' || code === '') {
      const message = `expected a hole and a code in row ${row}, found "${hole}", "${code}"`;
      throw new KernelError('bad-parameter', message, { row });
    }
  });
  return [...intervals]
    .sort(compareIntervals)
    .map(
      ({ hole, fromM, toM, code }) =>
        `${csvField(hole)},${formatDepth(fromM)},${formatDepth(toM)},${csvField(code)}\n`,
    )
    .join('');
}
