import type { InputHTMLAttributes, ReactNode, Ref } from 'react';
import { useId } from 'react';
import { cx } from '#src/lib/cx.ts';
import { ErrorLine, errorText, type FieldError } from './field-frame.tsx';

interface CheckboxProps extends Omit<
  InputHTMLAttributes<HTMLInputElement>,
  'type' | 'className' | 'id'
> {
  label: ReactNode;
  hint?: ReactNode;
  error?: FieldError;
  ref?: Ref<HTMLInputElement>;
  className?: string;
  isLabelHidden?: boolean;
}

const BOX = 'm-0 mt-0.5 size-4 shrink-0 accent-copper-fill';

export function Checkbox({
  label,
  hint,
  error,
  className,
  isLabelHidden,
  ...input
}: CheckboxProps) {
  const id = useId();
  const message = errorText(error);
  return (
    <div className={cx('min-w-0', className)}>
      <label className="flex min-h-6 items-start gap-2 text-body text-ink max-md:min-h-11 max-md:items-center">
        <input
          {...input}
          id={id}
          type="checkbox"
          aria-invalid={message !== undefined || undefined}
          aria-describedby={hint ? `${id}-hint` : undefined}
          className={BOX}
        />
        <span className={isLabelHidden ? 'sr-only' : undefined}>{label}</span>
      </label>
      {hint && (
        <p id={`${id}-hint`} className="pl-6 text-caption text-ink-3">
          {hint}
        </p>
      )}
      {message && <ErrorLine message={message} />}
    </div>
  );
}

export interface Choice<Value extends string> {
  value: Value;
  label: ReactNode;
  hint?: ReactNode;
  /** Why it cannot be chosen now. */
  unavailable?: string;
}

interface RadioProps<Value extends string> {
  label: ReactNode;
  name?: string;
  choices: readonly Choice<Value>[];
  value: Value | null;
  onPick: (value: Value) => void;
  hint?: ReactNode;
  error?: FieldError;
  isInline?: boolean;
  className?: string;
}

/** Up to five choices, all in view. */
export function RadioGroup<Value extends string>({
  label,
  name,
  choices,
  value,
  onPick,
  hint,
  error,
  isInline,
  className,
}: RadioProps<Value>) {
  const id = useId();
  const message = errorText(error);
  return (
    <fieldset
      className={cx('m-0 min-w-0 border-0 p-0', className)}
      aria-describedby={hint ? `${id}-hint` : undefined}
    >
      <legend className="p-0 text-small font-medium text-ink-2">{label}</legend>
      <div className={isInline ? 'flex flex-wrap gap-x-4' : 'grid gap-0.5'}>
        {choices.map((choice) => (
          <label
            key={choice.value}
            title={choice.unavailable}
            className={cx(
              'flex min-h-6 items-start gap-2 text-body max-md:min-h-11 max-md:items-center',
              choice.unavailable ? 'text-ink-3' : 'text-ink',
            )}
          >
            <input
              type="radio"
              name={name ?? id}
              value={choice.value}
              checked={choice.value === value}
              disabled={choice.unavailable !== undefined}
              onChange={() => onPick(choice.value)}
              className={BOX}
            />
            <span>
              {choice.label}
              {(choice.hint || choice.unavailable) && (
                <span className="block text-caption text-ink-3">
                  {choice.unavailable ?? choice.hint}
                </span>
              )}
            </span>
          </label>
        ))}
      </div>
      {hint && (
        <p id={`${id}-hint`} className="text-caption text-ink-3">
          {hint}
        </p>
      )}
      {message && <ErrorLine message={message} />}
    </fieldset>
  );
}
