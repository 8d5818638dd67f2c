import { useDelayed } from '#src/lib/use-delayed.ts';
import { ProgressRun } from './run.tsx';

/** Nothing for 0.3 s, then a run. */
export function Loading({ label = 'Reading' }: { label?: string }) {
  const isShown = useDelayed(true, 300);
  if (!isShown)
    return (
      <span className="sr-only" role="status">
        {label}
      </span>
    );
  return (
    <div role="status" className="grid w-56 max-w-full gap-1.5 py-3 text-caption text-ink-3">
      <ProgressRun value={null} label={label} />
      {label}…
    </div>
  );
}

/** The place of lines that are on their way. */
export function Skeleton({ lines = 3 }: { lines?: number }) {
  return (
    <div role="status" className="grid gap-2 py-2">
      <span className="sr-only">Reading</span>
      {Array.from({ length: lines }, (_, line) => (
        <span
          key={line}
          aria-hidden
          className="block h-3 rounded-1 bg-trough"
          style={{ width: `${[92, 76, 84, 61][line % 4] ?? 80}%` }}
        />
      ))}
    </div>
  );
}
