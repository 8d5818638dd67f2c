import type { Ref, SelectHTMLAttributes } from 'react';
import { cx } from '#src/lib/cx.ts';
import {
  CONTROL,
  CONTROL_HEIGHTS,
  FieldFrame,
  type ControlSize,
  type FieldLook,
} from './field-frame.tsx';

export interface SelectOption<Value extends string = string> {
  value: Value;
  label: string;
  /** Heading it stands under. */
  group?: string;
}

interface Props<Value extends string>
  extends
    FieldLook,
    Omit<SelectHTMLAttributes<HTMLSelectElement>, 'size' | 'className' | 'id' | 'children'> {
  ref?: Ref<HTMLSelectElement>;
  options: readonly SelectOption<Value>[];
  controlSize?: ControlSize;
  /** Called with the typed value; use it, or `onChange` by `register`. */
  onPick?: (value: Value) => void;
}

/** The browser's own list, which every device and reader knows, in house dress. */
export function Select<Value extends string>({
  label,
  hint,
  error,
  isOptional,
  isLabelHidden,
  className,
  options,
  controlSize = 'normal',
  onPick,
  onChange,
  ...select
}: Props<Value>) {
  return (
    <FieldFrame {...{ label, hint, error, isOptional, isLabelHidden, className }}>
      {({ id, describedBy, isInvalid }) => (
        <select
          {...select}
          id={id}
          aria-describedby={describedBy}
          aria-invalid={isInvalid || undefined}
          onChange={(event) => {
            onChange?.(event);
            const picked = options.find(({ value }) => value === event.target.value);
            if (picked) onPick?.(picked.value);
          }}
          className={cx(CONTROL, 'chevron truncate pr-5', CONTROL_HEIGHTS[controlSize])}
        >
          <Options options={options} />
        </select>
      )}
    </FieldFrame>
  );
}

function Options({ options }: { options: readonly SelectOption[] }) {
  const groups = [...new Set(options.map(({ group }) => group))];
  return groups.map((group) => {
    const items = options
      .filter((option) => option.group === group)
      .map(({ value, label }) => (
        <option key={value} value={value}>
          {label}
        </option>
      ));
    return group === undefined ? (
      items
    ) : (
      <optgroup key={group} label={group}>
        {items}
      </optgroup>
    );
  });
}
