import type { FieldValues, Path, UseFormSetError } from 'react-hook-form';
import { ApiProblem } from './api-problem.ts';

/**
 * Puts what the server said of single fields at those fields.
 *
 * @param names The form's own fields; a problem elsewhere is left for `<Problem>`.
 */
export function showFieldProblems<Values extends FieldValues>(
  error: unknown,
  names: readonly Path<Values>[],
  setError: UseFormSetError<Values>,
): void {
  if (!(error instanceof ApiProblem)) return;
  for (const { path, message } of error.problem.fields ?? []) {
    const name = names.find((candidate) => candidate === path || path.endsWith(`.${candidate}`));
    if (name) setError(name, { type: 'server', message });
  }
}

/** The words at a field: what the server said of it, or what the form expects there. */
export const fieldWords = (
  error: { type?: unknown; message?: string | undefined } | undefined,
  expected: string,
): string | undefined =>
  error ? (error.type === 'server' && error.message) || expected : undefined;
