import { X } from 'lucide-react';
import { Dialog as Radix } from 'radix-ui';
import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';
import { Button } from './button.tsx';
import { IconButton } from './icon-button.tsx';

interface Props {
  isOpen: boolean;
  onClose: () => void;
  title: ReactNode;
  /** One sentence under the title; read out when the dialog opens. */
  description?: ReactNode;
  children?: ReactNode;
  /** Buttons at the foot, main action last. */
  actions?: ReactNode;
  width?: 'narrow' | 'wide';
}

export const OVERLAY = 'fixed inset-0 z-40 bg-[#1714118c]';
export const FLOATING =
  'opens fixed left-1/2 z-50 -translate-x-1/2 rounded-3 border border-rule bg-sheet text-ink shadow-float';

/** Focus goes to the first thing to fill in; a dialog without one takes it itself. */
function focusFirstField(event: Event): void {
  const content = event.currentTarget;
  if (!(content instanceof HTMLElement)) return;
  event.preventDefault();
  const field = content.querySelector<HTMLElement>('input:not([type="hidden"]), select, textarea');
  (field ?? content).focus();
}

/** Only for signing, sharing, and what cannot be undone; all else happens in place. */
export function Dialog({
  isOpen,
  onClose,
  title,
  description,
  children,
  actions,
  width = 'narrow',
}: Props) {
  return (
    <Radix.Root open={isOpen} onOpenChange={(open) => !open && onClose()}>
      <Radix.Portal>
        <Radix.Overlay className={OVERLAY} />
        <Radix.Content
          {...(description ? {} : { 'aria-describedby': undefined })}
          onOpenAutoFocus={focusFirstField}
          className={cx(
            FLOATING,
            'top-[12vh] max-h-[80dvh] w-[calc(100vw-2rem)] overflow-auto p-4',
            width === 'narrow' ? 'max-w-[28rem]' : 'max-w-[44rem]',
          )}
        >
          <div className="flex items-start gap-2">
            <Radix.Title className="flex-1 text-head">{title}</Radix.Title>
            <Radix.Close asChild>
              <IconButton icon={X} label="Close" />
            </Radix.Close>
          </div>
          {description && (
            <Radix.Description className="mt-1 text-body text-ink-2">
              {description}
            </Radix.Description>
          )}
          {children && <div className="mt-3 grid gap-3">{children}</div>}
          {actions && <div className="mt-4 flex flex-wrap justify-end gap-2">{actions}</div>}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}

interface ConfirmProps {
  isOpen: boolean;
  onClose: () => void;
  title: string;
  /** What will be lost. */
  description: ReactNode;
  /** The verb with its object: "Remove A. Brandt". */
  confirmLabel: string;
  onConfirm: () => void;
  isBusy?: boolean;
  children?: ReactNode;
}

/** Asks before what cannot be undone. */
export function ConfirmDialog({
  isOpen,
  onClose,
  title,
  description,
  confirmLabel,
  onConfirm,
  isBusy,
  children,
}: ConfirmProps) {
  return (
    <Dialog
      isOpen={isOpen}
      onClose={onClose}
      title={title}
      description={description}
      actions={
        <>
          <Button onClick={onClose}>Keep</Button>
          <Button kind="main" isBusy={isBusy} onClick={onConfirm}>
            {confirmLabel}
          </Button>
        </>
      }
    >
      {children}
    </Dialog>
  );
}
