import { Check, Menu } from 'lucide-react';
import { DropdownMenu } from 'radix-ui';
import { Button } from '#src/components/ui/button.tsx';
import { Icon } from '#src/components/ui/icon.tsx';
import { TRACKS } from './tray-types.ts';
import type { TrackName } from './tray-types.ts';

interface Props {
  tracks: ReadonlySet<TrackName>;
  gradeLabel: string;
  onTracks: (tracks: ReadonlySet<TrackName>) => void;
}

/** Which tracks are drawn; the last one cannot be taken away. */
export function TracksMenu({ tracks, gradeLabel, onTracks }: Props) {
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
        <DropdownMenu.Content side="top" align="end" sideOffset={4} collisionPadding={8} className="opens z-40 min-w-40 rounded-3 border border-rule bg-sheet p-1 shadow-float">
          {TRACKS.map((name) => (
            <DropdownMenu.CheckboxItem
              key={name}
              checked={tracks.has(name)}
              onSelect={(event) => event.preventDefault()}
              onCheckedChange={() => toggle(name)}
              className="flex cursor-pointer items-center gap-2 rounded-2 py-1 pr-3 pl-2 text-small outline-none data-[highlighted]:bg-trough"
            >
              <span className="inline-grid size-4 place-items-center">
                <DropdownMenu.ItemIndicator>
                  <Icon icon={Check} size={14} />
                </DropdownMenu.ItemIndicator>
              </span>
              {name === 'grade' ? gradeLabel : name}
            </DropdownMenu.CheckboxItem>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
