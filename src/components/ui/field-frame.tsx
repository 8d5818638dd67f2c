import type { ReactNode } from 'react';
import { useId } from 'react';
import { cx } from '#src/lib/cx.ts';
import { ToneMark } from './chip.tsx';

/** What a form library or a server says about one field. */
export type FieldError = { message?: string | undefined } | string | null | undefined;

export function errorText(error: FieldError): string | undefined {
  if (!error) return undefined;
  const text = (typeof error === 'string' ? error : error.message) || 'Expected another value';
  return text.charAt(0).toUpperCase() + text.slice(1);
}

export interface FieldLook {
  label: ReactNode;
  /** One line under the control, always there. */
  hint?: ReactNode;
  error?: FieldError;
  isOptional?: boolean;
  /** Label for screen readers only, where a table or a heading names the control. */
  isLabelHidden?: boolean;
  className?: string;
}

interface Props extends FieldLook {
  children: (ids: { id: string; describedBy: string | undefined; isInvalid: boolean }) => ReactNode;
}

/** Label above, hint under, error under with a mark and words. */
export function FieldFrame({
  label,
  hint,
  error,
  isOptional,
  isLabelHidden,
  className,
  children,
}: Props) {
  const id = useId();
  const message = errorText(error);
  const describedBy = [hint ? `${id}-hint` : '', message ? `${id}-error` : '']
    .filter(Boolean)
    .join(' ');
  return (
    <div className={cx('grid min-w-0 content-start gap-[3px]', className)}>
      <label
        htmlFor={id}
        className={isLabelHidden ? 'sr-only' : 'text-small font-medium text-ink-2'}
      >
        {label}
        {isOptional && <span className="font-normal text-ink-3"> (optional)</span>}
      </label>
      {children({ id, describedBy: describedBy || undefined, isInvalid: message !== undefined })}
      {hint && (
        <p id={`${id}-hint`} className="text-caption text-ink-3">
          {hint}
        </p>
      )}
      {message && <ErrorLine id={`${id}-error`} message={message} />}
    </div>
  );
}

export function ErrorLine({ id, message }: { id?: string; message: string }) {
  return (
    <p id={id} className="flex items-baseline gap-1.5 text-caption font-medium text-bad">
      <ToneMark tone="bad" size={9} />
      {message}
    </p>
  );
}

export const CONTROL =
  'w-full min-w-0 rounded-2 border border-rule-firm bg-sheet font-ui text-body text-ink aria-invalid:border-bad aria-invalid:outline aria-invalid:-outline-offset-2 aria-invalid:outline-bad disabled:border-dashed disabled:text-ink-3';

export type ControlSize = 'tiny' | 'normal' | 'entry';
export const CONTROL_HEIGHTS: Record<ControlSize, string> = {
  tiny: 'h-[26px] px-1.5 text-small max-md:h-9',
  normal: 'h-8 px-2 max-md:h-11',
  entry: 'h-10 px-2 max-md:h-11',
};
