import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { DomainBody, type Domain, type DomainBodyInput, type DomainList } from '#contract/domains.ts';
import type { Grouping } from '#contract/groupings.ts';
import { CategoryMark, SLOT_COUNT } from '#src/components/charts/category-marks.tsx';
import { Button } from '#src/components/ui/button.tsx';
import { Checkbox } from '#src/components/ui/choices.tsx';
import { Field, TextArea } from '#src/components/ui/field.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { showFieldProblems } from '#src/lib/form-problems.ts';
import { countOf, formatMetres } from '#src/lib/format.ts';

interface Props {
  grouping: Grouping;
  domains: DomainList['domains'];
  /** Null: a new domain. */
  domain: Domain | null;
  /** Groups ticked to begin with. */
  startLabels: readonly number[];
  submitLabel: string;
  isPending: boolean;
  error: Error | null;
  onSubmit: (body: DomainBody) => Promise<unknown>;
  onCancel: () => void;
}

/** Code that comes next in the trade's habit of hundreds; a person may write any other. */
function nextCode(domains: DomainList['domains']): string {
  const numbers = domains.map(({ code }) => Number(code)).filter(Number.isInteger);
  return String((Math.max(0, ...numbers) / 100 + 1) * 100);
}

function startValues({ grouping, domains, domain, startLabels }: Props): DomainBodyInput {
  if (domain) {
    const { code, name, rationale, slot, groupLabels } = domain;
    return { code, name, rationale, slot, groupLabels };
  }
  const first = grouping.groups.find(({ label }) => startLabels.includes(label));
  const code = domains.every((other) => Number.isInteger(Number(other.code))) ? nextCode(domains) : '';
  return { code, name: first?.name ?? '', rationale: '', slot: first?.slot ?? 1, groupLabels: [...startLabels] };
}

/** Which groups make the domain, its code and name, and why it is one domain. */
export function DomainForm(props: Props) {
  const { grouping, domains, domain, submitLabel, isPending, error, onSubmit, onCancel } = props;
  const { register, handleSubmit, watch, setValue, setError, formState: { errors } } = useForm<DomainBodyInput, unknown, DomainBody>({
    resolver: zodResolver(DomainBody), defaultValues: startValues(props),
  });
  const labels = watch('groupLabels');
  const slot = watch('slot');
  const ownerOf = (label: number) => domains.find((other) => other.id !== domain?.id && other.groupLabels.includes(label));
  const toggle = (label: number): void => setValue('groupLabels', labels.includes(label) ? labels.filter((other) => other !== label) : [...labels, label], { shouldValidate: true });
  const submit = handleSubmit((body) => onSubmit(body).catch((problem: unknown) => showFieldProblems(problem, ['code', 'name', 'rationale', 'groupLabels'], setError)));
  return (
    <form noValidate className="grid gap-3 lg:grid-cols-[minmax(0,1fr)_minmax(0,1.2fr)]" onSubmit={(event) => void submit(event)}>
      <fieldset className="min-w-0">
        <legend className="text-caption font-semibold text-ink-2">Groups that make it</legend>
        {grouping.groups.map((group) => {
          const owner = ownerOf(group.label);
          return (
            <Checkbox
              key={group.label}
              label={<span className="inline-flex items-center gap-1.5"><CategoryMark slot={group.slot} size={11} />{group.name}</span>}
              hint={owner ? `in ${owner.code}, ${owner.name}` : `${countOf(group.intervals, 'interval')}, ${formatMetres(group.metres)}`}
              checked={labels.includes(group.label)}
              disabled={owner !== undefined}
              onChange={() => toggle(group.label)}
            />
          );
        })}
        {errors.groupLabels && <p role="alert" className="mt-1 text-caption text-bad">{labels.length === 0 ? 'Choose at least one group' : errors.groupLabels.message}</p>}
      </fieldset>
      <div className="grid content-start gap-3">
        <div className="grid grid-cols-[8rem_minmax(0,1fr)] gap-3">
          <Field label="Domain code" isMono error={errors.code} {...register('code')} />
          <Field label="Name" error={errors.name} {...register('name')} />
        </div>
        <TextArea label="Why this is one domain" hint="What the rock did, in a sentence or two" error={errors.rationale} rows={3} {...register('rationale')} />
        <ColourPick slot={slot} onPick={(next) => setValue('slot', next)} />
        {error && <Problem error={error} />}
        <div className="flex justify-end gap-2">
          <Button kind="bare" onClick={onCancel}>Cancel</Button>
          <Button kind="main" type="submit" isBusy={isPending}>{submitLabel}</Button>
        </div>
      </div>
    </form>
  );
}

/** The sixteen marks; a domain keeps its mark wherever it is drawn. */
export function ColourPick({ slot, onPick }: { slot: number; onPick: (slot: number) => void }) {
  return (
    <fieldset>
      <legend className="text-caption font-semibold text-ink-2">Colour and mark</legend>
      <div className="mt-1 flex flex-wrap gap-1">
        {Array.from({ length: SLOT_COUNT }, (_, i) => i + 1).map((choice) => (
          <button key={choice} type="button" aria-label={`Mark ${choice}`} aria-pressed={choice === slot} onClick={() => onPick(choice)} className={`grid size-7 place-items-center rounded-2 border ${choice === slot ? 'border-copper bg-copper-wash' : 'border-rule'}`}>
            <CategoryMark slot={choice} size={14} />
          </button>
        ))}
      </div>
    </fieldset>
  );
}
