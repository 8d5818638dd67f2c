import { useState } from 'react';
import { Play } from 'lucide-react';
import { useForm, useWatch } from 'react-hook-form';
import { zodResolver } from '@hookform/resolvers/zod';
import * as z from 'zod';
import type { ComponentRun } from '#contract/components.ts';
import { startGrouping, startSweep, type Grouping } from '#contract/groupings.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Panel } from '#src/components/ui/panel.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useGroupRun, useSweep } from '../api/groups-mutations.ts';

interface Props {
  runs: readonly ComponentRun[];
  grouping: Grouping | null;
  /** Number of groups asked for by the sweep. */
  k: number;
  isBusy: boolean;
}

const whole = (low: number, high: number) => z.coerce.number(`expected a whole number from ${low} to ${high}`).int(`expected a whole number from ${low} to ${high}`).min(low, `expected at least ${low}`).max(high, `expected at most ${high}`);

const RunForm = z.object({
  componentRunId: z.coerce.number(),
  components: whole(1, 40),
  k: whole(2, 16),
  seed: whole(1, 2147483647),
  name: z.string().trim().max(120),
  kFrom: whole(2, 20),
  kTo: whole(2, 20),
});
type RunFormInput = z.input<typeof RunForm>;
type RunFormValues = z.output<typeof RunForm>;

/** Settings of the next grouping and of the sweep, beside their buttons. */
export function RunPanel({ runs, grouping, k, isBusy }: Props) {
  const [isOpen, setOpen] = useState(false);
  const refusal = useRefusal(startGrouping);
  const label = grouping === null ? 'Group' : grouping.isStale ? 'Run again' : 'Run';
  if (refusal !== undefined || runs.length === 0) {
    return (
      <Button kind="main" icon={Play} unavailable={refusal ?? 'Groups stand on components: run those first'}>
        {label}
      </Button>
    );
  }
  return (
    <Panel
      label="Run groups"
      isOpen={isOpen}
      onOpenChange={setOpen}
      trigger={
        <Button kind="main" icon={Play} isBusy={isBusy}>
          {label}
        </Button>
      }
    >
      <RunForms runs={runs} grouping={grouping} k={k} onStarted={() => setOpen(false)} />
    </Panel>
  );
}

function RunForms({ runs, grouping, k, onStarted }: Omit<Props, 'isBusy'> & { onStarted: () => void }) {
  const depositId = useDepositId();
  const sweep = useSweep(depositId);
  const group = useGroupRun(depositId);
  const sweepRefusal = useRefusal(startSweep);
  const first = runs.find(({ id, isStale }) => !isStale && id === grouping?.componentRunId) ?? runs.find(({ isStale }) => !isStale) ?? runs[0];
  const { register, handleSubmit, control, formState } = useForm<RunFormInput, unknown, RunFormValues>({
    resolver: zodResolver(RunForm),
    defaultValues: { componentRunId: first?.id ?? 0, components: grouping?.components ?? first?.suggested ?? 2, k, seed: grouping?.seed ?? 1, name: '', kFrom: 2, kTo: 12 },
  });
  const runId = Number(useWatch({ control, name: 'componentRunId' }));
  const run = runs.find(({ id }) => id === runId) ?? first;
  const { errors } = formState;
  const toSweep = ({ componentRunId, components, kFrom, kTo, seed }: RunFormValues) => sweep.mutate({ componentRunId, components, kFrom: Math.min(kFrom, kTo), kTo: Math.max(kFrom, kTo), seed }, { onSuccess: onStarted });
  const toGroup = ({ componentRunId, components, k: count, seed, name }: RunFormValues) => group.mutate({ componentRunId, components, k: count, seed, ...(name === '' ? {} : { name }) }, { onSuccess: onStarted });
  return (
    <form noValidate onSubmit={handleSubmit(toGroup)} className="grid gap-2.5">
      {runs.length > 1 && <Select label="Components" options={runs.map((other) => ({ value: String(other.id), label: runName(other) }))} {...register('componentRunId')} />}
      <div className="grid grid-cols-3 gap-2">
        <Field label="Kept" inputMode="numeric" error={errors.components} {...register('components')} />
        <Field label="Groups, k" inputMode="numeric" error={errors.k} {...register('k')} />
        <Field label="Seed" inputMode="numeric" error={errors.seed} {...register('seed')} />
      </div>
      {run && <p className="-mt-1 text-caption text-ink-3">Components kept: 1 to {run.stored}. {run.suggestion}</p>}
      <Field label="Name" isOptional error={errors.name} {...register('name')} />
      {group.error && <Problem error={group.error} />}
      <Button type="submit" kind="main" icon={Play} isBusy={group.isPending} isWide>
        Run the groups
      </Button>
      <div className="mt-1 grid gap-2 border-t border-rule pt-2.5">
        <p className="font-semibold">Sweep over k</p>
        <div className="flex items-end gap-2">
          <Field label="From" inputMode="numeric" error={errors.kFrom} {...register('kFrom')} />
          <Field label="To" inputMode="numeric" error={errors.kTo} {...register('kTo')} />
          <Button unavailable={sweepRefusal} isBusy={sweep.isPending} onClick={() => void handleSubmit(toSweep)()}>
            Sweep
          </Button>
        </div>
        {sweep.error && <Problem error={sweep.error} />}
      </div>
    </form>
  );
}

const runName = ({ suiteName, snapshotNumber, parts, isStale }: ComponentRun): string => `${suiteName}, ${parts.length} analytes, snapshot ${snapshotNumber}${isStale ? ' (stale)' : ''}`;
