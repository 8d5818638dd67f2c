import type { UseFormRegisterReturn } from 'react-hook-form';
import { Field } from '#src/components/ui/field.tsx';
import type { FieldError } from '#src/components/ui/field-frame.tsx';

interface Props {
  label: string;
  error: FieldError;
  register: UseFormRegisterReturn;
  controlSize?: 'normal' | 'entry';
}

/** A new password, with what is asked of it said beforehand. */
export function NewPasswordField({ label, error, register, controlSize = 'normal' }: Props) {
  return (
    <Field
      label={label}
      type="password"
      autoComplete="new-password"
      controlSize={controlSize}
      hint="12 to 72 characters, accented letters counting double: a sentence will do. Not a common password, nor one with your name in it."
      error={error}
      {...register}
    />
  );
}
