import { Upload } from 'lucide-react';
import { useId, useRef, useState, type DragEvent, type ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';
import { Button } from './button.tsx';
import { ErrorLine } from './field-frame.tsx';

interface Props {
  /** "Drop CSV files here" */
  label: string;
  hint?: ReactNode;
  /** Endings taken, with dots: ['.csv', '.txt']. */
  endings: readonly string[];
  onFiles: (files: File[]) => void;
  isSingle?: boolean;
  unavailable?: string;
  className?: string;
}

const isSheet = (name: string): boolean => /\.(xlsx?|xlsm|ods)$/i.test(name);

/** A bare trough to lay files in: drop them, or browse; several at once. */
export function FileDrop({
  label,
  hint,
  endings,
  onFiles,
  isSingle,
  unavailable,
  className,
}: Props) {
  const id = useId();
  const input = useRef<HTMLInputElement>(null);
  const [isOver, setOver] = useState(false);
  const [refused, setRefused] = useState('');
  const take = (list: FileList | null) => {
    if (!list || unavailable) return;
    const files = Array.from(list);
    const good = files.filter(({ name }) =>
      endings.some((ending) => name.toLowerCase().endsWith(ending)),
    );
    const bad = files.filter((file) => !good.includes(file)).map(({ name }) => name);
    setRefused(bad.length > 0 ? `Expected ${endings.join(', ')}; found ${bad.join(', ')}.${bad.some(isSheet) ? ' Save the sheet as CSV and bring that in.' : ''}` : '');
    if (good.length > 0) onFiles(isSingle ? good.slice(0, 1) : good);
  };
  const onDrag = (event: DragEvent, isInside: boolean) => {
    event.preventDefault();
    setOver(isInside && !unavailable);
  };
  return (
    <div className={className}>
      <div
        onDragOver={(event) => onDrag(event, true)}
        onDragLeave={(event) => onDrag(event, false)}
        onDrop={(event) => {
          onDrag(event, false);
          take(event.dataTransfer.files);
        }}
        className={cx(
          'flex flex-wrap items-center gap-x-3 gap-y-2 rounded-2 border border-dashed px-4 py-4 transition-colors',
          isOver ? 'border-copper bg-copper-wash' : 'border-rule-firm bg-trough',
        )}
      >
        <div className="min-w-0 flex-1">
          <label htmlFor={id} className="text-body font-semibold text-ink">
            {label}
          </label>
          {hint && <p className="text-caption text-ink-2">{hint}</p>}
        </div>
        <Button icon={Upload} unavailable={unavailable} onClick={() => input.current?.click()}>
          Browse
        </Button>
        <input
          ref={input}
          id={id}
          type="file"
          multiple={!isSingle}
          accept={endings.join(',')}
          tabIndex={-1}
          className="sr-only"
          onChange={(event) => {
            take(event.target.files);
            event.target.value = '';
          }}
        />
      </div>
      {refused && (
        <div role="alert" className="mt-1">
          <ErrorLine message={refused} />
        </div>
      )}
    </div>
  );
}
