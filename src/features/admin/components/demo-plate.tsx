import { useState } from 'react';
import { Button } from '#src/components/ui/button.tsx';
import { ConfirmDialog } from '#src/components/ui/dialog.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { notify } from '#src/lib/toasts.ts';
import { useResetDemo } from '../api/admin-queries.ts';

/** Puts the demonstration deposits back to their first state. */
export function DemoPlate() {
  const [isAsking, setAsking] = useState(false);
  const resetting = useResetDemo();
  const reset = () =>
    resetting.mutate(undefined, {
      onSuccess: () => {
        setAsking(false);
        notify('The demonstration is being put back; it takes a minute');
      },
    });
  return (
    <Plate title="Demonstration" qualifier="invented data">
      <p className="mb-2 max-w-[34rem] text-pretty text-ink-2">
        Visitors change the demonstration deposits freely. Put them back to their first state when
        they have wandered too far.
      </p>
      <Button onClick={() => setAsking(true)}>Put the demonstration back</Button>
      <ConfirmDialog
        isOpen={isAsking}
        onClose={() => setAsking(false)}
        title="Put the demonstration back?"
        description="All work done on the demonstration deposits since is lost. Other deposits are not touched."
        confirmLabel="Put it back"
        isBusy={resetting.isPending}
        onConfirm={reset}
      >
        {resetting.error && <Problem error={resetting.error} />}
      </ConfirmDialog>
    </Plate>
  );
}
