import { zodResolver } from '@hookform/resolvers/zod';
import { useQuery } from '@tanstack/react-query';
import { Copy } from 'lucide-react';
import { useMemo, useState } from 'react';
import { Controller, useForm } from 'react-hook-form';
import * as z from 'zod';
import type { ApiToken } from '#contract/deposits.ts';
import { Name } from '#contract/common.ts';
import { TOKEN_RIGHTS, TokenRight } from '#contract/roles.ts';
import { Button } from '#src/components/ui/button.tsx';
import { RadioGroup } from '#src/components/ui/choices.tsx';
import { Chip } from '#src/components/ui/chip.tsx';
import { Dialog } from '#src/components/ui/dialog.tsx';
import { Empty } from '#src/components/ui/empty.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import type { Column } from '#src/components/ui/table/column.ts';
import { Table } from '#src/components/ui/table/table.tsx';
import { copyText } from '#src/lib/download.ts';
import { fieldWords } from '#src/lib/form-problems.ts';
import { formatDate } from '#src/lib/format-dates.ts';
import { notify, notifyProblem } from '#src/lib/toasts.ts';
import { useCreateToken, useRevokeToken, tokensQuery } from '../api/members-queries.ts';

const RIGHT_WORDS: Record<TokenRight, { label: string; hint: string }> = {
  read: { label: 'Read', hint: 'everything you may read, nothing to change' },
  codes: { label: 'Codes only', hint: 'fetch the codes and their statistics' },
  work: { label: 'Work', hint: 'all that your role may do' },
};

/** Keys for programs: scoped to this deposit, ending by themselves, shown once. */
export function TokenPlate({ depositId }: { depositId: number }) {
  const { data: tokens, error, refetch } = useQuery(tokensQuery(depositId));
  const [isMaking, setMaking] = useState(false);
  const revoking = useRevokeToken(depositId);
  const columns = useMemo(
    () =>
      tokenColumns((token) =>
        revoking.mutate(token.id, {
          onSuccess: () => notify(`Token ${token.name} revoked`),
          onError: notifyProblem,
        }),
      ),
    [revoking],
  );
  return (
    <>
      <Plate
        title="API tokens"
        qualifier="for programs, on this deposit only"
        tools={
          <Button size="tiny" onClick={() => setMaking(true)}>
            New token
          </Button>
        }
        error={tokens ? undefined : error}
        onRetry={() => void refetch()}
        help={{
          text: 'A token lets a program call the interface described at /api/openapi.json. Send it as Authorization: Bearer.',
          caution:
            'Whoever holds it acts in your name on this deposit until it ends or is revoked.',
        }}
        empty={
          tokens?.length === 0 ? (
            <Empty>
              No token yet. An estimation package can fetch the codes by itself with one.
            </Empty>
          ) : undefined
        }
      >
        {tokens && (
          <Table caption="API tokens" columns={columns} rows={tokens} rowKey={({ id }) => id} />
        )}
      </Plate>
      <NewTokenDialog depositId={depositId} isOpen={isMaking} onClose={() => setMaking(false)} />
    </>
  );
}

const tokenColumns = (onRevoke: (token: ApiToken) => void): Column<ApiToken>[] => [
  { header: 'Name', rowHeader: true, cell: ({ name }) => name },
  { header: 'Right', cell: ({ right }) => RIGHT_WORDS[right].label },
  { header: 'Of', cell: ({ owner }) => owner.name },
  {
    header: 'Last used',
    isWhole: true,
    cell: ({ lastUsedAt }) => (lastUsedAt ? formatDate(lastUsedAt) : 'never'),
    value: ({ lastUsedAt }) => lastUsedAt,
  },
  {
    header: 'Ends',
    isWhole: true,
    value: ({ expiresAt }) => expiresAt,
    cell: ({ expiresAt }) =>
      Date.parse(expiresAt) < Date.now() ? <Chip tone="bad">ended</Chip> : formatDate(expiresAt),
  },
  {
    header: 'Revoke',
    isControl: true,
    align: 'right',
    cell: (token) => (
      <Button size="tiny" aria-label={`Revoke ${token.name}`} onClick={() => onRevoke(token)}>
        Revoke
      </Button>
    ),
  },
];

const NewToken = z.strictObject({
  name: Name,
  right: TokenRight,
  days: z.coerce.number().int().min(1).max(366),
});

function NewTokenDialog({
  depositId,
  isOpen,
  onClose,
}: {
  depositId: number;
  isOpen: boolean;
  onClose: () => void;
}) {
  const creating = useCreateToken(depositId);
  const { register, control, handleSubmit, formState, reset } = useForm<
    z.input<typeof NewToken>,
    unknown,
    z.output<typeof NewToken>
  >({
    resolver: zodResolver(NewToken),
    defaultValues: { name: '', right: 'codes', days: 90 },
  });
  const close = () => {
    onClose();
    creating.reset();
    reset();
  };
  const made = creating.data;
  if (made) {
    return (
      <Dialog
        isOpen={isOpen}
        onClose={close}
        title={`Token ${made.token.name}`}
        description="Copy it now: it is shown only this once."
        actions={
          <Button kind="main" onClick={close}>
            Done
          </Button>
        }
      >
        <div className="flex items-center gap-2">
          <code className="min-w-0 flex-1 rounded-2 bg-trough px-2 py-1.5 font-mono text-caption break-all">
            {made.text}
          </code>
          <Button
            icon={Copy}
            onClick={() =>
              void copyText(made.text).then((isCopied) =>
                notify(
                  isCopied
                    ? 'Token copied'
                    : 'The browser did not let the page write to the clipboard. Mark the text and copy it.',
                ),
              )
            }
          >
            Copy
          </Button>
        </div>
      </Dialog>
    );
  }
  return (
    <Dialog
      isOpen={isOpen}
      onClose={close}
      title="New token"
      description="For one program. It ends by itself and can be revoked at any time."
    >
      <form
        onSubmit={handleSubmit((body) => creating.mutate(body))}
        noValidate
        className="grid gap-3"
      >
        <Field
          label="Name"
          hint="What will use it."
          error={fieldWords(formState.errors.name, 'Expected a name')}
          {...register('name')}
        />
        <Controller
          control={control}
          name="right"
          render={({ field }) => (
            <RadioGroup
              label="Right"
              choices={TOKEN_RIGHTS.map((right) => ({ value: right, ...RIGHT_WORDS[right] }))}
              value={field.value}
              onPick={field.onChange}
            />
          )}
        />
        <Field
          label="Ends after"
          unit="days"
          inputMode="numeric"
          className="max-w-40"
          error={fieldWords(formState.errors.days, 'Expected 1 to 366 days')}
          {...register('days')}
        />
        {creating.error && <Problem error={creating.error} />}
        <div className="flex justify-end">
          <Button type="submit" kind="main" isBusy={creating.isPending}>
            Make the token
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
