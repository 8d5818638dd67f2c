import { zodResolver } from '@hookform/resolvers/zod';
import { Plus } from 'lucide-react';
import { useFieldArray, useForm } from 'react-hook-form';
import { saveZoneRules, ZoneRules, type StoredZoneRules, type ZoneRulesInput } from '#contract/geomet.ts';
import type { Snapshot } from '#contract/snapshots.ts';
import { Button } from '#src/components/ui/button.tsx';
import { Field } from '#src/components/ui/field.tsx';
import { Plate } from '#src/components/ui/plate.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { cx } from '#src/lib/cx.ts';
import { formatWhen } from '#src/lib/format-dates.ts';
import { useDeposit, useRefusal } from '#src/lib/use-deposit.ts';
import { useSaveRules } from '../api/geomet-queries.ts';

const UNITS = ['ppm', '%', 'g/t', 'ppb'].map((unit) => ({ value: unit, label: unit }));

const HELP = {
  text: 'Intervals at or over a limit are joined into zones: a gap is bridged while it is no longer than the internal dilution, the mean stays at the limit, and at most half of the zone is dilution. Zones shorter than the minimum are dropped.',
  caution: 'Selvage holds no limits of its own: penalties and plant limits differ by contract and site. Zones are screening only, to be confirmed by laboratory test work.',
  source: 'Run rule of this project',
};

interface Props {
  rules: StoredZoneRules;
  snapshot: Snapshot | null;
}

const startOf = ({ limits, minLengthM, maxDilutionM }: StoredZoneRules): ZoneRulesInput => ({ limits, minLengthM, maxDilutionM });
const asNumber = { valueAsNumber: true } as const;

/** Limits per element and the rules that join flagged intervals into zones. */
export function RulesPlate({ rules, snapshot }: Props) {
  const { id: depositId, deleteriousAnalytes } = useDeposit();
  const save = useSaveRules(depositId);
  const refusal = useRefusal(saveZoneRules);
  const { register, control, handleSubmit, reset, formState: { errors, isDirty } } = useForm<ZoneRulesInput, unknown, ZoneRules>({ resolver: zodResolver(ZoneRules), values: startOf(rules) });
  const { fields, append, remove } = useFieldArray({ control, name: 'limits' });
  const analytes = (snapshot?.analytes.map(({ analyte }) => analyte) ?? deleteriousAnalytes).map((analyte) => ({ value: analyte, label: analyte }));
  const used = new Set(fields.map(({ analyte }) => analyte));
  const next = [...deleteriousAnalytes, ...analytes.map(({ value }) => value)].find((analyte) => !used.has(analyte));
  const submit = handleSubmit((body) => save.mutate({ rules: body, version: rules.version }));
  return (
    <Plate title="Limits and run rules" help={HELP} caption={rules.updatedAt ? `set by ${rules.updatedBy ?? 'somebody'}, ${formatWhen(rules.updatedAt)}` : 'no limits set yet'}>
      <form noValidate onSubmit={(event) => void submit(event)} className="grid gap-3">
        <fieldset disabled={refusal !== undefined} className="grid gap-2">
          <legend className="mb-1 text-caption font-semibold text-ink-2">An interval is flagged at or over</legend>
          {fields.map((field, i) => (
            <div key={field.id} className="grid grid-cols-[5.5rem_minmax(0,1fr)_5rem_auto] items-start gap-2">
              <Select label="Element" isLabelHidden={i > 0} options={analytes} {...register(`limits.${i}.analyte`)} />
              <Field label="Limit" isLabelHidden={i > 0} inputMode="decimal" error={errors.limits?.[i]?.limit} {...register(`limits.${i}.limit`, asNumber)} />
              <Select label="Unit" isLabelHidden={i > 0} options={UNITS} {...register(`limits.${i}.unit`)} />
              <div className={cx('flex h-8 items-center max-md:h-11', i === 0 && 'mt-[1.4rem]')}><Button kind="bare" onClick={() => remove(i)} aria-label={`Remove the limit of ${field.analyte}`}>Remove</Button></div>
            </div>
          ))}
          {fields.length === 0 && <p className="text-small text-ink-2">No limit yet. Add the elements that cost money in your concentrate, leach or tailings.</p>}
          {errors.limits?.root && <p role="alert" className="text-caption text-bad">{errors.limits.root.message}</p>}
          <div><Button size="tiny" icon={Plus} unavailable={refusal ?? (next ? undefined : 'Every analyte has a limit')} onClick={() => next && append({ analyte: next, limit: 0, unit: 'ppm' })}>Add an element</Button></div>
          <div className="grid grid-cols-2 gap-3">
            <Field label="Minimum zone length" unit="m" inputMode="decimal" error={errors.minLengthM} {...register('minLengthM', asNumber)} />
            <Field label="Longest internal dilution" unit="m" inputMode="decimal" error={errors.maxDilutionM} {...register('maxDilutionM', asNumber)} />
          </div>
        </fieldset>
        {save.error && <Problem error={save.error} />}
        <div className="flex justify-end gap-2">
          {isDirty && <Button kind="bare" onClick={() => reset(startOf(rules))}>Undo changes</Button>}
          <Button type="submit" unavailable={refusal ?? (isDirty ? undefined : 'Nothing has changed')} isBusy={save.isPending}>Save limits</Button>
        </div>
      </form>
    </Plate>
  );
}
