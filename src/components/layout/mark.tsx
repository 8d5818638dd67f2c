import { cx } from '#src/lib/cx.ts';

/** Three runs of core with the edge stepping down through them. */
export function Mark({ className }: { className?: string }) {
  return (
    <svg
      width="26"
      height="22"
      viewBox="0 0 26 22"
      aria-hidden
      className={cx('shrink-0', className)}
    >
      <path d="M1 4h24M1 11h24M1 18h24" stroke="var(--ink-2)" strokeWidth="4.5" />
      <path d="M9 4h2.500M14 11h2.500M19 18h2.500" stroke="var(--copper)" strokeWidth="4.5" />
    </svg>
  );
}

/** Mark and name; on the narrowest phones `isShort` keeps the name for readers only. */
export function Brand({ isShort }: { isShort?: boolean }) {
  return (
    <span className="inline-flex items-center gap-2 font-read text-[1.125rem] leading-none font-semibold tracking-[-0.005em] text-ink">
      <Mark />
      <span className={cx(isShort && 'max-[420px]:sr-only')}>Selvage</span>
    </span>
  );
}
