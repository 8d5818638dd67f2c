import type { InputHTMLAttributes, ReactNode, Ref, TextareaHTMLAttributes } from 'react';
import { cx } from '#src/lib/cx.ts';
import {
  CONTROL,
  CONTROL_HEIGHTS,
  FieldFrame,
  type ControlSize,
  type FieldLook,
} from './field-frame.tsx';

interface Props
  extends FieldLook, Omit<InputHTMLAttributes<HTMLInputElement>, 'size' | 'className' | 'id'> {
  ref?: Ref<HTMLInputElement>;
  controlSize?: ControlSize;
  /** Unit at the right of the control. */
  unit?: ReactNode;
  isMono?: boolean;
}

/** A one-line input. Spread `register('name')` into it; `error` takes the form library's error. */
export function Field({
  label,
  hint,
  error,
  isOptional,
  isLabelHidden,
  className,
  controlSize = 'normal',
  unit,
  isMono,
  ...input
}: Props) {
  return (
    <FieldFrame {...{ label, hint, error, isOptional, isLabelHidden, className }}>
      {({ id, describedBy, isInvalid }) => (
        <span className="flex items-center gap-1.5">
          <input
            {...input}
            id={id}
            aria-describedby={describedBy}
            aria-invalid={isInvalid || undefined}
            className={cx(CONTROL, CONTROL_HEIGHTS[controlSize], isMono && 'font-mono')}
          />
          {unit && <span className="text-small whitespace-nowrap text-ink-2">{unit}</span>}
        </span>
      )}
    </FieldFrame>
  );
}

interface AreaProps
  extends FieldLook, Omit<TextareaHTMLAttributes<HTMLTextAreaElement>, 'className' | 'id'> {
  ref?: Ref<HTMLTextAreaElement>;
}

/** Several lines: reasons, rationale, limits. */
export function TextArea({
  label,
  hint,
  error,
  isOptional,
  isLabelHidden,
  className,
  rows = 3,
  ...area
}: AreaProps) {
  return (
    <FieldFrame {...{ label, hint, error, isOptional, isLabelHidden, className }}>
      {({ id, describedBy, isInvalid }) => (
        <textarea
          {...area}
          id={id}
          rows={rows}
          aria-describedby={describedBy}
          aria-invalid={isInvalid || undefined}
          className={cx(CONTROL, 'resize-y px-2 py-1.5')}
        />
      )}
    </FieldFrame>
  );
}
