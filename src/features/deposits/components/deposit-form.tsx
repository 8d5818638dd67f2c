import { Plus, X } from 'lucide-react';
import {
  Controller,
  useFieldArray,
  useForm,
  type FieldErrors,
  type Resolver,
} from 'react-hook-form';
import { DepositBody, GradeUnit, type DepositBodyInput } from '#contract/deposits.ts';
import { Button } from '#src/components/ui/button.tsx';
import { RadioGroup } from '#src/components/ui/choices.tsx';
import { Field, TextArea } from '#src/components/ui/field.tsx';
import { ErrorLine } from '#src/components/ui/field-frame.tsx';
import { IconButton } from '#src/components/ui/icon-button.tsx';
import { Problem } from '#src/components/ui/problem.tsx';
import { Select } from '#src/components/ui/select.tsx';
import { bodyOf, fieldOf, messageFor, type DepositForm } from '../model.ts';

interface Props {
  initial: DepositForm;
  submitLabel: string;
  isBusy: boolean;
  error: unknown;
  onSubmit: (body: DepositBodyInput) => void;
  /** Why nothing may be changed. */
  unavailable?: string | undefined;
}

/** The contract's schema judges the body made of the form; what it refuses goes to the form's field. */
const resolver: Resolver<DepositForm> = (values) => {
  const parsed = DepositBody.safeParse(bodyOf(values));
  if (parsed.success) return { values, errors: {} };
  const errors: Record<string, unknown> = {};
  for (const { path, message } of parsed.error.issues) {
    const field = fieldOf(path);
    setAt(errors, field.split('.'), { type: 'contract', message: messageFor(field, message) });
  }
  const shaped: FieldErrors<DepositForm> = errors;
  return { values: {}, errors: shaped };
};

function setAt(
  target: Record<string, unknown>,
  [head = '', ...rest]: string[],
  value: unknown,
): void {
  if (rest.length === 0) {
    target[head] ??= value;
    return;
  }
  const known = target[head];
  const inner: Record<string, unknown> =
    known !== null && typeof known === 'object' ? { ...known } : {};
  setAt(inner, rest, value);
  target[head] = inner;
}

export function DepositFields({
  initial,
  submitLabel,
  isBusy,
  error,
  onSubmit,
  unavailable,
}: Props) {
  const form = useForm<DepositForm>({ resolver, defaultValues: initial });
  const { register, handleSubmit, control, watch, formState } = form;
  const { errors } = formState;
  const pay = useFieldArray({ control, name: 'payAnalytes' });
  return (
    <form onSubmit={handleSubmit((values) => onSubmit(bodyOf(values)))} noValidate>
      <fieldset disabled={unavailable !== undefined} className="m-0 grid gap-4 border-0 p-0">
        <Field label="Name" error={errors.name} {...register('name')} />
        <TextArea
          label="About it"
          isOptional
          rows={3}
          error={errors.description}
          {...register('description')}
        />
        <Controller
          control={control}
          name="gridKind"
          render={({ field }) => (
            <RadioGroup
              label="Grid"
              value={field.value}
              onPick={field.onChange}
              choices={[
                { value: 'local', label: 'A local grid in metres' },
                {
                  value: 'epsg',
                  label: 'A projected grid with an EPSG code',
                  hint: 'Kept with the deposit, so that everyone knows what its coordinates mean.',
                },
              ]}
            />
          )}
        />
        {watch('gridKind') === 'epsg' ? (
          <Field
            label="EPSG code"
            inputMode="numeric"
            className="max-w-48"
            error={errors.epsgCode}
            {...register('epsgCode')}
          />
        ) : (
          <Field
            label="Name of the grid"
            className="max-w-80"
            error={errors.gridName}
            {...register('gridName')}
          />
        )}
        <fieldset className="m-0 grid gap-1.5 border-0 p-0">
          <legend className="p-0 text-small font-medium text-ink-2">
            Pay analytes and the unit they are shown in
          </legend>
          {pay.fields.map(({ id }, index) => (
            <div key={id} className="flex items-start gap-2">
              <Field
                label={`Pay analyte ${index + 1}`}
                isLabelHidden
                className="w-28"
                error={errors.payAnalytes?.[index]?.analyte}
                {...register(`payAnalytes.${index}.analyte`)}
              />
              <Select
                label={`Unit of pay analyte ${index + 1}`}
                isLabelHidden
                className="w-24"
                options={GradeUnit.options.map((unit) => ({ value: unit, label: unit }))}
                {...register(`payAnalytes.${index}.unit`)}
              />
              {pay.fields.length > 1 && (
                <IconButton
                  icon={X}
                  size="bar"
                  label={`Remove pay analyte ${index + 1}`}
                  onClick={() => pay.remove(index)}
                />
              )}
            </div>
          ))}
          {errors.payAnalytes?.message && <ErrorLine message={errors.payAnalytes.message} />}
          <span>
            <Button
              size="tiny"
              icon={Plus}
              unavailable={unavailable}
              onClick={() => pay.append({ analyte: '', unit: 'ppm' })}
            >
              Pay analyte
            </Button>
          </span>
        </fieldset>
        <Field
          label="Deleterious elements"
          isOptional
          hint="Symbols with commas: As, Sb, Bi. Their limits are set on the Geomet page."
          error={errors.deleterious}
          {...register('deleterious')}
        />
      </fieldset>
      {error ? <Problem error={error} className="mt-4" /> : null}
      <div className="mt-4">
        <Button type="submit" kind="main" isBusy={isBusy} unavailable={unavailable}>
          {submitLabel}
        </Button>
      </div>
    </form>
  );
}
