import { Popover } from 'radix-ui';
import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';

interface Props {
  trigger: ReactNode;
  /** Names the panel for screen readers. */
  label: string;
  children: ReactNode;
  align?: 'start' | 'center' | 'end';
  className?: string;
  isOpen?: boolean;
  onOpenChange?: (isOpen: boolean) => void;
}

/** A floating sheet under its button: settings of a plot, the job tray. */
export function Panel({
  trigger,
  label,
  children,
  align = 'end',
  className,
  isOpen,
  onOpenChange,
}: Props) {
  return (
    <Popover.Root {...(isOpen === undefined ? {} : { open: isOpen })} onOpenChange={onOpenChange}>
      <Popover.Trigger asChild>{trigger}</Popover.Trigger>
      <Popover.Portal>
        <Popover.Content
          aria-label={label}
          align={align}
          sideOffset={5}
          collisionPadding={8}
          className={cx(
            'opens z-40 max-h-[var(--radix-popover-content-available-height)] max-w-[calc(100vw-1rem)] overflow-auto rounded-3 border border-rule bg-sheet p-3 text-small text-ink shadow-float',
            className ?? 'w-80',
          )}
        >
          {children}
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  );
}
