import { cx } from '#src/lib/cx.ts';

export interface Step {
  key: string;
  label: string;
  /** What stands in the way, for a step that cannot be opened yet. */
  waitsFor?: string;
}

interface Props {
  /** Names the list: "Steps of bringing a file in". */
  label: string;
  steps: readonly Step[];
  current: string;
  /** Opens a step; without it the run only shows where one stands. */
  onPick?: (key: string) => void;
  className?: string;
}

/** Steps as pieces of core laid end to end: behind ink, here copper, ahead bare. */
export function Steps({ label, steps, current, onPick, className }: Props) {
  const here = steps.findIndex(({ key }) => key === current);
  return (
    <ol aria-label={label} className={cx('m-0 flex list-none gap-1 p-0 text-caption', className)}>
      {steps.map((step, index) => (
        <li
          key={step.key}
          aria-current={index === here ? 'step' : undefined}
          className={cx(
            'min-w-0 flex-1 border-t-4 pt-1',
            index < here && 'border-ink-3 text-ink-3',
            index === here && 'border-copper font-semibold text-ink',
            index > here && 'border-trough-deep text-ink-3',
          )}
        >
          {onPick && index !== here && !step.waitsFor ? (
            <button
              type="button"
              onClick={() => onPick(step.key)}
              className="-my-1 min-h-6 max-w-full truncate border-0 bg-transparent p-0 text-left hover:text-copper hover:underline"
            >
              {step.label}
            </button>
          ) : (
            <span title={step.waitsFor} className="block truncate">
              {step.label}
            </span>
          )}
        </li>
      ))}
    </ol>
  );
}

/** A life as runs: candidate, proposed, accepted, retired. */
export function LifeRun({ label, steps, current }: Pick<Props, 'label' | 'steps' | 'current'>) {
  const here = steps.findIndex(({ key }) => key === current);
  return (
    <ol aria-label={label} className="m-0 flex list-none gap-0.5 p-0 text-caption">
      {steps.map((step, index) => (
        <li
          key={step.key}
          aria-current={index === here ? 'step' : undefined}
          className={cx(
            'min-w-[4.25rem] border-b-4 px-1.5 pb-[3px]',
            index < here && 'border-ink-3 text-ink-3',
            index === here && 'border-copper font-semibold text-ink',
            index > here && 'border-trough-deep text-ink-3',
          )}
        >
          {step.label}
        </li>
      ))}
    </ol>
  );
}
