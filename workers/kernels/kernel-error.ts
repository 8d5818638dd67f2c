/** What a refusal was about: an index, a count, a name. Kept small, it crosses threads. */
export type KernelErrorDetail = Readonly<Record<string, number | string | null>>;

/**
 * A kernel's refusal of its input. `code` is stable and kebab-case (`shape`, `not-positive`,
 * `too-few-rows`, `too-few-parts`, `singular`, `not-converged`, `bad-parameter`); the message says
 * what was expected, what was found and where.
 */
export class KernelError extends Error {
  readonly code: string;
  readonly detail: KernelErrorDetail;

  constructor(code: string, message: string, detail: KernelErrorDetail = {}) {
    super(message);
    this.name = 'KernelError';
    this.code = code;
    this.detail = detail;
  }
}
