import { Tooltip as Radix } from 'radix-ui';
import type { ReactNode } from 'react';

interface Props {
  text: ReactNode;
  children: ReactNode;
  side?: 'top' | 'right' | 'bottom' | 'left';
}

/** Further words on hover and focus. The child must take focus, or the words are lost to the keyboard. */
export function Tooltip({ text, children, side = 'top' }: Props) {
  return (
    <Radix.Provider delayDuration={300} skipDelayDuration={200}>
      <Radix.Root>
        <Radix.Trigger asChild>{children}</Radix.Trigger>
        <Radix.Portal>
          <Radix.Content
            side={side}
            sideOffset={5}
            collisionPadding={8}
            className="z-50 max-w-72 rounded-3 border border-rule bg-sheet px-2.5 py-1.5 text-small text-ink shadow-float"
          >
            {text}
          </Radix.Content>
        </Radix.Portal>
      </Radix.Root>
    </Radix.Provider>
  );
}
