import type { Along, CoreInterval, CoreStructure, DepthInterval } from './core-types.ts';

const px = (value: number) => Math.round(value * 100) / 100;

/** Does an interval show at all in a window of depth? */
export function inWindow({ fromM, toM }: DepthInterval, [low, high]: readonly [number, number]): boolean {
  return toM > low && fromM < high;
}

/** Neighbouring intervals that say the same, as one; `same` compares them, gaps part them. */
export function joined<Item extends DepthInterval>(intervals: readonly Item[], same: (a: Item, b: Item) => boolean): Item[] {
  const runs: Item[] = [];
  for (const interval of intervals) {
    const last = runs.at(-1);
    if (last !== undefined && Math.abs(interval.fromM - last.toM) < 1e-6 && same(last, interval)) {
      runs[runs.length - 1] = { ...last, toM: interval.toM };
    } else runs.push(interval);
  }
  return runs;
}

/** Slots present, in order. */
export function slotsOf(intervals: readonly CoreInterval[]): number[] {
  return [...new Set(intervals.flatMap(({ groupSlot }) => (groupSlot === null ? [] : [groupSlot])))].sort((a, b) => a - b);
}

/** Walls of one group: a block an interval, as high as its membership (full height where unknown). */
export function wallPath(intervals: readonly CoreInterval[], slot: number, along: Along, top: number, height: number): string {
  return intervals
    .filter(({ groupSlot }) => groupSlot === slot)
    .map(({ fromM, toM, membership }) => {
      const [from, to] = [px(along(fromM)), px(along(toM))];
      const rise = px(height * Math.min(1, Math.max(0.06, membership ?? 1)));
      return `M${from} ${px(top + height)}v${-rise}h${px(Math.max(0.4, to - from))}v${rise}z`;
    })
    .join('');
}

/** Height share of a grade on the root scale. */
export function rootShare(grade: number, maximum: number): number {
  return maximum > 0 && grade > 0 ? Math.sqrt(Math.min(1, grade / maximum)) : 0;
}

/** Filled steps of grade; an interval without assay leaves a gap, zero lies on the base. */
export function gradePath(intervals: readonly CoreInterval[], along: Along, top: number, height: number, maximum: number): string {
  const base = px(top + height);
  return intervals
    .flatMap(({ fromM, toM, grade }) => {
      if (grade === null || !Number.isFinite(grade)) return [];
      const [from, to] = [px(along(fromM)), px(along(toM))];
      const rise = Math.max(0.5, height * rootShare(grade, maximum));
      return [`M${from} ${base}V${px(base - rise)}H${px(Math.max(from + 0.4, to))}V${base}z`];
    })
    .join('');
}

/** A short stroke per reading, tilted by its angle to the core axis. */
export function structurePath(structures: readonly CoreStructure[], sure: boolean, along: Along, top: number, height: number): string {
  const reach = height / 2 - 1.5;
  return structures
    .filter((structure) => structure.sure === sure)
    .map(({ depthM, alphaDeg }) => {
      const angle = ((alphaDeg ?? 45) * Math.PI) / 180;
      const [dx, dy] = [reach * Math.cos(angle), reach * Math.sin(angle)];
      const [x, y] = [along(depthM), top + height / 2];
      return `M${px(x - dx)} ${px(y + dy)}L${px(x + dx)} ${px(y - dy)}`;
    })
    .join('');
}

/** Largest grade of a set of holes, for one scale over all. */
export function highestGrade(holes: readonly { intervals: readonly CoreInterval[] }[]): number {
  let highest = 0;
  for (const { intervals } of holes) for (const { grade } of intervals) if (grade !== null && grade > highest) highest = grade;
  return highest;
}
