import { formatFigures, formatInterval, formatShare, MISSING } from '#src/lib/format.ts';
import type { Category } from '../charts/chart-types.ts';
import type { CoreInterval } from '../charts/core-types.ts';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import type { TrayHole } from './tray-types.ts';

interface Words {
  hole: TrayHole;
  interval: CoreInterval;
  groups: readonly Category[];
  rockKey: readonly RockKeyEntry[];
  gradeLabel: string;
  highestGrade: number;
}

export interface IntervalWords {
  depth: string;
  rock: string;
  group: string;
  grade: string;
  domain: string;
}

/** Everything known of one interval, in words: for the tooltip, the table and the live region. */
export function intervalWords({ hole, interval, groups, rockKey, gradeLabel }: Omit<Words, 'highestGrade'>): IntervalWords {
  const middle = (interval.fromM + interval.toM) / 2;
  const code = hole.rock.find(({ fromM, toM }) => middle >= fromM && middle < toM)?.code;
  const rock = code === undefined ? 'no rock logged' : (rockKey.find((entry) => entry.code === code)?.label ?? code);
  const group = interval.groupSlot === null ? 'in no group' : (groups.find(({ slot }) => slot === interval.groupSlot)?.label ?? `group ${interval.groupSlot}`);
  const membership = interval.membership === null || interval.groupSlot === null ? '' : `, membership ${formatFigures(interval.membership, 2)}`;
  const host = interval.isHost === true ? ', host' : '';
  const byHand = interval.isHandSet === true ? ', set by hand' : '';
  return {
    depth: formatInterval(interval.fromM, interval.toM),
    rock,
    group: `${group}${membership}`,
    grade: `${gradeLabel} ${interval.grade === null ? `${MISSING} (no assay)` : formatFigures(interval.grade)}`,
    domain: interval.domain === null ? 'no domain' : `${interval.domain.code}${host}${byHand}`,
  };
}

export function TrayTooltip(props: Words) {
  const words = intervalWords(props);
  const { interval, highestGrade } = props;
  const share = interval.grade === null || highestGrade <= 0 ? null : interval.grade / highestGrade;
  return (
    <>
      <div className="font-mono font-medium">{props.hole.name}</div>
      <div>{words.depth}</div>
      <div>{words.rock}</div>
      <div>{words.group}</div>
      <div>
        {words.grade}
        {share !== null && <span className="text-ink-3">, {formatShare(share)} of the highest, {formatFigures(highestGrade)}</span>}
      </div>
      <div>{words.domain}</div>
    </>
  );
}
