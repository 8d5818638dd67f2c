import { cx } from '#src/lib/cx.ts';

export interface RunPart {
  /** Share of the whole run, 0 to 1. */
  share: number;
  label: string;
  /** A colour token or CSS colour; ink when left out. */
  fill?: string;
  /** `hatch`: stale or not sampled; `outline`: agreed to be there, nothing laid. */
  look?: 'solid' | 'hatch' | 'outline';
}

interface Props {
  parts: readonly RunPart[];
  /** Read instead of the drawing; says what the whole is. */
  label: string;
  heightPx?: number;
  /** Breaks in the core, as shares of the run. */
  notches?: readonly number[];
  className?: string;
}

const PART_LOOKS = {
  solid: '',
  hatch: 'hatch',
  outline: 'border border-rule-firm',
} as const;

/** A run of core in its trough: parts laid end to end, nothing where nothing is. */
export function Run({ parts, label, heightPx = 12, notches = [], className }: Props) {
  const description = `${label}: ${parts.map((part) => `${part.label} ${Math.round(part.share * 100)} %`).join(', ')}`;
  return (
    <div
      role="img"
      aria-label={description}
      className={cx(
        'relative flex overflow-hidden rounded-1 border border-trough-deep bg-trough p-px',
        className,
      )}
      style={{ height: heightPx + 4 }}
    >
      <div className="relative flex w-full">
        {parts.map((part, index) => (
          <span
            key={index}
            title={`${part.label}, ${Math.round(part.share * 1000) / 10} %`}
            className={cx('block h-full shrink-0', PART_LOOKS[part.look ?? 'solid'])}
            style={{
              width: `${Math.max(0, Math.min(1, part.share)) * 100}%`,
              backgroundColor:
                (part.look ?? 'solid') === 'solid' ? (part.fill ?? 'var(--ink-3)') : 'var(--sheet)',
            }}
          />
        ))}
        {notches.map((notch) => (
          <span
            key={notch}
            aria-hidden
            className="absolute inset-y-0 w-[1.5px] -translate-x-1/2 bg-trough"
            style={{ left: `${notch * 100}%` }}
          />
        ))}
      </div>
    </div>
  );
}

/** Shares as a thin edged bar: groups of a selection, codes of a domain. */
export function ShareBar({
  parts,
  label,
  heightPx = 14,
}: Pick<Props, 'parts' | 'label' | 'heightPx'>) {
  const description = `${label}: ${parts.map((part) => `${part.label} ${Math.round(part.share * 100)} %`).join(', ')}`;
  return (
    <div
      role="img"
      aria-label={description}
      className="flex overflow-hidden rounded-1 border border-rule-firm bg-trough"
      style={{ height: heightPx }}
    >
      {parts.map((part, index) => (
        <span
          key={index}
          title={`${part.label}, ${Math.round(part.share * 1000) / 10} %`}
          className={cx('block h-full', part.look === 'hatch' && 'hatch')}
          style={{
            width: `${part.share * 100}%`,
            backgroundColor: part.look === 'hatch' ? 'var(--sheet)' : (part.fill ?? 'var(--ink-3)'),
          }}
        />
      ))}
    </div>
  );
}

interface ProgressProps {
  /** 0 to 1; null while the amount of work is not known. */
  value: number | null;
  label: string;
  heightPx?: number;
}

/** Work filling a run from left to right. */
export function ProgressRun({ value, label, heightPx = 4 }: ProgressProps) {
  return (
    <div
      role="progressbar"
      aria-label={label}
      aria-valuemin={0}
      aria-valuemax={100}
      aria-valuenow={value === null ? undefined : Math.round(value * 100)}
      className="overflow-hidden rounded-1 bg-trough-deep"
      style={{ height: heightPx }}
    >
      <span
        className={cx(
          'block h-full bg-copper-fill',
          value === null ? 'drift w-2/5' : 'transition-[width]',
        )}
        style={value === null ? undefined : { width: `${Math.max(0.01, value) * 100}%` }}
      />
    </div>
  );
}
