import { X } from 'lucide-react';
import { Toast } from 'radix-ui';
import { cx } from '#src/lib/cx.ts';
import { dismissToast, useToasts, type ToastNote } from '#src/lib/toasts.ts';
import { IconButton } from './icon-button.tsx';

const SHOWN_MS = 8000;

/** Notices at the foot of main, above the tray; eight seconds, paused on hover and focus (F8 reaches them). */
export function Toasts() {
  const notes = useToasts();
  return (
    <Toast.Provider duration={SHOWN_MS} swipeDirection="down" label="Notice">
      {notes.map((note) => (
        <Note key={note.id} note={note} />
      ))}
      <Toast.Viewport
        label="Notices ({hotkey})"
        className="pointer-events-none fixed bottom-[calc(var(--tray-now,0px)+0.75rem)] left-1/2 z-50 m-0 flex w-[min(34rem,calc(100vw-2rem))] -translate-x-1/2 list-none flex-col gap-2 p-0 max-md:bottom-20"
      />
    </Toast.Provider>
  );
}

function Note({ note }: { note: ToastNote }) {
  const { action } = note;
  return (
    <Toast.Root
      onOpenChange={(isOpen) => !isOpen && dismissToast(note.id)}
      className={cx(
        'opens pointer-events-auto flex items-center gap-3 rounded-3 border bg-sheet py-1.5 pr-1.5 pl-3 text-body text-ink shadow-float',
        note.tone === 'bad' ? 'border-bad' : 'border-rule',
      )}
    >
      <Toast.Title className={cx('min-w-0 flex-1', note.tone === 'bad' && 'text-bad')}>
        {note.text}
      </Toast.Title>
      {action && (
        <Toast.Action asChild altText={action.label}>
          <button
            type="button"
            onClick={action.run}
            className="h-7 rounded-2 border-0 bg-transparent px-2 font-medium text-copper underline hover:bg-trough"
          >
            {action.label}
          </button>
        </Toast.Action>
      )}
      <Toast.Close asChild>
        <IconButton icon={X} label="Close this notice" />
      </Toast.Close>
    </Toast.Root>
  );
}
