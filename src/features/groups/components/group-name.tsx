import { useState, type KeyboardEvent } from 'react';
import type { Group } from '#contract/groupings.ts';

interface Props {
  group: Group;
  /** Why it cannot be renamed. */
  refusal: string | undefined;
  onRename: (name: string) => void;
}

const MOST_LETTERS = 120;

/** A group's name, changed where it stands: Enter keeps it, Esc leaves it as it was. */
export function GroupName({ group, refusal, onRename }: Props) {
  const [text, setText] = useState<string | null>(null);
  if (refusal !== undefined) return <span title={refusal}>{group.name}</span>;
  if (text === null) {
    return (
      <button type="button" title="Rename" className="min-h-6 max-w-full truncate rounded-1 border-b border-dotted border-rule-firm text-left font-medium hover:bg-trough" onClick={() => setText(group.name)}>
        {group.name}
        <span className="sr-only">, rename</span>
      </button>
    );
  }
  const keep = () => {
    const name = text.trim();
    setText(null);
    if (name !== '' && name !== group.name) onRename(name);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    event.stopPropagation();
    if (event.key === 'Enter') keep();
    else if (event.key === 'Escape') setText(null);
  };
  return (
    <input
      autoFocus
      aria-label={`Name of ${group.name}`}
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
