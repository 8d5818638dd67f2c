import { CircleHelp } from 'lucide-react';
import { Popover } from 'radix-ui';
import type { ReactNode } from 'react';
import { IconButton } from './icon-button.tsx';

export interface HelpText {
  /** Two lines: what it is and how to read it. */
  text: ReactNode;
  /** How it misleads. */
  caution?: ReactNode;
  /** Publication or standard the method comes from. */
  source?: ReactNode;
}

export function HelpButton({ subject, help }: { subject: string; help: HelpText }) {
  return (
    <Popover.Root>
      <Popover.Trigger asChild>
        <IconButton icon={CircleHelp} label={`Help: ${subject}`} />
      </Popover.Trigger>
      <Popover.Portal>
        <Popover.Content
          side="bottom"
          align="end"
          sideOffset={4}
          collisionPadding={8}
          aria-label={`Help: ${subject}`}
          className="opens z-40 grid w-80 max-w-[calc(100vw-2rem)] gap-1.5 rounded-3 border border-rule bg-sheet p-3 text-small text-ink shadow-float"
        >
          <p className="font-semibold">{subject}</p>
          <div>{help.text}</div>
          {help.caution && (
            <div className="border-l-3 border-warn pl-2 text-ink">
              <span className="font-semibold text-warn">Caution. </span>
              {help.caution}
            </div>
          )}
          {help.source && <div className="text-caption text-ink-3">{help.source}</div>}
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  );
}
