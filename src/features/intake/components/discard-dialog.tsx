import type { Upload } from '#contract/files.ts';
import { ConfirmDialog } from '#src/components/ui/dialog.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { countOf } from '#src/lib/format.ts';
import { notify } from '#src/lib/toasts.ts';
import { useDiscard } from '../api/intake-mutations.ts';

interface Props {
  depositId: number;
  /** The file asked about; null while none is. */
  upload: Upload | null;
  onClose: () => void;
  onDiscarded?: () => void;
}

/** Asks before a file that was brought in is thrown away. */
export function DiscardDialog({ depositId, upload, onClose, onDiscarded }: Props) {
  const discard = useDiscard(depositId);
  const confirm = () => {
    if (!upload) return;
    discard.mutate(upload.id, {
      onSuccess: () => {
        notify(`${upload.fileName} is discarded`);
        onClose();
        onDiscarded?.();
      },
    });
  };
  return (
    <ConfirmDialog
      isOpen={upload !== null}
      onClose={onClose}
      title={`Discard ${upload?.fileName ?? 'the file'}?`}
      description={`Its ${countOf(upload?.rowCount ?? 0, 'row')} and what you said of its columns leave Selvage. Tables in force are not touched; the file can be brought in again.`}
      confirmLabel="Discard the file"
      isBusy={discard.isPending}
      onConfirm={confirm}
    >
      {discard.error && <Problem error={discard.error} />}
    </ConfirmDialog>
  );
}
