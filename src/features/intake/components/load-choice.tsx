import type { Revision, Upload } from '#contract/files.ts';
import { RadioGroup } from '#src/components/ui/choices.tsx';
import { countOf } from '#src/lib/format.ts';
import { KIND_NAMES } from '../kinds.ts';

export type LoadMode = 'replace' | 'add';

interface Props {
  upload: Upload;
  current: Revision;
  mode: LoadMode;
  onPick: (mode: LoadMode) => void;
}

/** What loading does to the table in force. */
export function LoadChoice({ upload, current, mode, onPick }: Props) {
  const name = KIND_NAMES[upload.mapping.kind];
  return (
    <div className="mb-3 rounded-2 border border-rule bg-sheet px-3 py-1.5">
      <RadioGroup
        label={`Revision ${current.number} of ${name} is in force: ${countOf(current.rows, 'row')} from ${current.fileName}. This file`}
        choices={[
          { value: 'replace', label: 'replaces it', hint: 'the earlier revision is kept and can be used again' },
          { value: 'add', label: 'is added to it', hint: 'rows that repeat or overlap what is there are set aside on load' },
        ]}
        value={mode}
        onPick={onPick}
        isInline
      />
    </div>
  );
}
