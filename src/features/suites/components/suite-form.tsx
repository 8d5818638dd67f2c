import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type * as z from 'zod';
import { createSuite, SuiteBody } from '#contract/suites.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field, TextArea } from '#src/components/ui/field.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { countOf } from '#src/lib/format.ts';
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
const HELP = {
  text: 'A result below its limit has no number, and a logarithm needs one: it becomes this share of its own limit. The measured values stay as they are, and so do their ratios.',
  caution: 'One value for many rows makes a spike in log-ratios that can pass for a group. Where much is below detection, leave the analyte out once and compare.',
  source: 'Martín-Fernández, Barceló-Vidal & Pawlowsky-Glahn 2003; 0.65 is the share they use.',
};

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
      .then(({ name }) => notify(`“${name}” is made`))
      .catch((error: unknown) => showFieldProblems(error, ['name', 'note', 'replacementFraction'], setError)),
  );
  const unavailable = refusal ?? (analytes.length < LEAST ? `Tick at least ${LEAST} analytes` : undefined);
  return (
    <Plate title="New suite" qualifier={countOf(analytes.length, 'analyte')} help={HELP} caption="Values below detection are replaced, then centred log-ratios taken.">
      <form noValidate className="grid gap-3" onSubmit={(event) => void submit(event)}>
        <Field label="Name" error={errors.name} {...register('name')} />
        <Field label="Below detection becomes" unit="× its limit" hint="0.65 is usual; 0.1 to 1." inputMode="decimal" error={errors.replacementFraction} {...register('replacementFraction', { valueAsNumber: true })} />
        <TextArea label="What it is for" isOptional rows={2} error={errors.note} {...register('note')} />
        {create.error && <Problem error={create.error} />}
        <Button kind="main" type="submit" isWide unavailable={unavailable} isBusy={create.isPending}>
          Make the suite
        </Button>
      </form>
    </Plate>
  );
}
