import { cx } from '#src/lib/cx.ts';

export type Verdict = 'single' | 'suspect' | 'mixed' | 'too-few';

export const VERDICT_WORDS: Record<Verdict, string> = {
  single: 'single',
  suspect: 'suspect',
  mixed: 'mixed',
  'too-few': 'too few',
};

/** One hump, one with a dashed shoulder, two humps, a flat line. */
const HUMPS: Record<Verdict, { path: string; dash?: string }> = {
  single: { path: 'M1 13C4 13 5 3 9 3s5 10 8 10' },
  suspect: {
    path: 'M1 13C3 13 4 3 7 3c2.600 0 2.600 5 5 5.600C14 9.200 14.500 13 17 13',
    dash: '2.500 1.600',
  },
  mixed: { path: 'M1 13C3 13 3 4 5.500 4S8 11 9 11s1.500-8.500 4-8.500S15 13 17 13' },
  'too-few': { path: 'M1 12.500h16' },
};

const COLOURS: Record<Verdict, string> = {
  single: 'text-good',
  suspect: 'text-warn',
  mixed: 'text-bad',
  'too-few': 'text-ink-3',
};

const WASHES: Record<Verdict, string> = {
  single: 'text-ink-3',
  suspect: 'bg-warn-wash text-warn',
  mixed: 'bg-bad-wash text-bad',
  'too-few': 'text-ink-3',
};

export function VerdictIcon({ verdict }: { verdict: Verdict }) {
  const { path, dash } = HUMPS[verdict];
  return (
    <svg
      width="18"
      height="15"
      viewBox="0 0 18 15"
      fill="none"
      stroke="currentColor"
      strokeWidth="1.700"
      strokeLinecap="round"
      aria-hidden
      className="shrink-0"
    >
      <path d={path} strokeDasharray={dash} />
    </svg>
  );
}

/** A mixing verdict, always with its word. */
export function VerdictMark({ verdict, className }: { verdict: Verdict; className?: string }) {
  return (
    <span
      className={cx(
        'inline-flex items-center gap-[5px] text-small leading-5 font-medium whitespace-nowrap',
        COLOURS[verdict],
        className,
      )}
    >
      <VerdictIcon verdict={verdict} />
      {VERDICT_WORDS[verdict]}
    </span>
  );
}

interface CellProps {
  verdict: Verdict;
  /** Row and column in words, for the accessible name. */
  label: string;
  isPressed: boolean;
  onPress: () => void;
}

/** A cell of the verdict matrix: icon over word, pressed to draw that cell. */
export function VerdictCell({ verdict, label, isPressed, onPress }: CellProps) {
  return (
    <button
      type="button"
      aria-pressed={isPressed}
      aria-label={`${label}: ${VERDICT_WORDS[verdict]}`}
      onClick={onPress}
      className={cx(
        'grid w-full min-w-[46px] justify-items-center rounded-2 border border-transparent px-px pb-0.5 text-tick leading-[11px] hover:outline hover:outline-rule-firm',
        WASHES[verdict],
        isPressed &&
          'outline-2 -outline-offset-1 outline-copper hover:outline-2 hover:outline-copper',
      )}
    >
      <VerdictIcon verdict={verdict} />
      {verdict === 'too-few' ? 'few' : VERDICT_WORDS[verdict]}
    </button>
  );
}
