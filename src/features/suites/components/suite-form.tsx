import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type * as z from 'zod';
import { createSuite, SuiteBody } from '#contract/suites.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field, TextArea } from '#src/components/ui/field.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { showFieldProblems } from '#src/lib/form-problems.ts';
import { notify } from '#src/lib/toasts.ts';
import { useDepositId, useRefusal } from '#src/lib/use-deposit.ts';
import { useCreateSuite } from '../api/suites-mutations.ts';

interface Props {
  support: 'drill' | 'surface';
  analytes: readonly string[];
  /** Suites there are, to propose a name of its own. */
  count: number;
}

const LEAST = 3;
/** The form's own fields; support and analytes come from the table beside it. */
const SuiteFields = SuiteBody.pick({ name: true, note: true, replacementFraction: true });

/** Names the suite and says how values below detection are treated. */
export function SuiteForm({ support, analytes, count }: Props) {
  const create = useCreateSuite(useDepositId());
  const refusal = useRefusal(createSuite);
  const { register, handleSubmit, setError, formState: { errors } } = useForm<z.input<typeof SuiteFields>, unknown, z.output<typeof SuiteFields>>({
    resolver: zodResolver(SuiteFields), defaultValues: { name: `Suite ${count + 1}`, note: '', replacementFraction: 0.65 },
  });
  const submit = handleSubmit((body) =>
    create
      .mutateAsync({ ...body, support, analytes: [...analytes] })
      .then(({ name }) => notify(`“${name}” is chosen`))
      .catch((error: unknown) => showFieldProblems(error, ['name', 'note', 'replacementFraction'], setError)),
  );
  const unavailable = refusal ?? (analytes.length < LEAST ? `Choose at least ${LEAST} analytes` : undefined);
  return (
    <Plate title="New suite" qualifier={`${analytes.length} analytes`} caption="Multiplicative simple replacement, then centred log-ratios of the analytes chosen.">
      <form noValidate className="grid gap-3" onSubmit={(event) => void submit(event)}>
        <Field label="Name" error={errors.name} {...register('name')} />
        <Field label="Below detection becomes" unit="× its limit" hint="0.65 is usual" inputMode="decimal" error={errors.replacementFraction} {...register('replacementFraction', { valueAsNumber: true })} />
        <TextArea label="What it is for" isOptional rows={2} error={errors.note} {...register('note')} />
        {create.error && <Problem error={create.error} />}
        <div className="flex justify-end"><Button kind="main" type="submit" unavailable={unavailable} isBusy={create.isPending}>Choose this suite</Button></div>
      </form>
    </Plate>
  );
}
