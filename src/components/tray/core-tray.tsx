import { useCallback, useMemo, useState } from 'react';
import type { Category, PickedRows, SelectMode } from '../charts/chart-types.ts';
import { fitWindow, isSameWindow } from '../charts/depth-window.ts';
import type { DepthWindow } from '../charts/depth-window.ts';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { TrayBody } from './tray-body.tsx';
import { TrayGrip } from './tray-grip.tsx';
import { TrayHeader } from './tray-header.tsx';
import { ALL_TRACKS } from './tray-types.ts';
import type { GradeChoices, MenuPlace, TrackName, TrayHole } from './tray-types.ts';

export interface CoreTrayProps {
  holes: readonly TrayHole[];
  /** Every hole that can be added. */
  holeNames: readonly string[];
  onAddHole?: (name: string) => void;
  onRemoveHole?: (name: string) => void;
  rockKey: readonly RockKeyEntry[];
  groups: readonly Category[];
  /** "Cu %" */
  gradeLabel: string;
  /** Lets a person choose the analyte of the grade track. */
  grades?: GradeChoices;
  selectedRows?: PickedRows;
  hoveredRow?: number | null;
  onHover?: (row: number | null) => void;
  onSelect?: (rows: number[], mode: SelectMode) => void;
  /** Enter, or a right click, on an interval. */
  onOpenMenu?: (row: number, place: MenuPlace) => void;
  /** Depths on show; null fits the longest hole. */
  window: DepthWindow | null;
  onWindowChange: (window: DepthWindow | null) => void;
  tracks?: ReadonlySet<TrackName>;
  onTracks?: (tracks: ReadonlySet<TrackName>) => void;
  isOpen?: boolean;
  onOpen?: (isOpen: boolean) => void;
  /** Pixels when open. */
  height?: number;
  onHeight?: (height: number) => void;
  /** What copper marks now: "copper bars mark the selection". */
  note?: string;
  /** Shown when closed: "72 intervals in 23 holes". */
  summary?: string;
}

const SHUT_PX = 36;
const LEAST_PX = 120;
const MOST_PX = 640;

/** Core laid in troughs under every page that shows intervals. */
export function CoreTray(props: CoreTrayProps) {
  const { holes, isOpen = true, height = 212 } = props;
  const fit = useMemo(() => fitWindow(holes), [holes]);
  const window = props.window ?? fit;
  const [ownTracks, setOwnTracks] = useState<ReadonlySet<TrackName>>(ALL_TRACKS);
  const tracks = props.tracks ?? ownTracks;
  const { onWindowChange } = props;
  const onWindow = useCallback((next: DepthWindow | null) => onWindowChange(next === null || isSameWindow(next, fit) ? null : next), [onWindowChange, fit]);
  const codes = useMemo(() => new Set(holes.flatMap(({ rock }) => rock.map(({ code }) => code))), [holes]);
  return (
    <section
      aria-label="Core tray"
      className="relative flex min-w-0 flex-col border-t border-rule-firm bg-paper"
      style={{ height: isOpen ? height : SHUT_PX }}
    >
      {isOpen && props.onHeight !== undefined && <TrayGrip height={height} least={LEAST_PX} most={MOST_PX} onHeight={props.onHeight} />}
      <TrayHeader
        holes={holes}
        holeNames={props.holeNames}
        onAddHole={props.onAddHole}
        onRemoveHole={props.onRemoveHole}
        note={props.note ?? ''}
        summary={props.summary ?? ''}
        rocks={props.rockKey.filter(({ code }) => codes.has(code))}
        tracks={tracks}
        onTracks={(next) => {
          setOwnTracks(next);
          props.onTracks?.(next);
        }}
        gradeLabel={props.gradeLabel}
        grades={props.grades}
        window={window}
        fit={fit}
        onWindow={onWindow}
        isOpen={isOpen}
        onOpen={props.onOpen}
      />
      {isOpen &&
        (holes.length === 0 ? (
          <p className="px-5 pt-3 font-read text-finding text-ink-2">Pick a hole, or take points in any plot, and its core is laid here.</p>
        ) : (
          <TrayBody {...props} tracks={tracks} shown={window} fit={fit} onWindow={onWindow} />
        ))}
    </section>
  );
}
