import type { DomainList } from '#contract/domains.ts';
import type { Grouping } from '#contract/groupings.ts';
import type { HoleDetail } from '#contract/holes.ts';
import { QUALIFIER } from '#contract/tables.ts';
import type { CoreInterval } from '#src/components/charts/core-types.ts';
import type { TrayHole } from '#src/components/tray/tray-types.ts';
import type { Frame } from '#src/lib/frame.ts';

/** Group and membership of every row of the frame. */
export interface GroupColumns {
  label: Float64Array;
  membership: Float64Array;
}

/** What the tray knows of rows beside their place: all on one frame. */
export interface TrayLayers {
  frame: Frame;
  grouping: Grouping | null;
  columns: GroupColumns | null;
  domains: DomainList | undefined;
}

export interface GradeTrack {
  analyte: string;
  /** Parts per million in one of the unit shown. */
  ppmPerUnit: number;
}

type DomainMark = NonNullable<CoreInterval['domain']>;

/** Domain of each group, where the domains stand on the grouping in hand. */
export function domainsByGroup(grouping: Grouping | null, list: DomainList | undefined): ReadonlyMap<number, DomainMark> {
  if (grouping === null || list?.groupingId !== grouping.id) return new Map();
  return new Map(list.domains.flatMap(({ code, slot, groupLabels }) => groupLabels.map((label) => [label, { code, slot }] as const)));
}

const UNSURE = /poor|low|doubt|unsure|uncertain|bad|not stated/i;
const depthKey = (fromM: number, toM: number): string => `${fromM.toFixed(3)} ${toM.toFixed(3)}`;

/** Grades by depth, because the logs are those of the current snapshot while the rows may be older. */
function gradesOf(detail: HoleDetail, { analyte, ppmPerUnit }: GradeTrack): ReadonlyMap<string, number> {
  const column = detail.analytes.indexOf(analyte);
  const grades = new Map<string, number>();
  for (const { fromM, toM, ppm, marks } of detail.assays) {
    const value = ppm[column];
    const mark = marks[column];
    if (value === null || value === undefined || mark === QUALIFIER.missing || mark === QUALIFIER.notAnalysed) continue;
    grades.set(depthKey(fromM, toM), value / ppmPerUnit);
  }
  return grades;
}

/** Lays one hole: its logs from the current snapshot, its intervals from the frame. */
export function layHole(detail: HoleDetail, { frame, grouping, columns, domains }: TrayLayers, track: GradeTrack | null): TrayHole {
  const slots = new Map(grouping?.groups.map(({ label, slot }) => [label, slot]));
  const domainOf = domainsByGroup(grouping, domains);
  const grades = track === null ? new Map<string, number>() : gradesOf(detail, track);
  const { start, end } = frame.rangeOf.get(detail.hole) ?? { start: 0, end: 0 };
  const intervals: CoreInterval[] = [];
  for (let row = start; row < end; row++) {
    const [fromM, toM] = [frame.fromM[row] ?? NaN, frame.toM[row] ?? NaN];
    const label = columns?.label[row] ?? NaN;
    const membership = columns?.membership[row] ?? NaN;
    intervals.push({
      row,
      fromM,
      toM,
      groupSlot: slots.get(label) ?? null,
      membership: Number.isFinite(membership) ? membership : null,
      grade: grades.get(depthKey(fromM, toM)) ?? null,
      domain: domainOf.get(label) ?? null,
    });
  }
  return {
    name: detail.hole,
    lengthM: detail.lengthM,
    rock: detail.lithology,
    structures: detail.structures.map(({ depthM, alpha, confidence }) => ({ depthM, alphaDeg: alpha, sure: !UNSURE.test(confidence) })),
    intervals,
  };
}

/** Metres taken in each hole, most first. */
export function metresByHole(frame: Frame, rows: Iterable<number>): { hole: string; metres: number; intervals: number }[] {
  const found = new Map<string, { hole: string; metres: number; intervals: number }>();
  for (const row of rows) {
    const hole = frame.holeAt(row);
    if (hole === null) continue;
    const sum = found.get(hole) ?? { hole, metres: 0, intervals: 0 };
    sum.metres += frame.weight[row] ?? 0;
    sum.intervals += 1;
    found.set(hole, sum);
  }
  return [...found.values()].sort((a, b) => b.metres - a.metres || a.hole.localeCompare(b.hole, 'en', { numeric: true }));
}

/** Holes laid before anyone has picked one: those that cut most groups, then most assayed metres. */
export function tellingHoles(frame: Frame, columns: GroupColumns | null, count: number): string[] {
  const scored = frame.holes.map((hole) => {
    const { start, end } = frame.rangeOf.get(hole) ?? { start: 0, end: 0 };
    const metresIn = new Map<number, number>();
    let metres = 0;
    for (let row = start; row < end; row++) {
      const [length, label] = [frame.weight[row] ?? 0, columns?.label[row] ?? NaN];
      metres += length;
      if (Number.isFinite(label)) metresIn.set(label, (metresIn.get(label) ?? 0) + length);
    }
    const groups = [...metresIn.values()].filter((inGroup) => inGroup > metres * 0.02).length;
    return { hole, groups, metres };
  });
  scored.sort((a, b) => b.groups - a.groups || b.metres - a.metres || a.hole.localeCompare(b.hole, 'en', { numeric: true }));
  return scored.slice(0, count).map(({ hole }) => hole);
}

/** Rows next to a row, up and down the hole without a gap, that are in the same group. */
export function runOfGroup(frame: Frame, label: Float64Array, row: number): number[] {
  const range = frame.rangeOf.get(frame.holeAt(row) ?? '');
  const own = label[row];
  if (range === undefined || own === undefined || Number.isNaN(own)) return [row];
  const joins = (upper: number, lower: number) => label[upper] === own && label[lower] === own && Math.abs((frame.toM[upper] ?? NaN) - (frame.fromM[lower] ?? NaN)) < 1e-6;
  let [first, last] = [row, row];
  while (first > range.start && joins(first - 1, first)) first -= 1;
  while (last < range.end - 1 && joins(last, last + 1)) last += 1;
  return Array.from({ length: last - first + 1 }, (_value, i) => first + i);
}
