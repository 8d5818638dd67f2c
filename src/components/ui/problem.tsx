import type { ReactNode } from 'react';
import { ApiProblem } from '#src/lib/api-problem.ts';
import { cx } from '#src/lib/cx.ts';
import { Button } from './button.tsx';
import { ToneMark } from './chip.tsx';

interface Props {
  error: unknown;
  /** The one button; "Try again" for a read. */
  action?: { label: string; run: () => void };
  children?: ReactNode;
  className?: string;
}

/** What was expected, what was found, where, and one button. */
export function Problem({ error, action, children, className }: Props) {
  const { title, detail, fields, requestId } = describe(error);
  return (
    <div
      role="alert"
      className={cx(
        'rounded-2 border border-bad bg-bad-wash px-3 py-2 text-small text-ink',
        className,
      )}
    >
      <p className="flex items-baseline gap-1.5 font-semibold text-bad">
        <ToneMark tone="bad" />
        {title}
      </p>
      {detail && <p className="mt-0.5">{detail}</p>}
      {fields.length > 0 && (
        <ul className="mt-1 grid gap-0.5">
          {fields.map(({ path, message }) => (
            <li key={`${path} ${message}`}>
              {path && <span className="font-mono text-[0.92em]">{path}</span>}
              {path && ': '}
              {message}
            </li>
          ))}
        </ul>
      )}
      {children}
      {(action || requestId) && (
        <div className="mt-1.5 flex flex-wrap items-center justify-between gap-2">
          {action ? (
            <Button size="tiny" onClick={action.run}>
              {action.label}
            </Button>
          ) : (
            <span />
          )}
          {requestId && <span className="font-mono text-tick text-ink-3">{requestId}</span>}
        </div>
      )}
    </div>
  );
}

interface Description {
  title: string;
  detail: string;
  fields: readonly { path: string; message: string }[];
  requestId: string;
}

function describe(error: unknown): Description {
  if (error instanceof ApiProblem) {
    const { title, detail, fields = [], requestId, status } = error.problem;
    // The number helps to find a fault of ours; a refusal needs none.
    return { title, detail: detail === title ? '' : detail, fields, requestId: status >= 500 ? requestId : '' };
  }
  const detail = error instanceof Error ? error.message : String(error);
  return { title: 'This could not be done', detail, fields: [], requestId: '' };
}
