import { Check, Menu } from 'lucide-react';
import { DropdownMenu } from 'radix-ui';
import { Button } from '#src/components/ui/button.tsx';
import { Icon } from '#src/components/ui/icon.tsx';
import { TRACKS } from './tray-types.ts';
import type { GradeChoices, TrackName } from './tray-types.ts';

interface Props {
  tracks: ReadonlySet<TrackName>;
  gradeLabel: string;
  onTracks: (tracks: ReadonlySet<TrackName>) => void;
  /** What the grade track can show, the one on show first; no choice when absent. */
  grades?: GradeChoices | undefined;
}

const ENTRY = 'flex cursor-pointer items-center gap-2 rounded-2 py-1 pr-3 pl-2 text-small outline-none data-[highlighted]:bg-trough';

/** Which tracks are drawn, the last one cannot be taken away; and the analyte of the grade track. */
export function TracksMenu({ tracks, gradeLabel, onTracks, grades }: Props) {
  const toggle = (name: TrackName) => {
    const next = new Set(tracks);
    if (!next.delete(name)) next.add(name);
    if (next.size > 0) onTracks(next);
  };
  return (
    <DropdownMenu.Root>
      <DropdownMenu.Trigger asChild>
        <Button size="tiny" icon={Menu} className="!bg-transparent">
          Tracks
        </Button>
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content side="top" align="end" sideOffset={4} collisionPadding={8} className="opens z-40 max-h-[var(--radix-dropdown-menu-content-available-height)] min-w-40 overflow-auto rounded-3 border border-rule bg-sheet p-1 shadow-float">
          {TRACKS.map((name) => (
            <DropdownMenu.CheckboxItem
              key={name}
              checked={tracks.has(name)}
              onSelect={(event) => event.preventDefault()}
              onCheckedChange={() => toggle(name)}
              className={ENTRY}
            >
              <span className="inline-grid size-4 place-items-center">
                <DropdownMenu.ItemIndicator>
                  <Icon icon={Check} size={14} />
                </DropdownMenu.ItemIndicator>
              </span>
              {name === 'grade' ? gradeLabel : name}
            </DropdownMenu.CheckboxItem>
          ))}
          {grades !== undefined && (
            <>
              <DropdownMenu.Label className="mt-1 border-t border-rule px-2 pt-1.5 text-caption text-ink-3">Grade track</DropdownMenu.Label>
              <DropdownMenu.RadioGroup value={grades.chosen} onValueChange={grades.onChoose}>
                {grades.names.map((name) => (
                  <DropdownMenu.RadioItem key={name} value={name} onSelect={(event) => event.preventDefault()} className={ENTRY}>
                    <span className="inline-grid size-4 place-items-center">
                      <DropdownMenu.ItemIndicator>
                        <Icon icon={Check} size={14} />
                      </DropdownMenu.ItemIndicator>
                    </span>
                    {name}
                  </DropdownMenu.RadioItem>
                ))}
              </DropdownMenu.RadioGroup>
            </>
          )}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
