import { useCallback, useEffect, useMemo, useRef } from 'react';
import { saveMapping, type FileMapping, type Upload } from '#contract/files.ts';
import { ApiProblem } from '#src/lib/api-problem.ts';
import { useRefusal } from '#src/lib/use-deposit.ts';
import { useSaveMapping } from './api/intake-mutations.ts';
import { dropDraft, keepDraft, useDraft } from './draft-store.ts';
import { mappingProblems, sameMapping, type MappingProblem } from './mapping.ts';

export interface MappingDraft {
  mapping: FileMapping;
  problems: readonly MappingProblem[];
  /** Changed and not with the server yet. */
  isDirty: boolean;
  isSaving: boolean;
  /** A refusal of the server that names no column. */
  error: unknown;
  change: (mapping: FileMapping) => void;
  /** Saves what is not saved yet; resolves once the server has it. */
  settle: () => Promise<void>;
}

const SAVE_AFTER_MS = 600;

/**
 * The mapping a person edits: saved by itself a moment after the last change, once it can be read at
 * all. Edits stay until the server has them, also across pages, and are never overwritten by a read.
 */
export function useMappingDraft(depositId: number, upload: Upload): MappingDraft {
  const edits = useDraft(upload.id);
  const mapping = edits ?? upload.mapping;
  const refusal = useRefusal(saveMapping);
  const { mutateAsync, isPending, error, reset } = useSaveMapping(depositId, upload.id);
  const own = useMemo(() => mappingProblems(mapping), [mapping]);
  const refused = useMemo(() => refusedColumn(error, mapping), [error, mapping]);
  const canSave = edits !== undefined && own.length === 0 && !refusal && !error;

  const settle = useCallback(async () => {
    if (edits) await mutateAsync(edits);
  }, [edits, mutateAsync]);

  const pending = useRef<(() => void) | null>(null);
  useEffect(() => {
    pending.current = canSave ? () => void settle().catch(() => undefined) : null;
    if (!canSave) return;
    const timer = setTimeout(() => {
      pending.current?.();
      pending.current = null;
    }, SAVE_AFTER_MS);
    return () => clearTimeout(timer);
  }, [canSave, settle]);
  // A page left before the moment is over saves at once.
  useEffect(() => () => pending.current?.(), []);

  const change = useCallback(
    (next: FileMapping) => {
      reset();
      if (sameMapping(next, upload.mapping)) dropDraft(upload.id);
      else keepDraft(upload.id, next);
    },
    [upload, reset],
  );
  return {
    mapping,
    problems: refused ? [...own, refused] : own,
    isDirty: edits !== undefined,
    isSaving: isPending,
    error: refused ? null : error,
    change,
    settle,
  };
}

/** A refusal names its column by its header: it is shown there. */
function refusedColumn(error: unknown, { columns }: FileMapping): MappingProblem | null {
  if (!(error instanceof ApiProblem) || error.code !== 'bad-mapping') return null;
  const { detail } = error.problem;
  const named = columns.findLast(({ header }) => header !== '' && detail.includes(`“${header}”`));
  return { index: named?.index ?? null, message: detail };
}
