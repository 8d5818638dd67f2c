import type { ReactNode } from 'react';
import { cx } from '#src/lib/cx.ts';

/** good: met or sure; warn: warning; bad: set aside, failed, late; note; stale; plain. */
export type Tone = 'good' | 'warn' | 'bad' | 'note' | 'stale' | 'plain';

const WASHES: Record<Tone, string> = {
  good: 'bg-good-wash text-good',
  warn: 'bg-warn-wash text-warn',
  bad: 'bg-bad-wash text-bad',
  note: 'bg-note-wash text-note',
  stale: 'bg-trough text-ink-2',
  plain: 'bg-trough text-ink-2',
};

/** Tick, triangle, cross, ring, three slashes, dash: the state without its colour. */
const SHAPES: Record<Tone, ReactNode> = {
  good: <path d="M1.5 5.5 4 8l4.500-6" strokeWidth="1.8" />,
  warn: <path d="M5 1.2 9.300 8.800H.7z" strokeWidth="1.5" strokeLinejoin="round" />,
  bad: <path d="m1.500 1.500 7 7m0-7-7 7" strokeWidth="1.8" />,
  note: <circle cx="5" cy="5" r="3.5" strokeWidth="1.5" />,
  stale: <path d="M1 9 9 1M1 5l4-4M5 9l4-4" strokeWidth="1.4" />,
  plain: <path d="M1 5h8" strokeWidth="1.6" />,
};

export function ToneMark({ tone, size = 10 }: { tone: Tone; size?: number }) {
  return (
    <svg
      width={size}
      height={size}
      viewBox="0 0 10 10"
      fill="none"
      stroke="currentColor"
      aria-hidden
      className="shrink-0"
    >
      {SHAPES[tone]}
    </svg>
  );
}

interface Props {
  tone?: Tone;
  children: ReactNode;
  /** Whole sentence on hover. */
  title?: string;
  className?: string;
}

/** A state: shape and word, then colour. */
export function Chip({ tone = 'plain', children, title, className }: Props) {
  return (
    <span
      title={title}
      className={cx(
        'inline-flex max-w-full items-center gap-[5px] rounded-1 pr-[7px] pl-1.5 text-small leading-5 font-medium whitespace-nowrap',
        WASHES[tone],
        className,
      )}
    >
      <ToneMark tone={tone} />
      <span className="truncate">{children}</span>
    </span>
  );
}

/** A label that can be taken away: a hole in the tray, a filter in force. */
export function TagChip({
  children,
  onRemove,
  removeLabel,
  isMono,
}: {
  children: ReactNode;
  onRemove?: () => void;
  removeLabel?: string;
  isMono?: boolean;
}) {
  return (
    <span
      className={cx(
        'inline-flex h-6 items-center rounded-2 bg-trough pl-2 text-caption font-medium text-ink',
        !onRemove && 'pr-2',
        isMono && 'font-mono',
      )}
    >
      {children}
      {onRemove && (
        <button
          type="button"
          aria-label={removeLabel ?? 'Remove'}
          onClick={onRemove}
          className="grid size-6 place-items-center rounded-1 border-0 bg-transparent text-ink-3 hover:text-ink"
        >
          <svg
            width="9"
            height="9"
            viewBox="0 0 10 10"
            stroke="currentColor"
            strokeWidth="1.4"
            aria-hidden
          >
            <path d="m1.500 1.500 7 7m0-7-7 7" />
          </svg>
        </button>
      )}
    </span>
  );
}
