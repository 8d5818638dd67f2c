import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';

interface Props {
  /** What goes here and why it is not there yet, one sentence. */
  children: ReactNode;
  /** The next step: a button or a link. */
  action?: ReactNode;
  className?: string;
}

/** An empty trough, what belongs in it, and the next step. */
export function Empty({ children, action, className }: Props) {
  return (
    <div className={cx('grid justify-items-start gap-2 py-2 text-body text-ink-2', className)}>
      <span
        aria-hidden
        className="block h-3 w-40 max-w-full rounded-1 border border-dotted border-rule-firm"
      />
      <p className="max-w-[34rem] text-pretty">{children}</p>
      {action}
    </div>
  );
}
