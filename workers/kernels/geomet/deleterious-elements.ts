import { KernelError } from '#kernels/kernel-error.ts';

import {
  flagZones,
  overLimit,
  type ElementValues,
  type FlagZone,
  type ZoneRules,
} from './flag-zones.ts';
import { lengthsOf, type IntervalsByHole } from '#kernels/tables/intervals-by-hole.ts';

/** One element with its limit. */
export interface LimitedElement extends ElementValues {
  analyte: string;
  limitPpm: number;
}

/** Zones of one element and what they and its limit cover. */
export interface ElementZones {
  analyte: string;
  zones: FlagZone[];
  /** 1 for each interval inside a zone, its dilution too. */
  inZone: Uint8Array;
  zoneMetres: number;
  intervalsOver: number;
  metresOver: number;
}

/** Zones of several elements. */
export interface DeleteriousZones {
  byElement: ElementZones[];
  /** 1 for each interval inside a zone of any element. */
  isFlagged: Uint8Array;
  flaggedMetres: number;
  totalMetres: number;
}

/**
 * Zones of each limited element, and their union over the intervals.
 *
 * @param elements In the order wanted; none gives no flag.
 * @param rules Length rules shared by all elements.
 * @throws {KernelError} As `flagZones`.
 */
export function deleteriousZones(
  intervals: IntervalsByHole,
  elements: readonly LimitedElement[],
  rules: Omit<ZoneRules, 'limitPpm'>,
  onProgress?: (share: number) => void,
): DeleteriousZones {
  const lengths = lengthsOf(intervals);
  const isFlagged = new Uint8Array(lengths.length);
  const byElement = elements.map((element, i): ElementZones => {
    const { analyte, limitPpm } = element;
    const zones = flagZones(intervals, element, { ...rules, limitPpm });
    const inZone = new Uint8Array(lengths.length);
    for (const { firstRow, lastRow } of zones) {
      inZone.fill(1, firstRow, lastRow + 1);
      isFlagged.fill(1, firstRow, lastRow + 1);
    }
    const isOver = overLimit(element, limitPpm);
    onProgress?.((i + 1) / elements.length);
    return {
      analyte,
      zones,
      inZone,
      zoneMetres: markedMetres(lengths, inZone),
      intervalsOver: isOver.reduce((sum, over) => sum + over, 0),
      metresOver: markedMetres(lengths, isOver),
    };
  });
  const totalMetres = lengths.reduce((sum, length) => sum + length, 0);
  return { byElement, isFlagged, flaggedMetres: markedMetres(lengths, isFlagged), totalMetres };
}

/**
 * Metres of the intervals marked 1.
 *
 * @throws {KernelError} `shape`; `bad-parameter` with { row } at a length that is none.
 */
export function markedMetres(lengthsM: Float64Array, marks: Uint8Array): number {
  if (marks.length !== lengthsM.length)
    throw new KernelError('shape', `expected ${lengthsM.length} marks, found ${marks.length}`);
  const row = lengthsM.findIndex((length) => !(length >= 0 && length < Infinity));
  if (row >= 0) {
    const message = `expected a length >= 0 m, found ${lengthsM[row]} in row ${row}`;
    throw new KernelError('bad-parameter', message, { row });
  }
  return lengthsM.reduce((sum, length, row) => sum + (marks[row] === 1 ? length : 0), 0);
}
