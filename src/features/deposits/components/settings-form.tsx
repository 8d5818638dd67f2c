import { useState } from 'react';
import { updateDeposit } from '#contract/deposits.ts';
import { Button } from '#src/components/ui/button.tsx';
import { hasStatus } from '#src/lib/api-problem.ts';
import { notify } from '#src/lib/toasts.ts';
import { useDeposit, useRefusal } from '#src/lib/use-deposit.ts';
import { useUpdateDeposit } from '../api/deposit-mutations.ts';
import { formOf } from '../model.ts';
import { DepositFields } from './deposit-form.tsx';

/** Changes a deposit. The version read first is sent along, so that nobody's change is lost unseen. */
export function SettingsForm() {
  const deposit = useDeposit();
  const [started, setStarted] = useState(deposit);
  const refusal = useRefusal(updateDeposit);
  const update = useUpdateDeposit(deposit.id, () => notify('Settings saved'));
  const isOvertaken = deposit.version !== started.version && !update.isSuccess;
  return (
    <>
      {(isOvertaken || hasStatus(update.error, 412)) && (
        <div
          role="status"
          className="mb-3 rounded-2 border border-warn bg-warn-wash px-3 py-2 text-small"
        >
          <p>
            Someone else has changed these settings since you opened them. What you typed is still
            here.
          </p>
          <Button
            size="tiny"
            className="mt-1.5"
            onClick={() => {
              update.reset();
              setStarted(deposit);
            }}
          >
            Show theirs
          </Button>
        </div>
      )}
      <DepositFields
        key={started.version}
        initial={formOf(started)}
        submitLabel="Save settings"
        isBusy={update.isPending}
        error={hasStatus(update.error, 412) ? null : update.error}
        unavailable={refusal}
        onSubmit={(body) =>
          update.mutate({ body, version: started.version }, { onSuccess: setStarted })
        }
      />
    </>
  );
}
