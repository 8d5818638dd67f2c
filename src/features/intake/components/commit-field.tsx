import { useState } from 'react';
import { Field } from '#src/components/ui/field.tsx';

interface Props {
  label: string;
  value: string;
  isFixed: boolean;
  onCommit: (text: string) => void;
  /** What is wrong with a text; such a text is not taken. */
  problemOf?: (text: string) => string | null;
  list?: string;
  maxLength?: number;
  className?: string;
}

/** A small text that is taken on Enter or when the field is left, and given up on Escape. */
export function CommitField({ label, value, isFixed, onCommit, problemOf, list, maxLength, className }: Props) {
  const [typed, setTyped] = useState<string | null>(null);
  const text = (typed ?? value).trim();
  const problem = typed === null ? null : (problemOf?.(text) ?? null);
  const commit = () => {
    if (typed === null || problem) return;
    if (text !== value) onCommit(text);
    setTyped(null);
  };
  return (
    <Field
      label={label}
      isLabelHidden
      controlSize="tiny"
      className={className ?? ''}
      value={typed ?? value}
      list={list}
      maxLength={maxLength}
      disabled={isFixed}
      error={problem}
      spellCheck={false}
      autoComplete="off"
      onChange={(event) => setTyped(event.target.value)}
      onBlur={commit}
      onKeyDown={(event) => {
        if (event.key === 'Enter') commit();
        if (event.key === 'Escape') setTyped(null);
      }}
    />
  );
}
