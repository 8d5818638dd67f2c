import { ChevronDown, ChevronUp, X } from 'lucide-react';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import type { DepthWindow } from '../charts/depth-window.ts';
import type { RockKeyEntry } from '../charts/rock-patterns.tsx';
import { HolePicker } from './hole-picker.tsx';
import { RockKey } from './rock-key.tsx';
import { TracksMenu } from './tracks-menu.tsx';
import type { GradeChoices, TrackName, TrayHole } from './tray-types.ts';
import { WindowButton } from './window-button.tsx';

interface Props {
  holes: readonly TrayHole[];
  holeNames: readonly string[];
  onAddHole?: ((name: string) => void) | undefined;
  onRemoveHole?: ((name: string) => void) | undefined;
  /** What copper marks now. */
  note: string;
  summary: string;
  rocks: readonly RockKeyEntry[];
  tracks: ReadonlySet<TrackName>;
  onTracks: (tracks: ReadonlySet<TrackName>) => void;
  gradeLabel: string;
  grades: GradeChoices | undefined;
  window: DepthWindow;
  fit: DepthWindow;
  onWindow: (window: DepthWindow | null) => void;
  isOpen: boolean;
  onOpen?: ((isOpen: boolean) => void) | undefined;
}

/** Holes in hand, what copper marks, rock key, tracks, depth window, close. Closed: what is selected. */
export function TrayHeader(props: Props) {
  const { holes, holeNames, onAddHole, onRemoveHole, isOpen, onOpen } = props;
  const inTray = new Set(holes.map(({ name }) => name));
  return (
    <header className="flex min-h-[30px] items-center gap-2 pt-[3px] pr-3 pl-5">
      <h2 className="text-body leading-none font-semibold whitespace-nowrap">Core tray</h2>
      {isOpen ? (
        <>
          <ul className="flex min-w-0 shrink items-center gap-1.5 overflow-x-auto">
            {holes.map(({ name }) => (
              <li key={name} className="inline-flex h-6 items-center rounded-2 bg-trough pl-2 font-mono text-caption font-medium whitespace-nowrap">
                {name}
                {onRemoveHole === undefined ? (
                  <span className="pr-2" />
                ) : (
                  <IconButton icon={X} label={`Take ${name} out of the tray`} onClick={() => onRemoveHole(name)} />
                )}
              </li>
            ))}
          </ul>
          {onAddHole !== undefined && <HolePicker names={holeNames.filter((name) => !inTray.has(name))} onAdd={onAddHole} />}
          <span className="shrink truncate text-caption text-ink-3">{props.note}</span>
          <RockKey entries={props.rocks} />
          {holes.length > 0 && (
            <>
              <TracksMenu tracks={props.tracks} gradeLabel={props.gradeLabel} grades={props.grades} onTracks={props.onTracks} />
              <WindowButton window={props.window} fit={props.fit} onWindow={props.onWindow} />
            </>
          )}
        </>
      ) : (
        <span className="flex-1 truncate text-small text-ink-2">{props.summary}</span>
      )}
      {onOpen !== undefined && (
        <IconButton icon={isOpen ? ChevronDown : ChevronUp} label={isOpen ? 'Close the tray' : 'Open the tray'} aria-expanded={isOpen} onClick={() => onOpen(!isOpen)} />
      )}
    </header>
  );
}
