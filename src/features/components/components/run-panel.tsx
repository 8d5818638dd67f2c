import { zodResolver } from '@hookform/resolvers/zod';
import { Play } from 'lucide-react';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import * as z from 'zod';
import { startComponents, type ComponentRun } from '#contract/components.ts';
import type { Suite } from '#contract/suites.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Panel } from '#src/components/ui/panel.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useStartComponents } from '../api/components-mutations.ts';

interface Props {
  suites: readonly Suite[];
  run: ComponentRun | null;
  /** Suite asked for by the address. */
  suiteId: number | null;
  isBusy: boolean;
}

const MOST_SEED = 2147483647;
const RunForm = z.object({
  suiteId: z.coerce.number(),
  seed: z.coerce.number('expected a whole number').int('expected a whole number').min(1, 'expected at least 1').max(MOST_SEED, `expected at most ${MOST_SEED}`),
});

/** Chooses a suite and runs components on it. */
export function RunPanel({ suites, run, suiteId, isBusy }: Props) {
  const [isOpen, setOpen] = useState(false);
  const refusal = useRefusal(startComponents);
  const label = run?.isStale ? 'Run again' : 'Run';
  if (refusal !== undefined || suites.length === 0) {
    return (
      <Button kind="main" icon={Play} unavailable={refusal ?? 'Components stand on a suite: choose analytes first'}>
        {label}
      </Button>
    );
  }
  return (
    <Panel
      label="Run components"
      isOpen={isOpen}
      onOpenChange={setOpen}
      trigger={
        <Button kind="main" icon={Play} isBusy={isBusy}>
          {label}
        </Button>
      }
    >
      <RunFields suites={suites} suiteId={suiteId ?? run?.suiteId ?? null} onStarted={() => setOpen(false)} />
    </Panel>
  );
}

function RunFields({ suites, suiteId, onStarted }: { suites: readonly Suite[]; suiteId: number | null; onStarted: () => void }) {
  const start = useStartComponents(useDepositId());
  const first = suites.find(({ id }) => id === suiteId) ?? suites[0];
  const { register, handleSubmit, formState } = useForm<z.input<typeof RunForm>, unknown, z.output<typeof RunForm>>({
    resolver: zodResolver(RunForm),
    defaultValues: { suiteId: first?.id ?? 0, seed: 1 },
  });
  return (
    <form noValidate onSubmit={handleSubmit((body) => start.mutate(body, { onSuccess: onStarted }))} className="grid gap-2.5">
      <Select label="Suite" options={suites.map(({ id, name, analytes, support }) => ({ value: String(id), label: `${name}, ${analytes.length} analytes${support === 'surface' ? ', surface' : ''}` }))} {...register('suiteId')} />
      <Field label="Seed" hint="For the shuffles of parallel analysis: the same seed gives the same answer." inputMode="numeric" error={formState.errors.seed} {...register('seed')} />
      {start.error && <Problem error={start.error} />}
      <Button type="submit" kind="main" icon={Play} isBusy={start.isPending} isWide>
        Run components
      </Button>
    </form>
  );
}
