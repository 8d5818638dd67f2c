import { useEffect, useRef, useState, type KeyboardEvent } from 'react';

interface Props {
  name: string;
  /** Why it cannot be renamed; the name stands alone then. */
  refusal: string | undefined;
  onRename: (name: string) => void;
}

const MOST_LETTERS = 120;

/** A name changed where it stands: Enter keeps it, Esc leaves it as it was. */
export function EditableName({ name, refusal, onRename }: Props) {
  const [text, setText] = useState<string | null>(null);
  const button = useRef<HTMLButtonElement>(null);
  const wasEdited = useRef(false);
  const isEdited = text !== null;
  useEffect(() => {
    if (wasEdited.current && !isEdited) button.current?.focus();
    wasEdited.current = isEdited;
  }, [isEdited]);
  if (refusal !== undefined) return <span title={refusal}>{name}</span>;
  if (text === null) {
    return (
      <button ref={button} type="button" title="Rename" aria-label={`${name}, rename`} className="min-h-6 max-w-full truncate rounded-1 text-left font-medium underline decoration-rule-firm decoration-dotted underline-offset-4 hover:bg-trough" onClick={() => setText(name)}>
        {name}
      </button>
    );
  }
  const keep = () => {
    const wanted = text.trim();
    setText(null);
    if (wanted !== '' && wanted !== name) onRename(wanted);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    event.stopPropagation();
    if (event.key === 'Enter') {
      // Else the same press would open the button that takes the focus.
      event.preventDefault();
      keep();
    } else if (event.key === 'Escape') setText(null);
  };
  return (
    <input
      autoFocus
      aria-label={`Name of ${name}`}
      value={text}
      maxLength={MOST_LETTERS}
      onChange={(event) => setText(event.target.value)}
      onKeyDown={onKeyDown}
      onBlur={keep}
      onFocus={(event) => event.target.select()}
      className="h-6 w-full min-w-32 rounded-1 border border-rule-firm bg-sheet px-1 text-small font-medium text-ink"
    />
  );
}
